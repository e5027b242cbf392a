import { smoothNoise } from './seeded-noise.js';

/** The climate of a place. */
export interface Climate {
  readonly seed: number;
  /** Mean of the year, °C. */
  readonly mean: number;
  /** Half the difference between the warmest and the coldest month, K. */
  readonly season: number;
  /** Half the difference between day and night, K. */
  readonly day: number;
  /** How far fronts push the temperature, K. */
  readonly fronts: number;
  /** Longitude in hours ahead of UTC, for the time of the warmest hour. */
  readonly hoursAhead: number;
  /** Mean relative humidity, %. */
  readonly humidity: number;
}

/** A spell of unusual weather. */
export interface Spell {
  /** Epoch ms. */
  readonly from: number;
  readonly to: number;
  /** K on top of the usual. */
  readonly warmer: number;
}

const HOUR_MS = 3_600_000;
const DAY_MS = 24 * HOUR_MS;
const YEAR_DAYS = 365.25;
/** Warmest day of the year (late July) and hour of the day. */
const WARMEST_DAY = 205;
const WARMEST_HOUR = 15;

/** Outside temperature in °C at an instant: season, day and night, fronts of a few days, spells. The same for ever. */
export function outsideCelsius(climate: Climate, at: number, spells: readonly Spell[] = []): number {
  const days = at / DAY_MS;
  const season = Math.cos((2 * Math.PI * (days - WARMEST_DAY)) / YEAR_DAYS);
  const hour = (at / HOUR_MS + climate.hoursAhead) % 24;
  const daily = Math.cos((2 * Math.PI * (hour - WARMEST_HOUR)) / 24);
  const cloud = (1 + smoothNoise(climate.seed + 1, days * 1.3)) / 2;
  const front = smoothNoise(climate.seed, days / 3.5) + 0.4 * smoothNoise(climate.seed + 2, days * 2);
  const spell = spells.reduce((sum, one) => sum + one.warmer * fade(one, at), 0);
  return (
    climate.mean +
    climate.season * season +
    climate.day * daily * (0.4 + 0.6 * cloud) +
    climate.fronts * front +
    spell
  );
}

/** Outside relative humidity in %, lower by day and under clear sky. */
export function outsideHumidity(climate: Climate, at: number): number {
  const days = at / DAY_MS;
  const hour = (at / HOUR_MS + climate.hoursAhead) % 24;
  const daily = Math.cos((2 * Math.PI * (hour - WARMEST_HOUR)) / 24);
  const wet = climate.humidity - 12 * daily + 14 * smoothNoise(climate.seed + 3, days / 2);
  return Math.min(98, Math.max(15, wet));
}

/** Spells come and go over six hours. */
function fade({ from, to }: Spell, at: number): number {
  const edge = 6 * HOUR_MS;
  return Math.max(0, Math.min(1, (at - from) / edge, (to - at) / edge));
}
