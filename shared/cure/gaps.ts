import { CELLS_PER_DAY, CELLS_PER_HOUR, utcHourOf } from '#shared/cure/grid';
import { medianAbsoluteDeviationInPlace, medianInPlace } from '#shared/statistics/median';

/** Gaps up to this long with readings at both ends are filled by a straight line, cells. */
const LONGEST_LINE = 3 * CELLS_PER_HOUR;
/** How far back the usual course of a day is learned from, cells. */
export const LOOK_BACK = 14 * CELLS_PER_DAY;
/** Cells of one hour of the day within the look-back. */
const CELLS_OF_HOUR = LOOK_BACK / 24;
const NO_VALUES = new Float64Array(0);
/** Cells an hour of the day needs before its median counts. */
const ENOUGH_CELLS = 6;
/** A gap this long or longer carries its full uncertainty, cells. */
const FULL_DOUBT = 6 * CELLS_PER_HOUR;
const SMALLEST_SIGMA = 1;
const LAST_KNOWN_SIGMA = 3;
/** Scales a median absolute deviation to the sd of a normal sample. */
const NORMAL_MAD = 1.4826;

export type GapFill = 'line' | 'hour-of-day' | 'last-known';

/** A maximal run of cells without readings and how it was filled. */
export interface FilledGap {
  /** First cell of the gap. */
  readonly from: number;
  /** Cell after the last. */
  readonly to: number;
  readonly fill: GapFill;
  /** sd of the filled temperature, K, already reduced for a short gap: σ·min(1, Δ/6 h). */
  readonly sigma: number;
  /** One temperature a cell, °C. */
  readonly celsius: readonly number[];
}

/** What a room's past says about a usual day, learned from at most 14 days before a cell. */
export interface UsualDay {
  /** Median by UTC hour; null where fewer than six cells were observed. */
  readonly hours: readonly (number | null)[];
  /** max(1 K, 1.4826·MAD of the deviations from the hours' medians). */
  readonly sigma: number;
}

/** Observed value of a cell, or NaN. */
export type Observed = (cell: number) => number;

/** Learns the usual day from the observed cells in [before − 14 d, before). */
export function learnUsualDay(observed: Observed, firstCell: number, before: number): UsualDay {
  const from = Math.max(firstCell, before - LOOK_BACK);
  const byHour = Array.from({ length: 24 }, () => new Float64Array(CELLS_OF_HOUR));
  const counts = new Uint16Array(24);
  for (let cell = from; cell < before; cell++) {
    const celsius = observed(cell);
    if (Number.isNaN(celsius)) continue;
    const hour = utcHourOf(cell);
    const count = counts[hour] ?? 0;
    (byHour[hour] ?? NO_VALUES)[count] = celsius;
    counts[hour] = count + 1;
  }
  const deviations = new Float64Array(counts.reduce((sum, count) => sum + count, 0));
  let at = 0;
  const hours = byHour.map((values, hour) => {
    const count = counts[hour] ?? 0;
    if (count === 0) return null;
    const ofHour = values.subarray(0, count);
    const middle = medianInPlace(ofHour);
    for (const value of ofHour) deviations[at++] = value - middle;
    return count < ENOUGH_CELLS ? null : middle;
  });
  const spread = deviations.length === 0 ? 0 : NORMAL_MAD * medianAbsoluteDeviationInPlace(deviations);
  return { hours, sigma: Math.max(SMALLEST_SIGMA, spread) };
}

/**
 * Fills a gap: up to 3 h with readings at both ends by a straight line; otherwise each cell by its hour's usual value, or where
 * that is not known by the last known value (before the first reading: by the first).
 * @param before last observed value before the gap, NaN if none
 * @param after first observed value after the gap, NaN if none yet
 * @returns null when there is nothing at all to fill it with
 */
export function fillGap(
  from: number,
  to: number,
  before: number,
  after: number,
  usual: UsualDay,
): FilledGap | null {
  const length = to - from;
  const certainty = Math.min(1, length / FULL_DOUBT);
  const bothEnds = !Number.isNaN(before) && !Number.isNaN(after);
  if (bothEnds && length <= LONGEST_LINE) {
    const celsius = Array.from(
      { length },
      (_, index) => before + ((after - before) * (index + 1)) / (length + 1),
    );
    return { from, to, fill: 'line', sigma: usual.sigma * certainty, celsius };
  }
  const known = Number.isNaN(before) ? after : before;
  let guessed = false;
  const celsius: number[] = [];
  for (let cell = from; cell < to; cell++) {
    const usually = usual.hours[utcHourOf(cell)] ?? null;
    if (usually === null) {
      if (Number.isNaN(known)) return null;
      guessed = true;
    }
    celsius.push(usually ?? known);
  }
  return {
    from,
    to,
    fill: guessed ? 'last-known' : 'hour-of-day',
    sigma: (guessed ? LAST_KNOWN_SIGMA : usual.sigma) * certainty,
    celsius,
  };
}

/** sd of a stretch without any room to ask, K: the last known value is carried on. */
export function holeSigma(cells: number): number {
  return LAST_KNOWN_SIGMA * Math.min(1, cells / FULL_DOUBT);
}
