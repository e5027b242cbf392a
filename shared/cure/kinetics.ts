import { within } from '#shared/units/checked';
import { KELVIN_OFFSET } from '#shared/units/temperature';

/** Gas constant in J/(mol·K), CODATA 2018 (exact). */
export const GAS_CONSTANT = 8.314462618;
/** Temperature at which equivalent days are calendar days, °C. */
export const REFERENCE_CELSIUS = 21;
const REFERENCE_KELVIN = REFERENCE_CELSIUS + KELVIN_OFFSET;

/** The cure numbers of one wax; days are equivalent days at 21 °C, energies kJ/mol, temperatures °C. */
export interface CureKinetics {
  readonly setLagHours: number;
  readonly testDays: number;
  readonly shipDays: number;
  readonly scentDays: number;
  /** Hardening g reached at testDays, 0–1. */
  readonly hardeningAtTest: number;
  /** Exponent n of the stretched curve. */
  readonly exponent: number;
  readonly hardeningEnergy: number;
  readonly scentEnergy: number;
  readonly frosting: 'yes' | 'slight' | 'no';
  readonly frostingFrom: number | null;
  /** Above this the rate grows no more. */
  readonly capC: number;
  /** Above this the wax softens again: the rate is 0 and the estimate no longer valid. */
  readonly softC: number;
  /** Fragrance load (% of wax) at which the days hold. */
  readonly loadReference: number;
  /** Relative change of the days per point of load; 0 by default (no source). */
  readonly loadSensitivity: number;
  readonly maxLoad: number;
  readonly calibration: { readonly cvD: number; readonly sdEnergy: number } | null;
}

/** What decides a rate: batches of one class in one room share one running integral. */
export interface KineticClass {
  /** Activation energy, kJ/mol. */
  readonly energy: number;
  readonly capC: number;
  readonly softC: number;
}

/** One object for all kinetics with the same numbers, so that a class can be recognised by identity. */
const CLASSES = new Map<string, KineticClass>();
const CLASSES_OF = new WeakMap<
  CureKinetics,
  { readonly hardening: KineticClass; readonly scent: KineticClass }
>();

function classesOf(kinetics: CureKinetics) {
  let classes = CLASSES_OF.get(kinetics);
  if (!classes) {
    const { hardeningEnergy, scentEnergy, capC, softC } = kinetics;
    classes = {
      hardening: classWith(hardeningEnergy, capC, softC),
      scent: classWith(scentEnergy, capC, softC),
    };
    CLASSES_OF.set(kinetics, classes);
  }
  return classes;
}

function classWith(energy: number, capC: number, softC: number): KineticClass {
  const key = `${energy}|${capC}|${softC}`;
  let known = CLASSES.get(key);
  if (!known) {
    known = { energy, capC, softC };
    CLASSES.set(key, known);
  }
  return known;
}

export function hardeningClass(kinetics: CureKinetics): KineticClass {
  return classesOf(kinetics).hardening;
}

export function scentClass(kinetics: CureKinetics): KineticClass {
  return classesOf(kinetics).scent;
}

/**
 * Rate of ageing relative to 21 °C: exp[−(E/R)·(1/T − 1/294.15 K)] with T capped at capC; 0 above softC
 * (the equivalent-age form of ASTM C1074 with the wax's own energy). Dimensionless.
 * Worked values: E 50: 15 °C → 0.6533, 30 °C with cap 27 → 1.5048.
 */
export function rate(celsius: number, kinetic: KineticClass): number {
  if (celsius > kinetic.softC) return 0;
  const kelvin = Math.min(celsius, kinetic.capC) + KELVIN_OFFSET;
  return Math.exp(((-1000 * kinetic.energy) / GAS_CONSTANT) * (1 / kelvin - 1 / REFERENCE_KELVIN));
}

/** d ln(rate)/dT = E/(R·T²) in 1/K; 0 above the cap, where the rate no longer depends on the temperature. */
export function temperatureSensitivity(celsius: number, kinetic: KineticClass): number {
  if (celsius > kinetic.capC) return 0;
  return (1000 * kinetic.energy) / (GAS_CONSTANT * (celsius + KELVIN_OFFSET) ** 2);
}

/** d ln(rate)/dE = −(1000/R)·(1/min(T, cap) − 1/294.15 K) per kJ/mol. */
export function energySensitivity(celsius: number, kinetic: KineticClass): number {
  const kelvin = Math.min(celsius, kinetic.capC) + KELVIN_OFFSET;
  return (-1000 / GAS_CONSTANT) * (1 / kelvin - 1 / REFERENCE_KELVIN);
}

/**
 * Factor on all days for a fragrance load: 1 + β·(load − reference), not below 0.1.
 * @param loadPercentOfWax 0 to 20 % of the wax
 */
export function loadFactor(kinetics: CureKinetics, loadPercentOfWax: number): number {
  within(loadPercentOfWax, 0, 100, 'Fragrance load in % of the wax');
  return Math.max(0.1, 1 + kinetics.loadSensitivity * (loadPercentOfWax - kinetics.loadReference));
}

/**
 * Hardening 0–1 after τ equivalent days: H = 1 − (1−g)^((τ/D)^n), so that H(D) = g exactly. The stretched Avrami
 * shape is our modelling choice. Worked values: soy (g 0.9, n 0.5, D 14): H(7) = 0.8037, H(28) = 0.9615.
 */
export function hardening(
  equivalentDays: number,
  testDays: number,
  atTest: number,
  exponent: number,
): number {
  return 1 - (1 - atTest) ** ((equivalentDays / testDays) ** exponent);
}

/** Equivalent days after which a hardening is reached (the inverse of `hardening`); infinite for 1 and above. */
export function daysToHardening(target: number, testDays: number, atTest: number, exponent: number): number {
  if (target >= 1) return Infinity;
  return testDays * (Math.log(1 - target) / Math.log(1 - atTest)) ** (1 / exponent);
}

/** Share of scent settled, 0–1: S = 1 − 0.1^(τ/D), so that S(D) = 0.9. */
export function scentSettled(equivalentDays: number, scentDays: number): number {
  return 1 - 0.1 ** (equivalentDays / scentDays);
}

/**
 * Avrami (JMAK) fraction X = 1 − exp(−(k·t)^n). Worked value: k 0.2, n 3, t 5 → 0.632121.
 * @param t time ≥ 0 in the unit of 1/k
 */
export function avrami(t: number, k: number, n: number): number {
  return -Math.expm1(-((k * t) ** n));
}

/** Time at which the Avrami fraction q (0–1) is reached: (−ln(1−q))^(1/n)/k. */
export function avramiTime(q: number, k: number, n: number): number {
  return (-Math.log1p(-q)) ** (1 / n) / k;
}
