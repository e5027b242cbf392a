const GRAMS_PER_OUNCE = 28.349523125;

/** g to oz (international avoirdupois ounce, 28.349523125 g by definition). Worked value: 453.59237 g → 16 oz. */
export function toOunces(grams: number): number {
  return grams / GRAMS_PER_OUNCE;
}

/** oz to g. Worked value: 16 oz → 453.59237 g. */
export function fromOunces(ounces: number): number {
  return ounces * GRAMS_PER_OUNCE;
}
