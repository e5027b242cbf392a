import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/** Temperature, humidity and dew point in large figures. Stale figures are hatched and say how old they are. */
@Component({
  selector: 'sr-room-figures',
  template: `@if (ago()) {
      <span class="ago">last, {{ ago() }} ago</span>
    }
    <span class="figure main"
      ><b>{{ temperature() }}</b
      ><span>{{ unit() }}</span></span
    >
    <span class="figure"
      ><b>{{ humidity() }}</b
      ><span>% humidity</span></span
    >
    <span class="figure"
      ><b>{{ dewPoint() }}</b
      ><span>dew point {{ unit() }}</span></span
    >`,
  styles: `
    :host {
      display: flex;
      gap: 20px;
      align-items: flex-end;
    }
    .figure {
      text-align: end;
      line-height: 1;
    }
    b {
      display: block;
      font-size: 22px;
      font-weight: 500;
    }
    .figure > span {
      display: block;
      margin-block-start: 3px;
      font-size: 12.5px;
      color: var(--mat-sys-on-surface-variant);
      white-space: nowrap;
    }
    .main b {
      font-size: 34px;
    }
    :host(.heat) .main b {
      color: var(--sr-heat);
    }
    :host(.cold) .main b {
      color: var(--sr-cold);
    }
    :host(.damp) .figure:not(.main) b {
      color: var(--sr-damp);
    }
    .ago {
      align-self: center;
      font-size: 14px;
      color: var(--mat-sys-on-surface-variant);
    }
    :host(.stale) b {
      color: var(--sr-still);
      padding-inline: 6px;
      background: repeating-linear-gradient(45deg, transparent 0 4px, var(--sr-hatch) 4px 5px);
      text-shadow:
        0 0 3px var(--mat-sys-surface),
        0 0 3px var(--mat-sys-surface);
    }
    :host(.large) .main b {
      font-size: 54px;
    }
    :host(.large) b {
      font-size: 32px;
    }
  `,
  host: {
    '[class.stale]': "ago() !== ''",
    '[class.heat]': "condition() === 'heat'",
    '[class.cold]': "condition() === 'cold'",
    '[class.damp]': "condition() === 'damp'",
    '[class.large]': 'large()',
  },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomFigures {
  /** Figures as text without their unit; "–" when there never was one. */
  readonly temperature = input.required<string>();
  readonly humidity = input.required<string>();
  readonly dewPoint = input.required<string>();
  /** "°C" or "°F" */
  readonly unit = input.required<string>();
  /** How old stale figures are, e.g. "14 min"; '' when they are live. */
  readonly ago = input('');
  readonly condition = input('fine');
  readonly large = input(false);
}
