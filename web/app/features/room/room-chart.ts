import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { RoomSeries } from '#shared/contract/rooms';
import type { StudioFormats } from '../../core/time/studio-formats';
import { type ChartOptions, EChart } from '../../ui/e-chart';
import { roomChartOptions } from './room-chart-options';

/** The room's chart; loaded only when it comes into view. */
@Component({
  selector: 'sr-room-chart',
  imports: [EChart],
  template: `<sr-e-chart [options]="options()" [label]="label()" [height]="narrow ? 360 : 420" />`,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomChartView {
  readonly series = input.required<RoomSeries>();
  /** Ends of the period, epoch ms. */
  readonly shown = input.required<{ readonly from: number; readonly to: number }>();
  readonly formats = input.required<StudioFormats>();
  /** The chart in words. */
  readonly label = input.required<string>();

  protected readonly narrow = matchMedia('(max-width: 700px)').matches;
  protected readonly options = computed<ChartOptions>(() => {
    const chart = { series: this.series(), ...this.shown(), formats: this.formats(), narrow: this.narrow };
    return (colours) => roomChartOptions(chart, colours);
  });
}
