export interface EwmaChart {
  /** z_0 = target, then one value per observation. */
  readonly z: readonly number[];
  /** Asymptotic control limits: target ± L·σ·√(λ/(2−λ)). */
  readonly upper: number;
  readonly lower: number;
}

/** Exponentially weighted moving average chart (NIST/SEMATECH e-Handbook 6.3.2.4): z_t = λ·x_t + (1−λ)·z_(t−1). */
export function ewma(
  values: readonly number[],
  { target, sigma, lambda, width }: { target: number; sigma: number; lambda: number; width: number },
): EwmaChart {
  const z = [target];
  for (const value of values) z.push(lambda * value + (1 - lambda) * (z.at(-1) ?? target));
  const half = width * sigma * Math.sqrt(lambda / (2 - lambda));
  return { z, upper: target + half, lower: target - half };
}

/** Tabular CUSUM: S_H = max(0, x − (target + K) + S_H), S_L = max(0, (target − K) − x + S_L), from 0. */
export function cusum(
  values: readonly number[],
  target: number,
  allowance: number,
): { high: number[]; low: number[] } {
  const [high, low]: [number[], number[]] = [[], []];
  for (const value of values) {
    high.push(Math.max(0, value - (target + allowance) + (high.at(-1) ?? 0)));
    low.push(Math.max(0, target - allowance - value + (low.at(-1) ?? 0)));
  }
  return { high, low };
}
