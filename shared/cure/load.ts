import { within } from '#shared/units/checked';

/** Grams of wax and fragrance in a mix; the load is given in per cent of the wax. */
export interface PourGrams {
  readonly wax: number;
  readonly fragrance: number;
}

/** Load in per cent of the finished mix from per cent of the wax. Worked value: 10 % of wax → 9.0909 % of mix. */
export function loadOfMix(loadPercentOfWax: number): number {
  return (100 * loadPercentOfWax) / (100 + loadPercentOfWax);
}

/** Load in per cent of the wax from per cent of the finished mix. Worked value: 10 % of mix → 11.1111 % of wax. */
export function loadOfWax(loadPercentOfMix: number): number {
  within(loadPercentOfMix, 0, 99, 'Load in % of the mix');
  return (100 * loadPercentOfMix) / (100 - loadPercentOfMix);
}

/**
 * Wax and fragrance for a pour.
 * @param fillGrams finished mix per vessel, g
 * @param loadPercentOfWax per cent of the wax. Worked value: 12 × 220 g at 10 % of wax → 2400 g wax, 240 g fragrance.
 */
export function pourGrams(fillGrams: number, vessels: number, loadPercentOfWax: number): PourGrams {
  const mix = fillGrams * vessels;
  const wax = mix / (1 + within(loadPercentOfWax, 0, 100, 'Load in % of the wax') / 100);
  return { wax, fragrance: mix - wax };
}
