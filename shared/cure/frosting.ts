import type { CountedRange } from '#shared/cure/rainflow';

/** Swings smaller than this do not count, K. */
export const SMALLEST_SWING = 2;
const SWING_UNIT = 5;
const DEGREE_HOURS_UNIT = 48;
const CYCLES_UNIT = 20;

/** What one counted swing adds to C: count·(range/5 K)², nothing below 2 K. */
export function swingDamage({ range, count }: CountedRange): number {
  return range < SMALLEST_SWING ? 0 : count * (range / SWING_UNIT) ** 2;
}

/**
 * Frosting index 0–100: F = 100·(1 − exp(−(DH/48 + C/20))), the exponent halved for slightly prone waxes, 0 for waxes not
 * prone. A rank order only, never a probability. Our own index: the mechanism is largely unknown (Lonchampt & Hartel 2004).
 * @param degreeHours DH, °C·h above the frosting limit
 * @param cycles C, from swings of at least 2 K. Worked value: DH 24, C 8 → 59.34.
 */
export function frostingIndex(degreeHours: number, cycles: number, prone: 'yes' | 'slight' | 'no'): number {
  if (prone === 'no') return 0;
  const exponent = (degreeHours / DEGREE_HOURS_UNIT + cycles / CYCLES_UNIT) * (prone === 'slight' ? 0.5 : 1);
  return -100 * Math.expm1(-exponent);
}

/** Low below 25, watch to 60, high from 60. */
export function frostingLevel(index: number): 'low' | 'watch' | 'high' {
  if (index < 25) return 'low';
  return index < 60 ? 'watch' : 'high';
}
