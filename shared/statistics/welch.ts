import { studentQuantile, studentTwoSided } from '#shared/statistics/student';

export interface SampleSummary {
  readonly n: number;
  readonly mean: number;
  /** Sample standard deviation (n − 1). */
  readonly sd: number;
}

/** Size, mean and sample standard deviation by a two-pass sum. @throws RangeError below two values */
export function summarise(values: readonly number[]): SampleSummary {
  const n = values.length;
  if (n < 2) throw new RangeError('A spread needs at least two values.');
  const mean = values.reduce((sum, value) => sum + value, 0) / n;
  const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  return { n, mean, sd: Math.sqrt(squares / (n - 1)) };
}

/** 95 % confidence interval of a mean by Student's t. */
export function meanInterval({ n, mean, sd }: SampleSummary): { low: number; high: number } {
  const half = (studentQuantile(0.05, n - 1) * sd) / Math.sqrt(n);
  return { low: mean - half, high: mean + half };
}

export interface WelchResult {
  readonly t: number;
  /** Welch–Satterthwaite degrees of freedom. */
  readonly df: number;
  /** Two-sided. */
  readonly p: number;
  /** Mean of a less mean of b with its 95 % interval. */
  readonly difference: number;
  readonly low: number;
  readonly high: number;
}

/** Welch's t test of two means with unequal variances (not the pooled test). */
export function welch(a: SampleSummary, b: SampleSummary): WelchResult {
  const [va, vb] = [a.sd ** 2 / a.n, b.sd ** 2 / b.n];
  const difference = a.mean - b.mean;
  const error = Math.sqrt(va + vb);
  if (error === 0) {
    const same = difference === 0;
    return {
      t: same ? 0 : Infinity * Math.sign(difference),
      df: a.n + b.n - 2,
      p: same ? 1 : 0,
      difference,
      low: difference,
      high: difference,
    };
  }
  const df = (va + vb) ** 2 / (va ** 2 / (a.n - 1) + vb ** 2 / (b.n - 1));
  const t = difference / error;
  const half = studentQuantile(0.05, df) * error;
  return { t, df, p: studentTwoSided(t, df), difference, low: difference - half, high: difference + half };
}
