import type { RollupRow } from '../../history/room-cells-repository.js';

/** A room's air over a stretch of time, its sensors pooled with their calibration offsets; °C and %. */
export interface PooledRow {
  /** Start of the stretch, epoch ms. */
  readonly at: number;
  readonly t: number;
  readonly tMin: number;
  readonly tMax: number;
  readonly rh: number | null;
  readonly rhMin: number | null;
  readonly rhMax: number | null;
}

/** Pools what several sensors measured: means over all readings, extremes over all sensors. Oldest first, without silences. */
export function poolRows(rows: readonly RollupRow[]): PooledRow[] {
  const bySecond = new Map<number, RollupRow[]>();
  for (const row of rows) {
    const same = bySecond.get(row.second);
    if (same) same.push(row);
    else bySecond.set(row.second, [row]);
  }
  return [...bySecond].sort(([a], [b]) => a - b).map(([second, same]) => pool(second, same));
}

function pool(second: number, rows: readonly RollupRow[]): PooledRow {
  let [n, t, rhN, rh] = [0, 0, 0, 0];
  let [tMin, tMax, rhMin, rhMax] = [Infinity, -Infinity, Infinity, -Infinity];
  for (const { sensor, ...row } of rows) {
    n += row.n;
    t += row.tSum / 1e6 + row.n * sensor.offsetCelsius;
    tMin = Math.min(tMin, row.tMin / 1e6 + sensor.offsetCelsius);
    tMax = Math.max(tMax, row.tMax / 1e6 + sensor.offsetCelsius);
    if (row.rhN === 0) continue;
    rhN += row.rhN;
    rh += row.rhSum / 1e6 + row.rhN * sensor.offsetHumidity;
    rhMin = Math.min(rhMin, (row.rhMin ?? Infinity) / 1e6 + sensor.offsetHumidity);
    rhMax = Math.max(rhMax, (row.rhMax ?? -Infinity) / 1e6 + sensor.offsetHumidity);
  }
  return {
    at: second * 1000,
    ...{ t: t / n, tMin, tMax },
    rh: rhN === 0 ? null : asHumidity(rh / rhN),
    rhMin: Number.isFinite(rhMin) ? asHumidity(rhMin) : null,
    rhMax: Number.isFinite(rhMax) ? asHumidity(rhMax) : null,
  };
}

/** An offset must not carry a humidity out of its range. */
function asHumidity(percent: number): number {
  return Math.min(100, Math.max(0, percent));
}
