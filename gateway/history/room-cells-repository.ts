import type { DataSource } from 'typeorm';
import { CELL_MS, cellOf, cellStart } from '#shared/cure/grid';

/** What decides how a sensor counts towards its room. */
export interface RoomSensor {
  readonly no: number;
  readonly roomId: string;
  readonly offsetCelsius: number;
  readonly offsetHumidity: number;
  /** Readings from this time on do not count; null for a sensor in service. Epoch ms. */
  readonly retiredAt: number | null;
}

/** Ten-minute cells of one room, oldest first; NaN where nothing was observed. */
export interface CellRun {
  readonly fromCell: number;
  readonly celsius: Float64Array;
  /** %; NaN also where only the temperature was measured. */
  readonly humidity: Float64Array;
}

/** What several sensors measured in one stretch of time, before their offsets: counts, sums, lowest and highest, in millionths. */
export interface RollupRow {
  readonly sensor: RoomSensor;
  /** Which stretch: whole seconds of the epoch at its start. */
  readonly second: number;
  readonly n: number;
  readonly tSum: number;
  readonly tMin: number;
  readonly tMax: number;
  readonly rhN: number;
  readonly rhSum: number;
  readonly rhMin: number | null;
  readonly rhMax: number | null;
}

interface Pool {
  n: number;
  t: number;
  rhN: number;
  rh: number;
}

/** A run of silence. */
export function emptyRun(fromCell: number, length: number): CellRun {
  return {
    fromCell,
    celsius: new Float64Array(length).fill(Number.NaN),
    humidity: new Float64Array(length).fill(Number.NaN),
  };
}

/** Reads rooms' ten-minute cells from the five-minute rollups. */
export class RoomCellsRepository {
  constructor(private readonly dataSource: DataSource) {}

  /** Trusted sensors of rooms, retired ones included: what they measured in their time still counts. */
  async sensors(roomIds: readonly string[]): Promise<RoomSensor[]> {
    if (roomIds.length === 0) return [];
    const rows = await this.dataSource.query<
      {
        no: number;
        room_id: string;
        offset_celsius: number;
        offset_humidity: number;
        retired_at: Date | null;
      }[]
    >(
      'SELECT no, room_id, offset_celsius, offset_humidity, retired_at FROM sensor WHERE room_id IN (?) AND trusted = 1 ORDER BY no',
      [roomIds],
    );
    return rows.map((row) => ({
      no: row.no,
      roomId: row.room_id,
      offsetCelsius: row.offset_celsius,
      offsetHumidity: row.offset_humidity,
      retiredAt: row.retired_at?.getTime() ?? null,
    }));
  }

  /**
   * Cells [fromCell, toCell) of rooms: the mean of all readings of the room's trusted sensors in those ten minutes,
   * each with its calibration offset. A room without trusted sensors has gaps only.
   */
  async cells(roomIds: readonly string[], fromCell: number, toCell: number): Promise<Map<string, CellRun>> {
    const length = Math.max(0, toCell - fromCell);
    const runs = new Map(roomIds.map((id) => [id, emptyRun(fromCell, length)]));
    if (length === 0) return runs;
    const [from, to] = [cellStart(fromCell), cellStart(toCell)];
    const rows = await this.rollups(await this.sensors(roomIds), 5, CELL_MS / 1000, from, to);
    const pools = new Map<string, Pool[]>();
    for (const row of rows) {
      const { roomId, offsetCelsius, offsetHumidity } = row.sensor;
      const cells = pools.get(roomId) ?? [];
      if (cells.length === 0) pools.set(roomId, cells);
      const index = (row.second * 1000) / CELL_MS - fromCell;
      const pool = (cells[index] ??= { n: 0, t: 0, rhN: 0, rh: 0 });
      pool.n += row.n;
      pool.t += row.tSum + row.n * offsetCelsius * 1e6;
      pool.rhN += row.rhN;
      pool.rh += row.rhSum + row.rhN * offsetHumidity * 1e6;
    }
    for (const [roomId, cells] of pools) {
      const run = runs.get(roomId);
      cells.forEach(({ n, t, rhN, rh }, index) => {
        if (!run) return;
        run.celsius[index] = t / n / 1e6;
        if (rhN > 0) run.humidity[index] = Math.min(100, Math.max(0, rh / rhN / 1e6));
      });
    }
    return runs;
  }

  /**
   * Rollups of a level (5, 60 or 1440 minutes) summed up by sensor in steps of whole seconds of the epoch; a step of null leaves
   * the buckets as they are. Epoch ms, `to` not included.
   */
  async rollups(
    sensors: readonly RoomSensor[],
    level: 5 | 60 | 1440,
    stepSeconds: number | null,
    from: number,
    to: number,
  ): Promise<RollupRow[]> {
    // Sensors are named by number, not joined: only then are the rows of the period read and no others, however long the past is.
    const untilOf = new Map<number, RoomSensor[]>();
    for (const sensor of sensors) {
      const until = Math.min(to, sensor.retiredAt ?? to);
      if (until > from) untilOf.set(until, [...(untilOf.get(until) ?? []), sensor]);
    }
    const second = `TIMESTAMPDIFF(SECOND, '1970-01-01', bucket)`;
    const slot = stepSeconds === null ? second : `${second} DIV ${stepSeconds} * ${stepSeconds}`;
    const found: RollupRow[] = [];
    for (const [until, group] of untilOf) {
      const byNo = new Map(group.map((sensor) => [sensor.no, sensor]));
      const rows = await this.dataSource.query<(Omit<RollupRow, 'sensor'> & { sensor_no: number })[]>(
        `SELECT sensor_no, ${slot} AS second, SUM(n) + 0e0 AS n, SUM(t_sum) + 0e0 AS tSum, MIN(t_min) AS tMin, MAX(t_max) AS tMax,
                SUM(rh_n) + 0e0 AS rhN, SUM(rh_sum) + 0e0 AS rhSum, MIN(rh_min) AS rhMin, MAX(rh_max) AS rhMax
         FROM rollup WHERE sensor_no IN (?) AND level = ${level} AND bucket >= ? AND bucket < ? AND n > 0 GROUP BY sensor_no, second`,
        [[...byNo.keys()], new Date(from), new Date(until)],
      );
      for (const { sensor_no, second: start, ...sums } of rows) {
        const sensor = byNo.get(sensor_no);
        if (sensor) found.push({ sensor, second: Number(start), ...sums });
      }
    }
    return found;
  }

  /** Last cell before `cell` in which a trusted sensor of the room measured something; null for none. */
  async lastCell(roomId: string, cell: number): Promise<number | null> {
    const sensors = await this.sensors([roomId]);
    let last: number | null = null;
    for (const { no, retiredAt } of sensors) {
      const before = Math.min(cellStart(cell), retiredAt ?? Infinity);
      const [row] = await this.dataSource.query<{ last: Date | null }[]>(
        'SELECT MAX(bucket) AS last FROM rollup WHERE sensor_no = ? AND level = 5 AND bucket < ?',
        [no, new Date(before)],
      );
      if (row?.last) last = Math.max(last ?? -Infinity, cellOf(row.last.getTime()));
    }
    return last;
  }
}
