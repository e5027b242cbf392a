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

interface CellRow {
  readonly room_id: string;
  readonly cell: number | string;
  readonly celsius: number;
  readonly humidity: number | null;
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
    const runs = new Map(roomIds.map((id) => [id, emptyRun(fromCell, length)] as const));
    if (roomIds.length === 0 || length === 0) return runs;
    const rows = await this.dataSource.query<CellRow[]>(
      `SELECT s.room_id, TIMESTAMPDIFF(SECOND, '1970-01-01', r.bucket) DIV ${CELL_MS / 1000} AS cell,
              SUM(r.t_sum + r.n * s.offset_celsius * 1e6) / SUM(r.n) / 1e6 AS celsius,
              SUM(r.rh_sum + r.rh_n * s.offset_humidity * 1e6) / SUM(r.rh_n) / 1e6 AS humidity
       FROM sensor s JOIN rollup r ON r.sensor_no = s.no AND r.level = 5
       WHERE s.room_id IN (?) AND s.trusted = 1 AND r.n > 0 AND r.bucket >= ? AND r.bucket < ?
         AND (s.retired_at IS NULL OR r.bucket < s.retired_at)
       GROUP BY s.room_id, cell`,
      [roomIds, new Date(cellStart(fromCell)), new Date(cellStart(toCell))],
    );
    for (const row of rows) {
      const run = runs.get(row.room_id);
      const index = Number(row.cell) - fromCell;
      if (!run) continue;
      run.celsius[index] = row.celsius;
      if (row.humidity !== null) run.humidity[index] = Math.min(100, Math.max(0, row.humidity));
    }
    return runs;
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
