import type { DataSource } from 'typeorm';
import { type AlertKind, alertKind } from '#shared/contract/alerts';

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
