import type { DataSource } from 'typeorm';
import { type AlertKind, alertKind } from '#shared/contract/alerts';

/** Sums over a stretch of time, calibration offsets applied; °C and %. */
export interface SeriesRow {
  /** Start of the stretch, epoch ms. */
  readonly at: number;
  readonly t: number;
  readonly tMin: number;
  readonly tMax: number;
  readonly rh: number | null;
  readonly rhMin: number | null;
  readonly rhMax: number | null;
}

/** A batch that came to a room or left it. */
export interface StayMark {
  readonly batchId: string;
  readonly code: string;
  readonly pouredAt: Date;
  readonly from: Date;
  readonly to: Date | null;
}

export interface AlertMark {
  readonly id: string;
  readonly kind: AlertKind;
  readonly from: Date;
  readonly to: Date | null;
}

/** Which rollups a chart is drawn from: five minutes, an hour, or the studio's local day. */
export type RollupLevel = 5 | 60 | 1440;

/** Reads what a room's chart shows. The studio has been checked by the caller. */
export class RoomSeriesRepository {
  constructor(private readonly dataSource: DataSource) {}

  async timeZone(studioId: string): Promise<string> {
    const [row] = await this.dataSource.query<{ time_zone: string }[]>(
      'SELECT time_zone FROM studio WHERE id = ?',
      [studioId],
    );
    return row?.time_zone ?? 'UTC';
  }

  /** Trusted sensors pooled in steps of the epoch; a step of null leaves the rollups' own buckets. Stretches of silence are left out. */
  async rows(
    roomId: string,
    level: RollupLevel,
    stepSeconds: number | null,
    from: number,
    to: number,
  ): Promise<SeriesRow[]> {
    const second = `TIMESTAMPDIFF(SECOND, '1970-01-01', r.bucket)`;
    const slot = stepSeconds === null ? second : `${second} DIV ${stepSeconds} * ${stepSeconds}`;
    const rows = await this.dataSource.query<(Omit<SeriesRow, 'at'> & { slot: number | string })[]>(
      `SELECT ${slot} AS slot,
              SUM(r.t_sum + r.n * s.offset_celsius * 1e6) / SUM(r.n) / 1e6 AS t,
              MIN(r.t_min / 1e6 + s.offset_celsius) AS tMin, MAX(r.t_max / 1e6 + s.offset_celsius) AS tMax,
              SUM(r.rh_sum + r.rh_n * s.offset_humidity * 1e6) / SUM(r.rh_n) / 1e6 AS rh,
              MIN(r.rh_min / 1e6 + s.offset_humidity) AS rhMin, MAX(r.rh_max / 1e6 + s.offset_humidity) AS rhMax
       FROM sensor s JOIN rollup r ON r.sensor_no = s.no AND r.level = ?
       WHERE s.room_id = ? AND s.trusted = 1 AND r.n > 0 AND r.bucket >= ? AND r.bucket < ?
         AND (s.retired_at IS NULL OR r.bucket < s.retired_at)
       GROUP BY slot ORDER BY slot`,
      [level, roomId, new Date(from), new Date(to)],
    );
    return rows.map(({ slot: seconds, t, tMin, tMax, rh, rhMin, rhMax }) => ({
      at: Number(seconds) * 1000,
      ...{ t, tMin, tMax },
      rh: asHumidity(rh),
      rhMin: asHumidity(rhMin),
      rhMax: asHumidity(rhMax),
    }));
  }

  /** Stays that began or ended in a period, newest first, at most `limit`. */
  async stays(roomId: string, from: Date, to: Date, limit: number): Promise<StayMark[]> {
    const rows = await this.dataSource.query<
      { batch_id: string; code: string; poured_at: Date; from_at: Date; to_at: Date | null }[]
    >(
      `SELECT s.batch_id, b.code, b.poured_at, s.from_at, s.to_at FROM stay s JOIN batch b ON b.id = s.batch_id
       WHERE s.room_id = ? AND ((s.from_at >= ? AND s.from_at < ?) OR (s.to_at >= ? AND s.to_at < ?)) ORDER BY s.from_at DESC, s.id LIMIT ?`,
      [roomId, from, to, from, to, limit],
    );
    return rows.map((row) => ({
      batchId: row.batch_id,
      code: row.code,
      pouredAt: row.poured_at,
      from: row.from_at,
      to: row.to_at,
    }));
  }

  /** Alerts that stood at some time in a period, newest first, at most `limit`. */
  async alerts(roomId: string, from: Date, to: Date, limit: number): Promise<AlertMark[]> {
    const rows = await this.dataSource.query<
      { id: string; kind: string; raised_at: Date; cleared_at: Date | null }[]
    >(
      `SELECT id, kind, raised_at, cleared_at FROM alert
       WHERE room_id = ? AND raised_at < ? AND (cleared_at IS NULL OR cleared_at >= ?) ORDER BY raised_at DESC, id LIMIT ?`,
      [roomId, to, from, limit],
    );
    return rows.map((row) => ({
      id: row.id,
      kind: alertKind.parse(row.kind),
      from: row.raised_at,
      to: row.cleared_at,
    }));
  }
}

/** An offset must not carry a humidity out of its range. */
function asHumidity(percent: number | null): number | null {
  return percent === null ? null : Math.min(100, Math.max(0, percent));
}
