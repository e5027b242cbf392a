import { describe, expect, it } from 'vitest';
import reference from '../reference/statistics.json' with { type: 'json' };
import { cusum, ewma } from '#shared/statistics/control-charts';
import { holm } from '#shared/statistics/holm';
import { mannKendall } from '#shared/statistics/mann-kendall';
import { median, medianAbsoluteDeviation } from '#shared/statistics/median';
import { normalCdf } from '#shared/statistics/normal';
import { studentQuantile } from '#shared/statistics/student';
import { meanInterval, summarise, welch } from '#shared/statistics/welch';
import { wilson } from '#shared/statistics/wilson';

const off = (a: number, b: number) => Math.abs(a - b);

describe('control charts', () => {
  it('EWMA follows the NIST example', () => {
    const { data, z, upper, lower, tolerance, limitTolerance, ...options } = reference.ewma;
    const chart = ewma(data, options);
    expect(chart.z).toHaveLength(z.length);
    for (const [index, value] of z.entries())
      expect(off(chart.z[index]!, value)).toBeLessThanOrEqual(tolerance);
    expect(off(chart.upper, upper)).toBeLessThanOrEqual(limitTolerance);
    expect(off(chart.lower, lower)).toBeLessThanOrEqual(limitTolerance);
  });

  it('CUSUM follows table 16-8', () => {
    const { data, target, allowance, high, low, tolerance } = reference.cusum;
    const chart = cusum(data, target, allowance);
    for (const [index, value] of high.entries())
      expect(off(chart.high[index]!, value)).toBeLessThanOrEqual(tolerance);
    for (const [index, value] of low.entries())
      expect(off(chart.low[index]!, value)).toBeLessThanOrEqual(tolerance);
  });
});

describe('Welch', () => {
  it.each(reference.welch.rows)('agrees with two libraries: t $t', (row) => {
    const result = welch(summarise(row.a), summarise(row.b));
    expect(off(result.t, row.t)).toBeLessThanOrEqual(row.tolerance);
    expect(off(result.df, row.df)).toBeLessThanOrEqual(row.tolerance);
    expect(off(result.p, row.p)).toBeLessThanOrEqual(row.tolerance / 10);
    if (row.low !== undefined) {
      expect(off(result.low, row.low)).toBeLessThanOrEqual(5e-5);
      expect(off(result.high, row.high)).toBeLessThanOrEqual(5e-5);
    }
  });

  it('agrees with the NIST example', () => {
    const { a, b, t, df, tolerance } = reference.welch.nist;
    const result = welch(a, b);
    expect(off(result.t, t)).toBeLessThanOrEqual(tolerance);
    expect(off(result.df, df)).toBeLessThanOrEqual(tolerance);
  });

  it('has no difference between samples without any spread and the same mean', () => {
    expect(welch(summarise([3, 3, 3]), summarise([3, 3])).p).toBe(1);
    expect(welch(summarise([3, 3, 3]), summarise([4, 4])).p).toBe(0);
  });
});

describe('intervals', () => {
  it.each(reference.wilson.rows)('Wilson for %d of %d', (successes, trials, low, high) => {
    const interval = wilson(successes, trials);
    expect(off(interval.low, low)).toBeLessThanOrEqual(reference.wilson.tolerance);
    expect(off(interval.high, high)).toBeLessThanOrEqual(reference.wilson.tolerance);
  });

  it('Student: two-sided 5 % point for 9 degrees of freedom is 2.262157 (printed tables)', () => {
    expect(studentQuantile(0.05, 9)).toBeCloseTo(2.262157, 6);
    const { low, high } = meanInterval({ n: 10, mean: 5, sd: 2 });
    expect((high - low) / 2).toBeCloseTo((2.262157 * 2) / Math.sqrt(10), 6);
  });

  it('normal: 90 %, 97.5 % and a far tail (printed tables; the tail from the asymptotic series)', () => {
    expect(normalCdf(1.2815515655446004)).toBeCloseTo(0.9, 13);
    expect(normalCdf(1.959963984540054)).toBeCloseTo(0.975, 13);
    expect(normalCdf(-8) / 6.22096057427178e-16).toBeCloseTo(1, 9);
    expect(normalCdf(-Infinity)).toBe(0);
  });
});

describe('Mann–Kendall and Sen', () => {
  it.each(reference.mannKendall.rows)('S $s', (row) => {
    const result = mannKendall(row.data);
    const { tolerance } = reference.mannKendall;
    expect(result.s).toBe(row.s);
    expect(off(result.variance, row.variance)).toBeLessThanOrEqual(tolerance);
    expect(off(result.z, row.z)).toBeLessThanOrEqual(tolerance);
    expect(off(result.slope, row.slope)).toBeLessThanOrEqual(tolerance);
    if (row.variance === 0) expect(result.p).toBe(1);
  });
});

describe('Holm and medians', () => {
  it('steps down and never lets a larger p end below a smaller one', () => {
    expect(holm([0.01, 0.04, 0.03, 0.005])).toEqual([0.03, 0.06, 0.06, 0.02]);
    expect(holm([0.9, 0.8])).toEqual([1, 1]);
  });

  it('takes the middle, or the mean of the two middle values', () => {
    expect(median([5, 1, 3])).toBe(3);
    expect(median([4, 1, 3, 2])).toBe(2.5);
    expect(medianAbsoluteDeviation([1, 1, 2, 2, 4, 6, 9])).toBe(1);
    expect(() => median([])).toThrow(/no values/);
  });
});
