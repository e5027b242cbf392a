import type { EChartsCoreOption } from 'echarts/core';
import type { RoomSeries, SeriesPoint } from '#shared/contract/rooms';
import { toFahrenheit } from '#shared/units/temperature';
import type { StudioFormats } from '../../core/time/studio-formats';
import type { ChartColours } from '../../ui/chart-palette';
import {
  degreesShown,
  humidityShown,
  niceRange,
  type RoomChart,
  timeAxis,
  valueAxis,
} from './room-chart-axes';
import { alertsOf, bandOf, linesOf, rowOfMoves } from './room-chart-marks';

type Value = readonly [number, number | null];

const CELL_MINUTES = 10;
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
  const degreesDrawn = degreesShown(points, series).map(degrees);
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
    yAxis: [valueAxis(0, colours, degreesDrawn, 5), valueAxis(1, colours, humidityShown(points), 3)],
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
      ...rowOfMoves(chart, niceRange(degreesDrawn, 5).max, colours),
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
      const point = hits.map((hit) => byTime.get(hit.value[0])).find((known) => known !== undefined);
      return point ? pointWords(point, series.stepMinutes, formats).join('\n') : '';
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
