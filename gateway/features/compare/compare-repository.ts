import type { DataSource } from 'typeorm';

/** A room with the band it is held against. */
export interface RoomToCompare {
  readonly id: string;
  readonly studioId: string;
  readonly band: { readonly low: number; readonly high: number };
}

/** An alert of a room; minutes until somebody acknowledged it, null if nobody did. */
export interface AlertToCompare {
  readonly studioId: string;
  readonly minutesToAnswer: number | null;
}

/** Reads what studios are compared by; every read names the studios. */
export class CompareRepository {
  constructor(private readonly dataSource: DataSource) {}

  async rooms(studioIds: readonly string[]): Promise<RoomToCompare[]> {
    if (studioIds.length === 0) return [];
    const rows = await this.dataSource.query<
      { id: string; studio_id: string; band_low: number; band_high: number }[]
    >('SELECT id, studio_id, band_low, band_high FROM room WHERE studio_id IN (?) ORDER BY position, name', [
      studioIds,
    ]);
    return rows.map((row) => ({
      id: row.id,
      studioId: row.studio_id,
      band: { low: row.band_low, high: row.band_high },
    }));
  }

  /** Alerts of rooms raised in a period. */
  async alerts(studioIds: readonly string[], from: Date, to: Date): Promise<AlertToCompare[]> {
    if (studioIds.length === 0) return [];
    const rows = await this.dataSource.query<
      { studio_id: string; raised_at: Date; acknowledged_at: Date | null }[]
    >(
      'SELECT studio_id, raised_at, acknowledged_at FROM alert WHERE studio_id IN (?) AND room_id IS NOT NULL AND raised_at >= ? AND raised_at < ?',
      [studioIds, from, to],
    );
    return rows.map((row) => ({
      studioId: row.studio_id,
      minutesToAnswer:
        row.acknowledged_at === null
          ? null
          : (row.acknowledged_at.getTime() - row.raised_at.getTime()) / 60_000,
    }));
  }
}
