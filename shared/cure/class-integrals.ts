import { CELLS_PER_DAY } from '#shared/cure/grid';
import { energySensitivity, type KineticClass, rate, temperatureSensitivity } from '#shared/cure/kinetics';

/** Sums over a stretch of a room's history for one kinetic class. */
export interface StretchSums {
  /** Equivalent days. */
  readonly days: number;
  /** Σ rate·κ, d/K. */
  readonly perKelvin: number;
  /** Σ rate·κ_E, d per kJ/mol. */
  readonly perEnergy: number;
}

/** Cells by which there is more room than needed: three days. */
const RESERVE = 3 * CELLS_PER_DAY;

/**
 * Running sums of one kinetic class over a sequence of temperatures that grows at its end and is now and then rebuilt from some
 * place on. The rate of a cell is computed once for all three.
 */
export class ClassIntegrals {
  #days = new Float64Array(1);
  #perKelvin = new Float64Array(1);
  #perEnergy = new Float64Array(1);
  #known = 0;

  /**
   * @param celsius the temperature at an index; NaN makes every later sum NaN
   * @param length how many temperatures there are at present: how much room is worth reserving
   */
  constructor(
    private readonly kinetic: KineticClass,
    private readonly celsius: (index: number) => number,
    private readonly length: () => number,
  ) {}

  /** Sums of the terms in [from, to). */
  between(from: number, to: number): StretchSums {
    this.#grow(Math.max(from, to));
    return {
      days: (this.#days[to] ?? NaN) - (this.#days[from] ?? NaN),
      perKelvin: (this.#perKelvin[to] ?? NaN) - (this.#perKelvin[from] ?? NaN),
      perEnergy: (this.#perEnergy[to] ?? NaN) - (this.#perEnergy[from] ?? NaN),
    };
  }

  /** First index in [from, to) after whose term the days since `from` are at least `amount`; null when they never are. */
  firstReaching(from: number, to: number, amount: number): number | null {
    this.#grow(Math.max(from, to));
    const start = this.#days[from] ?? NaN;
    if (from >= to || !((this.#days[to] ?? NaN) - start >= amount)) return null;
    let [low, high] = [from, to - 1];
    while (low < high) {
      const middle = (low + high) >> 1;
      if ((this.#days[middle + 1] ?? NaN) - start >= amount) high = middle;
      else low = middle + 1;
    }
    return low;
  }

  /** Forgets the sums that contain the term at `index` or a later one. */
  forgetFrom(index: number): void {
    this.#known = Math.min(this.#known, index);
  }

  #grow(to: number): void {
    if (to <= this.#known) return;
    if (to >= this.#days.length) {
      const capacity = Math.max(to, this.length()) + RESERVE;
      this.#days = grown(this.#days, capacity);
      this.#perKelvin = grown(this.#perKelvin, capacity);
      this.#perEnergy = grown(this.#perEnergy, capacity);
    }
    const { kinetic } = this;
    let days = this.#days[this.#known] ?? 0;
    let perKelvin = this.#perKelvin[this.#known] ?? 0;
    let perEnergy = this.#perEnergy[this.#known] ?? 0;
    for (let index = this.#known; index < to; index++) {
      const celsius = this.celsius(index);
      const gained = rate(celsius, kinetic) / CELLS_PER_DAY;
      days += gained;
      perKelvin += gained * temperatureSensitivity(celsius, kinetic);
      perEnergy += gained * energySensitivity(celsius, kinetic);
      this.#days[index + 1] = days;
      this.#perKelvin[index + 1] = perKelvin;
      this.#perEnergy[index + 1] = perEnergy;
    }
    this.#known = to;
  }
}

function grown(sums: Float64Array, capacity: number): Float64Array<ArrayBuffer> {
  const larger = new Float64Array(capacity);
  larger.set(sums);
  return larger;
}
