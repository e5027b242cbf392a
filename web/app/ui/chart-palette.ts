import { DestroyRef, DOCUMENT, inject, Injectable, signal } from '@angular/core';

const NAMES = {
  ink: '--mat-sys-on-surface',
  muted: '--mat-sys-on-surface-variant',
  hairline: '--mat-sys-outline-variant',
  paper: '--mat-sys-surface',
  heat: '--sr-heat',
  cold: '--sr-cold',
  damp: '--sr-damp',
  good: '--sr-good',
  still: '--sr-still',
  copper: '--sr-copper',
  honey: '--sr-honey',
  waxEdge: '--sr-wax-edge',
} as const;

/** The face's colours as a canvas understands them. */
export type ChartColours = Readonly<Record<keyof typeof NAMES, string>>;

/** Colours for charts; new when the face turns from day to night. */
@Injectable({ providedIn: 'root' })
export class ChartPalette {
  private readonly document = inject(DOCUMENT);
  private readonly writableColours = signal(this.read());
  readonly colours = this.writableColours.asReadonly();

  constructor() {
    const renew = () => this.writableColours.set(this.read());
    const watcher = new MutationObserver(renew);
    watcher.observe(this.document.documentElement, { attributeFilter: ['data-face'] });
    const night = matchMedia('(prefers-color-scheme: dark)');
    night.addEventListener('change', renew);
    inject(DestroyRef).onDestroy(() => {
      watcher.disconnect();
      night.removeEventListener('change', renew);
    });
  }

  private read(): ChartColours {
    const probe = this.document.createElement('span');
    this.document.body.append(probe);
    const colours = Object.entries(NAMES).map(([name, property]) => {
      probe.style.color = `var(${property})`;
      return [name, getComputedStyle(probe).color];
    });
    probe.remove();
    return Object.fromEntries(colours) as ChartColours;
  }
}
