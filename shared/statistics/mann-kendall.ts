import { normalCdf } from '#shared/statistics/normal';
import { median } from '#shared/statistics/median';

export interface TrendTest {
  readonly s: number;
  /** Variance of S with the correction for ties. */
  readonly variance: number;
  /** Continuity-corrected; 0 where the variance is 0. */
  readonly z: number;
  /** Two-sided. */
  readonly p: number;
  /** Sen's slope: the median of all pairwise slopes, per step. */
  readonly slope: number;
}

/** Mann–Kendall test of a trend in equally spaced values, with Sen's slope. @throws RangeError below two values */
export function mannKendall(values: readonly number[]): TrendTest {
  const n = values.length;
  const slopes: number[] = [];
  let s = 0;
  for (let late = 1; late < n; late++) {
    for (let early = 0; early < late; early++) {
      const rise = (values[late] ?? NaN) - (values[early] ?? NaN);
      s += Math.sign(rise);
      slopes.push(rise / (late - early));
    }
  }
  const ties = new Map<number, number>();
  for (const value of values) ties.set(value, (ties.get(value) ?? 0) + 1);
  const term = (size: number) => size * (size - 1) * (2 * size + 5);
  const variance = (term(n) - [...ties.values()].reduce((sum, size) => sum + term(size), 0)) / 18;
  const z = variance === 0 ? 0 : (s - Math.sign(s)) / Math.sqrt(variance);
  return { s, variance, z, p: variance === 0 ? 1 : 2 * normalCdf(-Math.abs(z)), slope: median(slopes) };
}
