import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';

/** A value with its interval; null where nothing is known. */
export interface Dot {
  readonly label: string;
  readonly value: number | null;
  readonly low: number | null;
  readonly high: number | null;
  /** The same in words. */
  readonly words: string;
}

/** Dots with intervals on one common scale, each with its words beside it. */
@Component({
  selector: 'sr-dot-plot',
  template: `<ul>
    @for (dot of placed(); track dot.label) {
      <li>
        <span class="label">{{ dot.label }}</span>
        <span class="axis" aria-hidden="true">
          @if (dot.low !== null && dot.high !== null) {
            <span
              class="interval"
              [style.inset-inline-start.%]="dot.low"
              [style.inset-inline-end.%]="100 - dot.high"
            ></span>
          }
          @if (dot.value !== null) {
            <span class="dot" [style.inset-inline-start.%]="dot.value"></span>
          }
        </span>
        <span class="words">{{ dot.words }}</span>
      </li>
    }
  </ul>`,
  styles: `
    ul {
      list-style: none;
      margin: 0;
      padding: 0;
    }
    li {
      display: grid;
      grid-template-columns: minmax(90px, 150px) minmax(0, 1fr) minmax(90px, 190px);
      gap: 12px;
      align-items: center;
      padding: 5px 0;
      border-block-end: 1px solid var(--mat-sys-outline-variant);
    }
    .axis {
      position: relative;
      block-size: 14px;
    }
    .dot {
      position: absolute;
      inset-block: 2px;
      inline-size: 10px;
      margin-inline-start: -5px;
      border-radius: 50%;
      background: var(--sr-copper);
    }
    .interval {
      position: absolute;
      inset-block: 6px;
      background: var(--sr-copper);
      opacity: 0.55;
    }
    .words {
      text-align: end;
    }
    @media (max-width: 520px) {
      li {
        grid-template-columns: 1fr auto;
      }
      .axis {
        grid-column: 1 / -1;
        grid-row: 2;
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class DotPlot {
  readonly dots = input.required<readonly Dot[]>();

  protected readonly placed = computed(() => {
    const values = this.dots()
      .flatMap(({ value, low, high }) => [value, low, high])
      .filter((value) => value !== null);
    const [lowest, highest] = [Math.min(...values), Math.max(...values)];
    const span = highest - lowest || 1;
    // A margin keeps dots off the edges.
    const place = (value: number | null) => (value === null ? null : 6 + (88 * (value - lowest)) / span);
    return this.dots().map((dot) => ({
      ...dot,
      value: place(dot.value),
      low: place(dot.low),
      high: place(dot.high),
    }));
  });
}
