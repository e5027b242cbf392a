import type { EChartsCoreOption } from 'echarts/core';
import type { RoomMark, RoomSeries, SeriesPoint } from '#shared/contract/rooms';
import { toFahrenheit } from '#shared/units/temperature';
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

type Value = readonly [number, number | null];

const CELL_MINUTES = 10;
const STEPS = [1, 2, 5, 10, 20];
const LABELLED_MARKS = 6;
const DENSE = 700;

/**
 * Temperature and dew point above, humidity below, on one time axis of the studio's wall clock: the room's band, the
 * frosting limits of what stands there, alerts as stretches, moves and pours as lines, gaps as gaps, and the range
 * from lowest to highest where a point stands for more than ten minutes.
 */
export function roomChartOptions(chart: RoomChart, colours: ChartColours): EChartsCoreOption {
  const { series, formats } = chart;
  const degrees = (celsius: number) => (formats.unit === 'C' ? celsius : toFahrenheit(celsius));
  const zoomedOut = series.stepMinutes > CELL_MINUTES;
  const points = withGaps(series);
  const pick = (read: (point: SeriesPoint) => number | null, write = (value: number) => value): Value[] =>
    points.map((point) => {
      const value = read(point);
      return [Date.parse(point.at), value === null ? null : write(value)];
    });
  const line = (name: string, axis: number, colour: string, data: Value[], extra: object = {}) => ({
    name,
    type: 'line',
    xAxisIndex: axis,
    yAxisIndex: axis,
    data,
    showSymbol: false,
    connectNulls: false,
    color: colour,
    lineStyle: { width: points.length > DENSE ? 1.1 : 1.8, color: colour },
    ...extra,
  });
  const temperature = line(
    `Temperature ${formats.unitSign}`,
    0,
    colours.ink,
    pick((p) => p.t, degrees),
    {
      z: 4,
      markArea: { silent: true, data: [bandOf(series, degrees, colours), ...alertsOf(chart, colours)] },
      markLine: { symbol: 'none', animation: false, data: linesOf(chart, degrees, colours) },
    },
  );
  const dewPoint = line(
    `Dew point ${formats.unitSign}`,
    0,
    colours.damp,
    pick((p) => p.dewPoint, degrees),
    { lineStyle: { width: 1.4, type: [5, 4], color: colours.damp } },
  );
  const humidity = line(
    'Humidity %',
    1,
    colours.cold,
    pick((p) => p.rh),
  );
  return {
    aria: { enabled: false },
    grid: [
      { left: 44, right: 14, top: 26, height: '56%' },
      { left: 44, right: 14, bottom: 28, height: '21%' },
    ],
    xAxis: [timeAxis(chart, 0, false, colours), timeAxis(chart, 1, true, colours)],
    yAxis: [
      valueAxis(0, colours, degreesShown(points, series).map(degrees), 5),
      valueAxis(1, colours, humidityShown(points), 2),
    ],
    tooltip: tooltip(chart, colours),
    axisPointer: { link: [{ xAxisIndex: 'all' }] },
    series: [
      ...(zoomedOut
        ? [
            ...rangeOf(
              't',
              0,
              colours.ink,
              pick((p) => p.tMin, degrees),
              pick((p) => p.tMax, degrees),
            ),
            ...rangeOf(
              'rh',
              1,
              colours.cold,
              pick((p) => p.rhMin),
              pick((p) => p.rhMax),
            ),
          ]
        : []),
      temperature,
      dewPoint,
      humidity,
    ],
  };
}

/** Points with a null between two that lie further apart than the step, so that a gap is drawn as one. */
export function withGaps(series: RoomSeries): SeriesPoint[] {
  const step = series.stepMinutes * 60_000;
  return series.points.flatMap((point, index) => {
    const before = series.points[index - 1];
    const hole = before && Date.parse(point.at) - Date.parse(before.at) > 1.5 * step;
    if (!hole) return [point];
    const at = new Date(Date.parse(before.at) + step).toISOString();
    return [
      { at, t: null, tMin: null, tMax: null, rh: null, rhMin: null, rhMax: null, dewPoint: null },
      point,
    ];
  });
}

/** Two stacked lines with the area between them: lowest to highest. */
function rangeOf(name: string, axis: number, colour: string, low: Value[], high: Value[]) {
  const between = high.map(([at, top], index): Value => {
    const bottom = low[index]?.[1] ?? null;
    return [at, top === null || bottom === null ? null : top - bottom];
  });
  const hidden = {
    type: 'line',
    xAxisIndex: axis,
    yAxisIndex: axis,
    stack: `range ${name}`,
    stackStrategy: 'all',
    showSymbol: false,
    silent: true,
    lineStyle: { width: 0 },
    tooltip: { show: false },
  };
  return [
    { ...hidden, name: `${name} low`, data: low },
    { ...hidden, name: `${name} high`, data: between, areaStyle: { color: colour, opacity: 0.16 } },
  ];
}

