import { normalCdf, Z_90 } from '#shared/statistics/normal';

/** How sure the cure numbers of a wax are. */
export interface Doubt {
  /** Coefficient of variation of the days D. */
  readonly cvD: number;
  /** sd of the activation energy, kJ/mol. */
  readonly sdEnergy: number;
  /** sd of the room sensor's bias, K. */
  readonly sdRoom: number;
}

/** Before a studio has calibrated a wax. Modelling choice, no source. */
export const UNCALIBRATED: Doubt = { cvD: 0.2, sdEnergy: 15, sdRoom: 0.5 };

export function doubtOf(calibration: { cvD: number; sdEnergy: number } | null): Doubt {
  return calibration === null ? UNCALIBRATED : { ...calibration, sdRoom: UNCALIBRATED.sdRoom };
}

/** What a clock (hardening or scent) has gathered from the pour to some cell. */
export interface ClockSums {
  /** Equivalent days τ. */
  readonly days: number;
  /** Σ rate·κ, d/K. */
  readonly perKelvin: number;
  /** Σ rate·κ_E, d per kJ/mol. */
  readonly perEnergy: number;
  /** Variance from gaps and forecast, d². */
  readonly variance: number;
}

/** sd of ln τ from everything but the days D: energy, sensor bias, gaps and forecast. */
export function ageSpread(sums: ClockSums, doubt: Doubt): number {
  return Math.sqrt(ageVariance(sums, doubt));
}

function ageVariance(sums: ClockSums, doubt: Doubt): number {
  if (sums.days === 0) return 0;
  const energy = doubt.sdEnergy * sums.perEnergy;
  const room = doubt.sdRoom * sums.perKelvin;
  return (energy * energy + room * room + sums.variance) / (sums.days * sums.days);
}

/** sd s of ln(τ/D), the days' own doubt included. */
export function readySpread(sums: ClockSums, doubt: Doubt): number {
  return Math.sqrt(doubt.cvD ** 2 + ageVariance(sums, doubt));
}

/** u/s with u = ln(τ/D): the chance of being ready is Φ of it. −∞ when nothing has been gathered. */
export function readyScore(sums: ClockSums, needed: number, doubt: Doubt): number {
  if (sums.days <= 0) return -Infinity;
  return Math.log(sums.days / needed) / readySpread(sums, doubt);
}

/** Chance that D equivalent days have been reached, 0–1. */
export function readyChance(score: number): number {
  return score === -Infinity ? 0 : normalCdf(score);
}

/** Scores at which the chance reaches 10, 50 and 90 %, each less a chance of 1e-12 for rounding. */
export const SCORE_AT = { t10: -Z_90 - 5.7e-12, t50: -2.51e-12, t90: Z_90 - 5.7e-12 } as const;
