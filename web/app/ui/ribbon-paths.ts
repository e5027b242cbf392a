export interface RibbonPaths {
  /** The line of temperature; broken at gaps. */
  readonly line: string;
  /** Areas above and below the band. */
  readonly hot: string;
  readonly cold: string;
  /** Stretches without a reading. */
  readonly gaps: readonly { readonly x: number; readonly width: number }[];
  readonly bandTop: number;
  readonly bandBottom: number;
}

const HEADROOM_K = 2;

/**
 * Paths of a 24-hour ribbon. The scale holds the band, two kelvin around it, and whatever the temperature did.
 * @param celsius means of equal cells, oldest first; null is a gap
 * @param cells cells across the whole width; the ribbon may hold fewer
 */
export function ribbonPaths(
  celsius: readonly (number | null)[],
  band: { readonly low: number; readonly high: number },
  size: { readonly width: number; readonly height: number },
  cells = 144,
): RibbonPaths {
  const known = celsius.filter((value) => value !== null);
  const bottom = Math.min(band.low - HEADROOM_K, ...known);
  const top = Math.max(band.high + HEADROOM_K, ...known);
  const y = (value: number) => round(((top - value) / (top - bottom)) * size.height);
  const step = size.width / Math.max(1, cells - 1);
  const start = cells - celsius.length;
  const x = (index: number) => round((start + index) * step);
  const paths = { line: '', hot: '', cold: '' };
  const gaps: { x: number; width: number }[] = [];
  for (const run of runs(celsius)) {
    const points = run.values.map((value, i) => ({ x: x(run.start + i), value }));
    if (run.gap) {
      const from = run.start === 0 ? 0 : x(run.start - 1);
      gaps.push({ x: from, width: round(Math.min(size.width, x(run.start + run.values.length)) - from) });
      continue;
    }
    paths.line += points.map((p, i) => `${i === 0 ? 'M' : 'L'}${p.x} ${y(p.value ?? 0)}`).join('');
    paths.hot += beyond(points, band.high, (value) => value > band.high, y);
    paths.cold += beyond(points, band.low, (value) => value < band.low, y);
  }
  return { ...paths, gaps, bandTop: y(band.high), bandBottom: y(band.low) };
}

interface RibbonPoint {
  readonly x: number;
  readonly value: number | null;
}

/** The area between the line and an edge of the band, only where the line is beyond it. */
function beyond(
  points: readonly RibbonPoint[],
  edge: number,
  isBeyond: (value: number) => boolean,
  y: (value: number) => number,
): string {
  if (!points.some((point) => isBeyond(point.value ?? edge))) return '';
  const clamped = points.map(({ x, value }) => ({
    x,
    y: y(isBeyond(value ?? edge) ? (value ?? edge) : edge),
  }));
  const first = points[0]?.x ?? 0;
  const last = points.at(-1)?.x ?? 0;
  return `M${first} ${y(edge)}${clamped.map((point) => `L${point.x} ${point.y}`).join('')}L${last} ${y(edge)}Z`;
}

/** Stretches of readings and of gaps, in turn. */
function runs(celsius: readonly (number | null)[]) {
  const found: { gap: boolean; start: number; values: (number | null)[] }[] = [];
  celsius.forEach((value, index) => {
    const gap = value === null;
    const last = found.at(-1);
    if (last?.gap === gap) last.values.push(value);
    else found.push({ gap, start: index, values: [value] });
  });
  return found;
}

function round(value: number): number {
  return Math.round(value * 10) / 10;
}
