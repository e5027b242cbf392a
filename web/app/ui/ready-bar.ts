import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/**
 * A batch on a time axis: the wax from its pour to the middle of its ready range, turning opaque along the way, the
 * 10–90 % range as a whisker, gates as notches. All places are parts of the axis, 0–1; what lies outside is cut off.
 */
@Component({
  selector: 'sr-ready-bar',
  template: `<span
      class="bar"
      [style.inset-inline-start.%]="at(start())"
      [style.inset-inline-end.%]="100 - at(middle())"
    ></span>
    @for (notch of notches(); track $index) {
      <span class="notch" [style.inset-inline-start.%]="at(notch)"></span>
    }
    @if (high() > low()) {
      <span
        class="whisker"
        [style.inset-inline-start.%]="at(low())"
        [style.inset-inline-end.%]="100 - at(high())"
        [class.open]="high() > 1"
      ></span>
    }
    <span class="middle" [style.inset-inline-start.%]="at(middle())"></span>`,
  styles: `
    :host {
      position: relative;
      display: block;
      block-size: 14px;
    }
    span {
      position: absolute;
      inset-block: 0;
    }
    .bar {
      border: 1px solid var(--sr-wax-edge);
      background: linear-gradient(to right, var(--sr-honey), var(--sr-ivory));
    }
    .whisker {
      inset-block: 1px;
      border-inline: 2px solid var(--sr-copper);
      background: linear-gradient(var(--sr-copper), var(--sr-copper)) center / 100% 2px no-repeat;
    }
    .whisker.open {
      border-inline-end: 0;
    }
    .middle,
    .notch {
      inline-size: 3px;
      margin-inline-start: -1.5px;
      background: var(--sr-copper);
    }
    .notch {
      inset-block: 8px 0;
      background: var(--sr-wax-ink);
    }
    :host(.ready) .middle {
      background: var(--sr-good);
    }
  `,
  host: {
    '[class.ready]': 'ready()',
    '[attr.role]': "label() ? 'img' : null",
    '[attr.aria-label]': 'label() || null',
    '[attr.aria-hidden]': "label() ? null : 'true'",
  },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ReadyBar {
  readonly start = input.required<number>();
  readonly middle = input.required<number>();
  readonly low = input.required<number>();
  readonly high = input.required<number>();
  readonly notches = input<readonly number[]>([]);
  readonly ready = input(false);
  /** The bar in words; '' where text beside it says the same, e.g. "L-118, poured 24 April, ready 8 May, 6 to 10 May". */
  readonly label = input('');

  protected at(part: number): number {
    return Math.min(1, Math.max(0, part)) * 100;
  }
}
