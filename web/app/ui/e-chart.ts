import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { LineChart } from 'echarts/charts';
import {
  AriaComponent,
  GridComponent,
  MarkAreaComponent,
  MarkLineComponent,
  TooltipComponent,
} from 'echarts/components';
import * as echarts from 'echarts/core';
import type { EChartsCoreOption } from 'echarts/core';
import { CanvasRenderer } from 'echarts/renderers';
import { NgxEchartsDirective, provideEchartsCore } from 'ngx-echarts';
import { type ChartColours, ChartPalette } from './chart-palette';

echarts.use([
  AriaComponent,
  CanvasRenderer,
  GridComponent,
  LineChart,
  MarkAreaComponent,
  MarkLineComponent,
  TooltipComponent,
]);

/** Makes a chart's options from the colours of the present face. */
export type ChartOptions = (colours: ChartColours) => EChartsCoreOption;

/** A line chart on a canvas. Large: put it into a `@defer` block. Other series are registered by their own component. */
@Component({
  selector: 'sr-e-chart',
  imports: [NgxEchartsDirective],
  providers: [provideEchartsCore({ echarts })],
  template: `<div
    echarts
    role="img"
    [attr.aria-label]="label()"
    [options]="drawn()"
    [style.block-size.px]="height()"
  ></div>`,
  styles: `
    :host {
      display: block;
      min-inline-size: 0;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class EChart {
  readonly options = input.required<ChartOptions>();
  /** The chart in words. */
  readonly label = input.required<string>();
  readonly height = input(320);

  private readonly palette = inject(ChartPalette);
  protected readonly drawn = computed<EChartsCoreOption>(() => ({
    animation: false,
    textStyle: { fontFamily: "'Roboto Condensed', sans-serif" },
    ...this.options()(this.palette.colours()),
  }));
}
