import { gaussian, seedOf } from './seeded-noise.js';

/** How a sensor differs from the truth. */
export interface SensorBuild {
  readonly deviceId: string;
  /** Constant error, K. */
  readonly bias: number;
  /** sd of a single reading, K. */
  readonly noise: number;
}

export const FAULTS = ['silent', 'stuck', 'drifting', 'spiking', 'wrong-clock', 'battery-low'] as const;
export type Fault = (typeof FAULTS)[number];

/** A fault since an instant, epoch ms. */
export interface FaultSince {
  readonly fault: Fault;
  readonly since: number;
}

/** A reading as the sensor sends it; null: it sends nothing. */
export interface SensorReading {
  readonly celsius: number;
  readonly humidity: number;
  readonly battery: number;
  /** Device time, epoch ms. */
  readonly at: number;
}

const DAY_MS = 86_400_000;
const DRIFT_A_DAY = 0.08;
const CLOCK_AHEAD_MS = 3 * 3_600_000;

/** What a sensor makes of a room's true air at an instant. The same instant always gives the same reading. */
export function measure(
  build: SensorBuild,
  air: { readonly celsius: number; readonly humidity: number },
  at: number,
  fault: FaultSince | null,
): SensorReading | null {
  const seed = seedOf(build.deviceId);
  const second = Math.floor(at / 1000);
  if (fault?.fault === 'silent') return null;
  const battery = fault?.fault === 'battery-low' ? 9 : 96 - ((at / DAY_MS) % 200) / 5;
  if (fault?.fault === 'stuck') {
    return { celsius: 20.6, humidity: 47.5, battery, at };
  }
  const drift = fault?.fault === 'drifting' ? ((at - fault.since) / DAY_MS) * DRIFT_A_DAY : 0;
  const spike = fault?.fault === 'spiking' && gaussian(seed + 5, second) > 1.2 ? 7 : 0;
  const celsius = air.celsius + build.bias + build.noise * gaussian(seed, second) + drift + spike;
  const humidity = air.humidity + 0.6 * gaussian(seed + 1, second);
  return {
    celsius: Math.round(celsius * 100) / 100,
    humidity: Math.round(Math.min(100, Math.max(0, humidity)) * 10) / 10,
    battery: Math.round(battery),
    at: fault?.fault === 'wrong-clock' ? at + CLOCK_AHEAD_MS : at,
  };
}

/** The payload a sensor publishes for readings, oldest first. */
export function payloadOf(readings: readonly SensorReading[]): string {
  const plain = readings.map(({ celsius, humidity, battery, at }) => ({
    t: celsius,
    rh: humidity,
    at: new Date(at).toISOString(),
    bat: battery,
  }));
  return JSON.stringify(plain.length === 1 ? plain[0] : plain);
}