function bandOf(series: RoomSeries, degrees: (celsius: number) => number, colours: ChartColours) {
  return [
    { yAxis: degrees(series.band.low), itemStyle: { color: colours.good, opacity: 0.13 } },
    { yAxis: degrees(series.band.high) },
  ];
}

function alertsOf({ series, to }: RoomChart, colours: ChartColours) {
  return series.marks
    .filter((mark) => mark.kind === 'alert')
    .map((mark) => [
      { xAxis: Date.parse(mark.from), itemStyle: { color: colours.heat, opacity: 0.14 } },
      { xAxis: mark.to === null ? to : Date.parse(mark.to) },
    ]);
}

function linesOf(
  { series, formats, narrow }: RoomChart,
  degrees: (c: number) => number,
  colours: ChartColours,
) {
  const label = { color: colours.ink, backgroundColor: colours.paper, padding: [1, 3], fontSize: 12 };
  const limits = series.frostingLimits.map(({ celsius, batches }) => ({
    yAxis: degrees(celsius),
    lineStyle: { color: colours.heat, type: 'dashed', width: 1.4 },
    label: {
      ...label,
      color: colours.heat,
      position: 'insideStartTop',
      formatter: `frosting from ${formats.temperature(celsius)} (${batches.length} ${batches.length === 1 ? 'batch' : 'batches'})`,
    },
  }));
  const moved = series.marks.filter((mark) => mark.kind !== 'alert');
  const show = !narrow && moved.length <= LABELLED_MARKS;
  const moves = moved.map((mark) => ({
    xAxis: Date.parse(mark.from),
    lineStyle: { color: colours.copper, type: 'dotted', width: 1.4 },
    label: { show, ...label, position: 'end', rotate: 0, formatter: shortMark(mark) },
  }));
  return [...limits, ...moves];
}

function shortMark(mark: RoomMark): string {
  return mark.text.length > 22 ? `${mark.text.slice(0, 20)}…` : mark.text;
}

function timeAxis(
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

function valueAxis(index: number, colours: ChartColours, values: readonly number[], lines: number) {
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

function degreesShown(points: readonly SeriesPoint[], series: RoomSeries): number[] {
  const measured = points.flatMap((point) => [point.tMin, point.tMax, point.t, point.dewPoint]);
  const limits = series.frostingLimits.map((limit) => limit.celsius);
  return [...measured.filter((value) => value !== null), ...limits, series.band.low, series.band.high];
}

function humidityShown(points: readonly SeriesPoint[]): number[] {
  const measured = points
    .flatMap((point) => [point.rhMin, point.rhMax, point.rh])
    .filter((value) => value !== null);
  return measured.length > 0 ? measured : [40, 60];
}

/** Text only: the canvas draws it, nothing is read as HTML. */
function tooltip({ series, formats }: RoomChart, colours: ChartColours) {
  const byTime = new Map(series.points.map((point) => [Date.parse(point.at), point]));
  return {
    trigger: 'axis',
    renderMode: 'richText',
    confine: true,
    backgroundColor: colours.paper,
    borderColor: colours.hairline,
    textStyle: { color: colours.ink, fontSize: 14 },
    formatter: (hits: readonly { readonly value: Value }[]) => {
      const at = hits[0]?.value[0];
      const point = at === undefined ? undefined : byTime.get(at);
      return at === undefined || !point ? '' : pointWords(point, series.stepMinutes, formats).join('\n');
    },
  };
}

/** One point in words, line by line. */
export function pointWords(point: SeriesPoint, stepMinutes: number, formats: StudioFormats): string[] {
  const range = (low: number | null, high: number | null, write: (value: number) => string) =>
    stepMinutes <= CELL_MINUTES || low === null || high === null ? '' : ` (${write(low)} to ${write(high)})`;
  return [
    formats.dayAndTime(point.at),
    point.t === null
      ? 'no reading'
      : `${formats.temperature(point.t)}${range(point.tMin, point.tMax, formats.temperatureFigure)}`,
    point.rh === null
      ? ''
      : `${formats.humidity(point.rh)} humidity${range(point.rhMin, point.rhMax, (value) => value.toFixed(0))}`,
    point.dewPoint === null ? '' : `dew point ${formats.temperature(point.dewPoint)}`,
  ].filter((words) => words !== '');
}
