import { ewma } from '#shared/statistics/control-charts';
import { median } from '#shared/statistics/median';
import type { Sensor } from '#shared/contract/sensors';
import { staleAfterMs } from '../overview/room-condition.js';

type HealthState = Sensor['health']['state'];

/** What a sensor measured in the hours before it was last heard, millionths. */
export interface RecentSpan {
  readonly readings: number;
  readonly tMin: number;
  readonly tMax: number;
  readonly rhMin: number | null;
  readonly rhMax: number | null;
  /** Hours between the first and the last five minutes of the span. */
  readonly hours: number;
}

/** Identical values for this long are no weather. Common practice, no source. */
export const STUCK_HOURS = 6;
const STUCK_READINGS = 12;

/** Whether a sensor repeats one value: temperature and, where it sends one, humidity unchanged for six hours. */
export function isStuck(span: RecentSpan | null): boolean {
  return (
    span !== null &&
    span.readings >= STUCK_READINGS &&
    span.hours >= STUCK_HOURS - 0.5 &&
    span.tMin === span.tMax &&
    span.rhMin === span.rhMax
  );
}

/** Steps of the drift chart: one value per six hours, the first seven days set the spread. */
const LEARNING_STEPS = 28;
const FEWEST_STEPS = LEARNING_STEPS + 4;
const LAMBDA = 0.2;
const WIDTH = 3;
/** A quieter pair of sensors than this does not exist: resolution and noise, K. */
const SMALLEST_SIGMA = 0.05;

/**
 * Whether a sensor drifts against the others of its room: EWMA chart (λ 0.2, L 3) of its difference to their median, one value per
 * six hours, spread from the first seven days. A room with one sensor cannot tell drift from weather: false.
 * @param own six-hour means, oldest first, °C; null where nothing was observed
 * @param others the same of the room's other sensors
 */
export function isDrifting(
  own: readonly (number | null)[],
  others: readonly (readonly (number | null)[])[],
): boolean {
  const differences = own.flatMap((value, step) => {
    const there = others.map((series) => series[step] ?? null).filter((other) => other !== null);
    return value === null || there.length === 0 ? [] : [value - median(there)];
  });
  if (differences.length < FEWEST_STEPS) return false;
  const learned = differences.slice(0, LEARNING_STEPS);
  const target = learned.reduce((sum, value) => sum + value, 0) / learned.length;
  const variance = learned.reduce((sum, value) => sum + (value - target) ** 2, 0) / (learned.length - 1);
  const sigma = Math.max(SMALLEST_SIGMA, Math.sqrt(variance));
  const chart = ewma(differences.slice(LEARNING_STEPS), { target, sigma, lambda: LAMBDA, width: WIDTH });
  const last = chart.z.at(-1) ?? target;
  return last > chart.upper || last < chart.lower;
}

/** The one state shown for a sensor; silence before anything that could only be guessed. */
export function healthState(
  sensor: {
    readonly intervalSeconds: number;
    readonly retired: boolean;
    readonly lastHeardAt: number | null;
  },
  now: number,
  span: RecentSpan | null,
  drifting: boolean,
): HealthState {
  if (sensor.retired) return 'retired';
  if (sensor.lastHeardAt === null) return 'never-heard';
  if (now - sensor.lastHeardAt > staleAfterMs(sensor.intervalSeconds)) return 'silent';
  if (isStuck(span)) return 'stuck';
  return drifting ? 'drifting' : 'fine';
}
