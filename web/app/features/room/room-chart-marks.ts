import type { RoomMark, RoomSeries } from '#shared/contract/rooms';
import type { ChartColours } from '../../ui/chart-palette';
import type { RoomChart } from './room-chart-axes';

const FEW_MOVES = 6;
/** The room's band as an area. */
export function bandOf(series: RoomSeries, degrees: (celsius: number) => number, colours: ChartColours) {
  return [
    { yAxis: degrees(series.band.low), itemStyle: { color: colours.good, opacity: 0.13 } },
    { yAxis: degrees(series.band.high) },
  ];
}

/** Alerts as stretches of time. */
export function alertsOf({ series, to }: RoomChart, colours: ChartColours) {
  return series.marks
    .filter((mark) => mark.kind === 'alert')
    .map((mark) => [
      { xAxis: Date.parse(mark.from), itemStyle: { color: colours.heat, opacity: 0.14 } },
      { xAxis: mark.to === null ? to : Date.parse(mark.to) },
    ]);
}

const LABEL_PLACES = ['insideStartTop', 'insideMiddleTop', 'insideEndTop'];

/** Frosting limits across; moves and pours upright as long as they are few. */
export function linesOf(chart: RoomChart, degrees: (celsius: number) => number, colours: ChartColours) {
  const { series, formats, narrow } = chart;
  const label = { color: colours.ink, backgroundColor: colours.paper, padding: [1, 3], fontSize: 12 };
  const limits = series.frostingLimits.map(({ celsius, batches }, index) => ({
    yAxis: degrees(celsius),
    lineStyle: { color: colours.heat, type: 'dashed', width: 1.4 },
    label: {
      ...label,
      color: colours.heat,
      position: LABEL_PLACES[index % LABEL_PLACES.length],
      formatter: narrow
        ? `frosts at ${formats.temperatureFigure(celsius)}`
        : `frosting from ${formats.temperature(celsius)} (${batches.length} ${batches.length === 1 ? 'batch' : 'batches'})`,
    },
  }));
  const few = movesOf(chart).map((mark) => ({
    xAxis: Date.parse(mark.from),
    lineStyle: { color: colours.copper, type: 'dotted', width: 1.4 },
    label: { show: !narrow, ...label, position: 'end', rotate: 0, formatter: shortMark(mark) },
  }));
  return few.length <= FEW_MOVES ? [...limits, ...few] : limits;
}

/** Many moves and pours: a row of diamonds above the plot instead of a thicket of lines. */
export function rowOfMoves(chart: RoomChart, top: number, colours: ChartColours) {
  const moves = movesOf(chart);
  if (moves.length <= FEW_MOVES) return [];
  return [
    {
      name: 'Moves and pours',
      type: 'line',
      xAxisIndex: 0,
      yAxisIndex: 0,
      data: moves.map((mark) => [Date.parse(mark.from), top]),
      symbol: 'diamond',
      symbolSize: 9,
      showSymbol: true,
      showAllSymbol: true,
      silent: true,
      lineStyle: { width: 0 },
      itemStyle: { color: colours.copper },
      z: 5,
    },
  ];
}

function movesOf({ series }: RoomChart): RoomMark[] {
  return series.marks.filter((mark) => mark.kind !== 'alert');
}

function shortMark(mark: RoomMark): string {
  return mark.text.length > 22 ? `${mark.text.slice(0, 20)}…` : mark.text;
}
