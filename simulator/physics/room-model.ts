import { humidityRatio, relativeHumidity } from '#shared/air/moist-air';
import { hashed } from './seeded-noise.js';

/** A cure room as a body with one heat capacity. */
export interface RoomBuild {
  readonly seed: number;
  /** Time constant towards the outside with everything off, h. */
  readonly timeConstant: number;
  /** Warmth of people, lamps and the house around: the room settles this far above the outside, K. */
  readonly gain: number;
  /** Share of the outside's swing that reaches the room; the rest is the house's even temperature. */
  readonly exposure: number;
  /** Temperature of the house around, °C. */
  readonly house: number;
  /** Thermostat of the heater, °C; null: none. */
  readonly heatTo: number | null;
  /** What the heater can do, K/h. */
  readonly heater: number;
  /** Thermostat of the cooler, °C; null: none. */
  readonly coolTo: number | null;
  readonly cooler: number;
  /** Air exchange time constant, h. */
  readonly airing: number;
  /** Moisture of people and wash-up, kg/kg on top of the outside. */
  readonly moisture: number;
}

/** A push on a room from outside its usual life. */
export interface RoomPush {
  /** K/h, e.g. a radiator that does not close. */
  readonly heat: number;
  /** kg/kg per hour. */
  readonly moisture: number;
}

export interface RoomState {
  readonly celsius: number;
  /** Humidity ratio, kg/kg. */
  readonly ratio: number;
  readonly heating: boolean;
  readonly cooling: boolean;
}

const HYSTERESIS = 0.3;
const HOUR_MS = 3_600_000;
/** A door stands open for this long. */
const DOOR_MS = 600_000;
/** A room with its door open follows the outside this much quicker. */
const DOOR_FACTOR = 6;

/** A room that has settled where the house is. */
export function settledRoom(build: RoomBuild, outside: number, outsideRatio: number): RoomState {
  return {
    celsius: drivenTo(build, outside),
    ratio: outsideRatio + build.moisture,
    heating: false,
    cooling: false,
  };
}

/**
 * The state of a room `ms` later: exponential approach to where the surroundings drive it, heater and cooler with thermostats,
 * doors opened now and then on working hours. Exact for constant surroundings, whatever the step.
 * @param at start of the step, epoch ms
 */
export function stepRoom(
  build: RoomBuild,
  state: RoomState,
  at: number,
  ms: number,
  outside: { readonly celsius: number; readonly humidity: number },
  push: RoomPush,
): RoomState {
  const hours = ms / HOUR_MS;
  const door = doorIsOpen(build.seed, at);
  const timeConstant = build.timeConstant / (door ? DOOR_FACTOR : 1);
  const heating =
    build.heatTo !== null && state.celsius < build.heatTo + (state.heating ? HYSTERESIS : -HYSTERESIS);
  const cooling =
    build.coolTo !== null && state.celsius > build.coolTo + (state.cooling ? -HYSTERESIS : HYSTERESIS);
  const power = (heating ? build.heater : 0) - (cooling ? build.cooler : 0) + push.heat;
  const target = drivenTo(build, outside.celsius) + power * timeConstant;
  const celsius = target + (state.celsius - target) * Math.exp(-hours / timeConstant);
  const airing = build.airing / (door ? DOOR_FACTOR : 1);
  const outsideRatio = humidityRatio(clampCelsius(outside.celsius), outside.humidity);
  const wet = outsideRatio + build.moisture + push.moisture * airing;
  const ratio = wet + (state.ratio - wet) * Math.exp(-hours / airing);
  return { celsius, ratio: Math.max(1e-5, ratio), heating, cooling };
}

/** Relative humidity of a room, %. */
export function humidityOf(state: RoomState): number {
  return Math.max(1, relativeHumidity(clampCelsius(state.celsius), state.ratio));
}

function drivenTo(build: RoomBuild, outside: number): number {
  return build.exposure * outside + (1 - build.exposure) * build.house + build.gain;
}

/** Doors open for ten minutes, about every third hour between 7 and 17 UTC. */
function doorIsOpen(seed: number, at: number): boolean {
  const hour = (at / HOUR_MS) % 24;
  return hour >= 7 && hour < 17 && hashed(seed, Math.floor(at / DOOR_MS)) < 1 / 18;
}

function clampCelsius(celsius: number): number {
  return Math.min(60, Math.max(-40, celsius));
}
