import { KELVIN_OFFSET } from '#shared/units/temperature';

/**
 * Equivalent age of ASTM C1074 for concrete, in the unit of the durations: Σ Δt·exp(−Q·(1/T − 1/T_s)). The same form as the cure
 * age; here so that the form can be checked against concrete's published use.
 * @param steps temperatures in °C with their durations
 * @param q activation energy over gas constant, K
 * @param reference reference temperature T_s, °C
 */
export function equivalentAge(
  steps: readonly { celsius: number; duration: number }[],
  q: number,
  reference: number,
): number {
  return steps.reduce(
    (sum, { celsius, duration }) =>
      sum + duration * Math.exp(-q * (1 / (celsius + KELVIN_OFFSET) - 1 / (reference + KELVIN_OFFSET))),
    0,
  );
}

/** Nurse–Saul maturity Σ (T − T_0)·Δt, each step floored at 0, in °C times the unit of the durations. */
export function nurseSaul(steps: readonly { celsius: number; duration: number }[], datum: number): number {
  return steps.reduce((sum, { celsius, duration }) => sum + Math.max(0, celsius - datum) * duration, 0);
}
