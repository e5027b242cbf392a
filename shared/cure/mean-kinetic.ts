import { KELVIN_OFFSET } from '#shared/units/temperature';

/** ΔH/R used for mean kinetic temperature, K (USP <1079>, ICH Q1A; value from memory). */
const ACTIVATION_KELVIN = 10_000;

/** Collects temperatures, each with its share of time, for their mean kinetic temperature. */
export class MeanKinetic {
  #weighted = 0;
  #weight = 0;

  add(celsius: number, weight = 1): void {
    this.#weighted += weight * Math.exp(-ACTIVATION_KELVIN / (celsius + KELVIN_OFFSET));
    this.#weight += weight;
  }

  /** T = (ΔH/R)/(−ln[Σ t·e^(−ΔH/RT)/Σ t]) in °C; null for nothing. Worked value: 20 and 30 °C → 26.2599 °C. */
  celsius(): number | null {
    if (this.#weight === 0) return null;
    return ACTIVATION_KELVIN / -Math.log(this.#weighted / this.#weight) - KELVIN_OFFSET;
  }
}
