import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { ribbonPaths } from './ribbon-paths';

const SIZE = { width: 432, height: 44 };

/** Temperature of the last 24 hours against the room's band, as a small drawing with its figures in words. */
@Component({
  selector: 'sr-temperature-ribbon',
  template: `<figure>
    <div class="plot">
      <svg [attr.viewBox]="viewBox" preserveAspectRatio="none" role="img" [attr.aria-label]="label()">
        <rect
          class="band"
          x="0"
          width="432"
          [attr.y]="paths().bandTop"
          [attr.height]="paths().bandBottom - paths().bandTop"
        />
        @for (gap of paths().gaps; track gap.x) {
          <rect class="gap" y="0" height="44" [attr.x]="gap.x" [attr.width]="gap.width" />
        }
        <path class="hot" [attr.d]="paths().hot" />
        <path class="cold" [attr.d]="paths().cold" />
        <path class="line" [attr.d]="paths().line" />
      </svg>
      <span class="edge" [style.inset-block-start.px]="paths().bandTop" aria-hidden="true">{{
        highText()
      }}</span>
      <span class="edge" [style.inset-block-start.px]="paths().bandBottom" aria-hidden="true">{{
        lowText()
      }}</span>
    </div>
    <figcaption aria-hidden="true">
      <span>{{ startText() }}</span><span>{{ endText() }}</span>
    </figcaption>
  </figure>`,
  styles: `
    :host {
      display: block;
    }
    .plot {
      position: relative;
      padding-inline-end: 34px;
    }
    svg {
      display: block;
      inline-size: 100%;
      block-size: 44px;
      overflow: visible;
    }
    .band {
      fill: color-mix(in oklab, var(--sr-good) 14%, transparent);
    }
    .gap {
      fill: color-mix(in oklab, var(--sr-still) 22%, transparent);
    }
    .hot {
      fill: color-mix(in oklab, var(--sr-heat) 50%, transparent);
    }
    .cold {
      fill: color-mix(in oklab, var(--sr-cold) 50%, transparent);
    }
    .line {
      fill: none;
      stroke: var(--mat-sys-on-surface);
      stroke-width: 1.7;
      vector-effect: non-scaling-stroke;
    }
    .edge {
      position: absolute;
      inset-inline-end: 0;
      translate: 0 -50%;
      font-size: 12px;
      line-height: 1;
      color: var(--mat-sys-on-surface-variant);
    }
    figcaption {
      display: flex;
      justify-content: space-between;
      padding: 3px 34px 0 0;
      font-size: 12px;
      line-height: 1.2;
      color: var(--mat-sys-on-surface-variant);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TemperatureRibbon {
  /** Ten-minute means, oldest first; null is a gap. */
  readonly celsius = input.required<readonly (number | null)[]>();
  readonly low = input.required<number>();
  readonly high = input.required<number>();
  /** The drawing in words. */
  readonly label = input.required<string>();
  /** Edges of the band as text in the studio's unit. */
  readonly lowText = input.required<string>();
  readonly highText = input.required<string>();
  readonly startText = input('24 h ago');
  readonly endText = input('now');

  protected readonly viewBox = `0 0 ${SIZE.width} ${SIZE.height}`;
  protected readonly paths = computed(() =>
    ribbonPaths(this.celsius(), { low: this.low(), high: this.high() }, SIZE),
  );
}
