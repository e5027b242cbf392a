import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/** Stands where something is still on its way; shows only after a moment, so that a quick answer does not flicker. */
@Component({
  selector: 'sr-loading-note',
  template: `<p role="status">{{ text() }}</p>`,
  styles: `
    p {
      padding: 18px 0;
      color: var(--mat-sys-on-surface-variant);
      animation: appear 0s 300ms both;
    }
    @keyframes appear {
      from {
        visibility: hidden;
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class LoadingNote {
  readonly text = input('Loading…');
}
