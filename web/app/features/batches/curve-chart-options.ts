import type { EChartsCoreOption } from 'echarts/core';
import type { CurvePoint } from '#shared/contract/batches';
import type { StudioFormats } from '../../core/time/studio-formats';
import { DAY_MS } from '../../core/time/zoned-time';
import { figure } from '../../core/units/measure-words';
import type { ChartColours } from '../../ui/chart-palette';

const MOST_LABELS = 7;

/**
 * Hardening and scent in per cent above, cure age in days with its 10–90 % range below, on one time axis; what is forecast is
 * drawn in dashes.
 */
export function curveChartOptions(
  points: readonly CurvePoint[],
  formats: StudioFormats,
  colours: ChartColours,
): EChartsCoreOption {
  const at = (point: CurvePoint) => Date.parse(point.at);
  const [first, last] = [points[0], points.at(-1)];
  const span = first && last ? at(last) - at(first) : DAY_MS;
  const interval = Math.max(1, Math.ceil(span / DAY_MS / MOST_LABELS)) * DAY_MS;
  const timeAxis = (gridIndex: number) => ({
    gridIndex,
    type: 'value',
    min: first ? at(first) : 0,
    max: last ? at(last) : DAY_MS,
    interval,
    axisLabel: { color: colours.muted, formatter: (value: number) => formats.day(value), hideOverlap: true },
    axisLine: { lineStyle: { color: colours.hairline } },
    splitLine: { show: false },
  });
  const valueAxis = (gridIndex: number, name: string, max?: number) => ({
    gridIndex,
    type: 'value',
    name,
    max,
    nameTextStyle: { color: colours.muted, align: 'left' },
    axisLabel: { color: colours.muted },
    splitLine: { lineStyle: { color: colours.hairline } },
  });
  const parts = (name: string, axis: number, colour: string, read: (point: CurvePoint) => number) =>
    [false, true].map((forecast) => ({
      name,
      type: 'line',
      xAxisIndex: axis,
      yAxisIndex: axis,
      showSymbol: false,
      lineStyle: { color: colour, width: 2, type: forecast ? 'dashed' : 'solid' },
      itemStyle: { color: colour },
      data: points
        .filter(
          (point, index) => point.forecast === forecast || (forecast && points[index + 1]?.forecast === true),
        )
        .map((point) => [at(point), read(point)]),
    }));
  const range = (read: (point: CurvePoint) => number, area: boolean) => ({
    name: 'range',
    type: 'line',
    xAxisIndex: 1,
    yAxisIndex: 1,
    stack: 'range',
    showSymbol: false,
    silent: true,
    tooltip: { show: false },
    lineStyle: { opacity: 0 },
    ...(area ? { areaStyle: { color: colours.copper, opacity: 0.22 } } : {}),
    data: points.map((point) => [at(point), read(point)]),
  });
  return {
    aria: { enabled: true },
    grid: [
      { left: 44, right: 18, top: 28, height: '38%' },
      { left: 44, right: 18, bottom: 28, height: '34%' },
    ],
    xAxis: [{ ...timeAxis(0), axisLabel: { show: false } }, timeAxis(1)],
    yAxis: [valueAxis(0, '% hardened (ink), % scent settled (copper)', 100), valueAxis(1, 'cure age, days')],
    tooltip: {
      trigger: 'axis',
      renderMode: 'richText',
      formatter: (items: readonly { seriesName: string; value: [number, number] }[]) => {
        const time = items[0]?.value[0];
        const lines = items
          .filter(({ seriesName }) => seriesName !== 'range')
          .map(({ seriesName, value }) => `${seriesName} ${figure(value[1], 1)}`);
        return time === undefined ? '' : [formats.dayAndTime(time), ...new Set(lines)].join('\n');
      },
    },
    series: [
      ...parts('hardening %', 0, colours.ink, (point) => point.hardening * 100),
      ...parts('scent %', 0, colours.copper, (point) => point.scent * 100),
      range((point) => point.lowDays, false),
      range((point) => point.highDays - point.lowDays, true),
      ...parts('cure age d', 1, colours.ink, (point) => point.cureAgeDays),
    ],
  };
}
