import { CELLS_PER_DAY, CELLS_PER_HOUR, utcHourOf } from '#shared/cure/grid';
import { energySensitivity, type KineticClass, rate, temperatureSensitivity } from '#shared/cure/kinetics';

/** How far ahead a date is looked for, cells (180 days). */
export const HORIZON = 180 * CELLS_PER_DAY;
/** Time constant with which a room returns to its usual day, h. */
const RETURN_HOURS = 24;
/** Forecast cells for which there is room at first: ten days. */
const FIRST_ROOM = 10 * CELLS_PER_DAY;
const SIGMA_ROOM = 1.5;
const SIGMA_DRIFT = 1;

/** Where a forecast starts from. */
export interface ForecastStart {
  /** First forecast cell; the history ends where it starts. */
  readonly cell: number;
  /** Last temperature of the history, °C. */
  readonly celsius: number;
  /** Usual value by UTC hour; null: the present value is carried on. */
  readonly hours: readonly (number | null)[];
}

/** Temperature expected in a forecast cell, °C: T̂(h) = μ_hod + (T_now − μ_hod)·e^(−h/24) at the middle of the cell. */
export function forecastCelsius(start: ForecastStart, cell: number): number {
  const usual = start.hours[utcHourOf(cell)] ?? start.celsius;
  const hours = (cell - start.cell + 0.5) / CELLS_PER_HOUR;
  return usual + (start.celsius - usual) * Math.exp(-hours / RETURN_HOURS);
}

/**
 * Variance of the forecast's temperature integral after h hours, K²·h²:
 * σ_f²θ²(2h/θ − 3 + 4e^(−h/θ) − e^(−2h/θ)) + (σ_d·h)², θ = 24 h, σ_f = 1.5 K, σ_d = 1 K.
 * Worked value: the first term's root at 24 h is 20.873 K·h.
 */
export function integralVariance(hours: number, sigmaDrift = SIGMA_DRIFT): number {
  const x = hours / RETURN_HOURS;
  const first = (SIGMA_ROOM * RETURN_HOURS) ** 2 * (2 * x - 3 + 4 * Math.exp(-x) - Math.exp(-2 * x));
  // For x near 0 the bracket is about 2x³/3, less than its rounding error.
  return Math.max(0, first) + (sigmaDrift * hours) ** 2;
}

/**
 * Running sums over forecast cells for one kinetic class, in days: of the rate, of rate × κ (d/K) and of rate × κ_E
 * (d per kJ/mol), and the variance V_f (d²). Grown as far as somebody asks; shared by all batches of the class in the room.
 */
export class Forecast {
  #rates = new Float64Array(1);
  #perKelvin = new Float64Array(1);
  #perEnergy = new Float64Array(1);
  #known = 0;

  constructor(
    readonly start: ForecastStart,
    private readonly kinetic: KineticClass,
  ) {}

  /** Σ rate over the first n cells, d. */
  days(n: number): number {
    this.#grow(n);
    return this.#rates[n] ?? 0;
  }

  /** Σ rate·κ over the first n cells, d/K. */
  perKelvin(n: number): number {
    this.#grow(n);
    return this.#perKelvin[n] ?? 0;
  }

  /** Σ rate·κ_E over the first n cells, d per kJ/mol. */
  perEnergy(n: number): number {
    this.#grow(n);
    return this.#perEnergy[n] ?? 0;
  }

  /** V_f after n cells, d²: (mean of rate·κ over them)² times the integral's variance, over 24² h²/d². 0 at n = 0. */
  variance(n: number): number {
    if (n === 0) return 0;
    const mean = (this.perKelvin(n) * CELLS_PER_DAY) / n;
    return (mean * mean * varianceAfter(n)) / 576;
  }

  #grow(n: number): void {
    if (n <= this.#known) return;
    if (n >= this.#rates.length) {
      const capacity = Math.max(n + 1, FIRST_ROOM, Math.min(HORIZON + 1, 2 * this.#rates.length));
      this.#rates = enlarged(this.#rates, capacity);
      this.#perKelvin = enlarged(this.#perKelvin, capacity);
      this.#perEnergy = enlarged(this.#perEnergy, capacity);
    }
    for (let index = this.#known + 1; index <= n; index++) {
      const celsius = forecastCelsius(this.start, this.start.cell + index - 1);
      const days = rate(celsius, this.kinetic) / CELLS_PER_DAY;
      this.#rates[index] = (this.#rates[index - 1] ?? 0) + days;
      this.#perKelvin[index] =
        (this.#perKelvin[index - 1] ?? 0) + days * temperatureSensitivity(celsius, this.kinetic);
      this.#perEnergy[index] =
        (this.#perEnergy[index - 1] ?? 0) + days * energySensitivity(celsius, this.kinetic);
    }
    this.#known = n;
  }
}

function enlarged(sums: Float64Array, capacity: number): Float64Array<ArrayBuffer> {
  const larger = new Float64Array(capacity);
  larger.set(sums);
  return larger;
}

/** integralVariance after whole cells; the same for every room and wax, so each is computed once. */
const VARIANCES = new Float64Array(HORIZON + 1).fill(NaN);

function varianceAfter(cells: number): number {
  let variance = VARIANCES[cells] ?? NaN;
  if (Number.isNaN(variance)) {
    variance = integralVariance(cells / CELLS_PER_HOUR);
    VARIANCES[cells] = variance;
  }
  return variance;
}
