import type { DataSource } from 'typeorm';
import type { RoomLimits } from '#shared/contract/rooms';

/** A room with what its present state is held against. */
export interface RoomOfStudio {
  readonly id: string;
  readonly studioId: string;
  readonly timeZone: string;
  readonly limits: RoomLimits;
}

/** A trusted sensor in service. */
export interface LiveSensor {
  readonly no: number;
  readonly roomId: string;
  readonly offsetCelsius: number;
  readonly offsetHumidity: number;
  readonly intervalSeconds: number;
  readonly battery: number | null;
}

/** A reading as measured, before the sensor's offset. */
export interface NewestReading {
  readonly sensorNo: number;
  readonly at: number;
  readonly celsius: number;
  readonly humidity: number | null;
}

/** Reads what the present state of the rooms is made of. */
export class LatestReadingsRepository {
  constructor(private readonly dataSource: DataSource) {}

  async rooms(): Promise<RoomOfStudio[]> {
    const rows = await this.dataSource.query<RoomRow[]>(
      `SELECT r.id, r.studio_id, st.time_zone, r.band_low, r.band_high, r.heat_limit, r.humidity_high, r.swing_limit, r.slip_days
       FROM room r JOIN studio st ON st.id = r.studio_id`,
    );
    return rows.map((row) => ({
      id: row.id,
      studioId: row.studio_id,
      timeZone: row.time_zone,
      limits: {
        bandLow: row.band_low,
        bandHigh: row.band_high,
        heatLimit: row.heat_limit,
        humidityHigh: row.humidity_high,
        swingLimit: row.swing_limit,
        slipDays: row.slip_days,
      },
    }));
  }

  async sensors(): Promise<LiveSensor[]> {
    const rows = await this.dataSource.query<SensorRow[]>(
      `SELECT no, room_id, offset_celsius, offset_humidity, interval_seconds, battery FROM sensor WHERE trusted = 1 AND retired_at IS NULL ORDER BY no`,
    );
    return rows.map((row) => ({
      no: row.no,
      roomId: row.room_id,
      offsetCelsius: row.offset_celsius,
      offsetHumidity: row.offset_humidity,
      intervalSeconds: row.interval_seconds,
      battery: row.battery,
    }));
  }

  /** The newest reading of each sensor; one that came with a time ahead of ours is never the newest. */
  async newest(sensorNos: readonly number[]): Promise<NewestReading[]> {
    const found: NewestReading[] = [];
    for (const sensorNo of sensorNos) {
      const [row] = await this.dataSource.query<{ at: Date; t_micro: number; rh_micro: number | null }[]>(
        'SELECT at, t_micro, rh_micro FROM reading WHERE sensor_no = ? AND flags & 1 = 0 ORDER BY at DESC LIMIT 1',
        [sensorNo],
      );
      if (!row) continue;
      const humidity = row.rh_micro === null ? null : row.rh_micro / 1e6;
      found.push({ sensorNo, at: row.at.getTime(), celsius: row.t_micro / 1e6, humidity });
    }
    return found;
  }

  /** Highest temperature of sensors from a time on, as measured. */
  async peaks(sensorNos: readonly number[], from: number): Promise<Map<number, number>> {
    if (sensorNos.length === 0) return new Map();
    const rows = await this.dataSource.query<{ sensor_no: number; peak: number }[]>(
      'SELECT sensor_no, MAX(t_max) / 1e6 AS peak FROM rollup WHERE sensor_no IN (?) AND level = 5 AND bucket >= ? GROUP BY sensor_no',
      [sensorNos, new Date(from)],
    );
    return new Map(rows.map((row) => [row.sensor_no, row.peak]));
  }
}

interface RoomRow {
  id: string;
  studio_id: string;
  time_zone: string;
  band_low: number;
  band_high: number;
  heat_limit: number | null;
  humidity_high: number;
  swing_limit: number;
  slip_days: number;
}
interface SensorRow {
  no: number;
  room_id: string;
  offset_celsius: number;
  offset_humidity: number;
  interval_seconds: number;
  battery: number | null;
}
