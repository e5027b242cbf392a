import type { RoomSeries, SeriesPoint } from '#shared/contract/rooms';
import type { StudioFormats } from '../../core/time/studio-formats';
import { timeTicks } from '../../core/time/time-ticks';
import type { ChartColours } from '../../ui/chart-palette';

export interface RoomChart {
  readonly series: RoomSeries;
  /** Ends of the period, epoch ms. */
  readonly from: number;
  readonly to: number;
  readonly formats: StudioFormats;
  /** Drawn on a phone: fewer ticks, no mark labels. */
  readonly narrow: boolean;
}

const STEPS = [1, 2, 5, 10, 20, 25];

/** Time along the studio's wall clock. */
export function timeAxis(
  { from, to, formats, narrow }: RoomChart,
  index: number,
  labelled: boolean,
  colours: ChartColours,
) {
  const ticks = timeTicks(from, to, formats.timeZone, narrow ? 4 : 9);
  const labels = new Map(ticks.map((tick) => [tick.at, tick.label]));
  const customValues = ticks.map((tick) => tick.at);
  return {
    type: 'value',
    gridIndex: index,
    min: from,
    max: to,
    axisLine: { lineStyle: { color: colours.hairline } },
    axisTick: { customValues, lineStyle: { color: colours.hairline } },
    axisLabel: {
      show: labelled,
      customValues,
      color: colours.muted,
      fontSize: 13,
      hideOverlap: true,
      formatter: (value: number) => labels.get(value) ?? '',
    },
    splitLine: { show: false },
    axisPointer: { label: { show: false }, lineStyle: { color: colours.muted } },
  };
}

export function valueAxis(index: number, colours: ChartColours, values: readonly number[], lines: number) {
  return {
    type: 'value',
    gridIndex: index,
    ...niceRange(values, lines),
    axisLabel: { color: colours.muted, fontSize: 13 },
    splitLine: { lineStyle: { color: colours.hairline } },
  };
}

/** Round ends and a round step that hold all values. Worked value: ([17.2, 26.3], 5) → 16 to 28 by 2. */
export function niceRange(
  values: readonly number[],
  lines: number,
): { min: number; max: number; interval: number } {
  const low = Math.min(...values);
  const high = Math.max(...values);
  const interval = STEPS.find((step) => (high - low) / step <= lines) ?? 50;
  const min = Math.floor(low / interval) * interval;
  return { min, max: Math.max(Math.ceil(high / interval) * interval, min + interval), interval };
}

/** Every temperature in °C that must be seen. */
export function degreesShown(points: readonly SeriesPoint[], series: RoomSeries): number[] {
  const measured = points.flatMap((point) => [point.tMin, point.tMax, point.t, point.dewPoint]);
  const limits = series.frostingLimits.map((limit) => limit.celsius);
  return [...measured.filter((value) => value !== null), ...limits, series.band.low, series.band.high];
}

export function humidityShown(points: readonly SeriesPoint[]): number[] {
  const measured = points
    .flatMap((point) => [point.rhMin, point.rhMax, point.rh])
    .filter((value) => value !== null);
  return measured.length > 0 ? measured : [40, 60];
}
