import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';

/** What a mark stands for; each has a shape of its own besides its colour. */
export type Status = 'heat' | 'cold' | 'damp' | 'swinging' | 'silent' | 'good' | 'due' | 'notice';

const SHAPES: Record<Status, string> = {
  heat: 'M8 2 15 14H1Z',
  cold: 'M1 2H15L8 14Z',
  damp: 'M8 1C11 6 13 8 13 10.5A5 5 0 0 1 3 10.5C3 8 5 6 8 1Z',
  swinging: 'M8 0 12 6H9V10H12L8 16 4 10H7V6H4Z',
  silent: 'M2 2H14V14H2Z',
  good: 'M8 2A6 6 0 1 1 7.99 2Z',
  due: 'M8 1 15 8 8 15 1 8Z',
  notice: 'M2 6H14V10H2Z',
};

/** The shape before a sentence. It carries no name of its own: the sentence beside it says the same in words. */
@Component({
  selector: 'sr-status-mark',
  template: `<svg viewBox="0 0 16 16" aria-hidden="true" focusable="false">
    @if (status() === 'silent') {
      <path d="M2 2H14V14H2Z M2 6 6 2 M2 10 10 2 M2 14 14 2 M6 14 14 6 M10 14 14 10" class="hatched" />
    } @else {
      <path [attr.d]="shape()" />
    }
  </svg>`,
  styles: `
    :host {
      display: inline-flex;
      inline-size: 14px;
      block-size: 14px;
      flex: none;
    }
    :host(.heat) {
      color: var(--sr-heat);
    }
    :host(.cold) {
      color: var(--sr-cold);
    }
    :host(.damp) {
      color: var(--sr-damp);
    }
    :host(.swinging),
    :host(.due) {
      color: var(--sr-copper);
    }
    :host(.silent),
    :host(.notice) {
      color: var(--sr-still);
    }
    :host(.good) {
      color: var(--sr-good);
    }
    svg {
      inline-size: 100%;
      block-size: 100%;
      fill: currentColor;
    }
    .hatched {
      fill: none;
      stroke: currentColor;
      stroke-width: 1.2;
    }
  `,
  host: { '[class]': 'status()' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class StatusMark {
  readonly status = input.required<Status>();
  protected readonly shape = computed(() => SHAPES[this.status()]);
}
