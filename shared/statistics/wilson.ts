import { Z_95 } from '#shared/statistics/normal';

/** 95 % score interval of a share (Wilson 1927), no continuity correction. Worked value: 81 of 263 → 0.2553 to 0.3662. */
export function wilson(successes: number, trials: number): { low: number; high: number } {
  if (!(trials > 0 && successes >= 0 && successes <= trials)) {
    throw new RangeError(`A share needs 0 ≤ successes ≤ trials and a trial; got ${successes} of ${trials}.`);
  }
  const share = successes / trials;
  const z2 = Z_95 ** 2;
  const centre = (share + z2 / (2 * trials)) / (1 + z2 / trials);
  const half =
    (Z_95 * Math.sqrt((share * (1 - share)) / trials + z2 / (4 * trials * trials))) / (1 + z2 / trials);
  return { low: Math.max(0, centre - half), high: Math.min(1, centre + half) };
}
