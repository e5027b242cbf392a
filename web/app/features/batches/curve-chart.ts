import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { CurvePoint } from '#shared/contract/batches';
import type { StudioFormats } from '../../core/time/studio-formats';
import { type ChartOptions, EChart } from '../../ui/e-chart';
import { curveChartOptions } from './curve-chart-options';

/** The cure curve; loaded only when it comes into view. */
@Component({
  selector: 'sr-curve-chart',
  imports: [EChart],
  template: `<sr-e-chart [options]="options()" [label]="label()" [height]="360" />`,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CurveChart {
  readonly points = input.required<readonly CurvePoint[]>();
  readonly formats = input.required<StudioFormats>();
  readonly label = input.required<string>();

  protected readonly options = computed<ChartOptions>(() => {
    const [points, formats] = [this.points(), this.formats()];
    return (colours) => curveChartOptions(points, formats, colours);
  });
}
