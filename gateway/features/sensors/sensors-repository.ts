import { type DataSource, type EntityManager, IsNull } from 'typeorm';
import type { z } from 'zod';
import type { quarantined } from '#shared/contract/sensors';
import { SensorEntity } from '../../database/entities/sensor-entity.js';
import { type AuditLine, appendAudit } from '../audit/audit-lines.js';
import type { RecentSpan } from './sensor-health.js';

/** A sensor as it is kept. */
export interface KeptSensor {
  readonly no: number;
  readonly id: string;
  readonly studioId: string;
  readonly roomId: string;
  readonly name: string;
  readonly deviceId: string;
  readonly trusted: boolean;
  readonly offsetCelsius: number;
  readonly offsetHumidity: number;
  readonly intervalSeconds: number;
  readonly acceptLateDays: number;
  readonly battery: number | null;
  readonly futureReadings: number;
  readonly conflicts: number;
  readonly quarantined: number;
  readonly retiredAt: Date | null;
  readonly version: number;
}

export interface SensorFields {
  readonly name: string;
  readonly trusted: boolean;
  readonly offsetCelsius: number;
  readonly offsetHumidity: number;
  readonly intervalSeconds: number;
  readonly acceptLateDays: number;
}

/** The newest reading of a sensor whose time is not doubtful. */
export interface NewestValue {
  readonly at: number;
  readonly celsius: number;
  readonly humidity: number | null;
}

const SIX_HOURS_MS = 6 * 3_600_000;

/** Sensors of studios. Every read and write names the studio. */
export class SensorsRepository {
  constructor(private readonly dataSource: DataSource) {}

  async list(studioId: string): Promise<KeptSensor[]> {
    const rows = await this.dataSource
      .getRepository(SensorEntity)
      .find({ where: { studioId }, order: { name: 'ASC', no: 'ASC' } });
    return rows.map(toKept);
  }

  /** Sensors in service of every studio. */
  async inService(): Promise<KeptSensor[]> {
    const rows = await this.dataSource.getRepository(SensorEntity).find({ where: { retiredAt: IsNull() } });
    return rows.map(toKept);
  }

  async find(studioId: string, id: string): Promise<KeptSensor | null> {
    const row = await this.dataSource.getRepository(SensorEntity).findOne({ where: { id, studioId } });
    return row ? toKept(row) : null;
  }

  async insert(
    fields: SensorFields & {
      id: string;
      studioId: string;
      roomId: string;
      deviceId: string;
      secretHash: string;
    },
    audit: AuditLine,
  ): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      await manager.insert(SensorEntity, {
        ...fields,
        battery: null,
        lastHeardAt: null,
        futureReadings: '0',
        conflicts: '0',
        quarantined: '0',
        retiredAt: null,
        version: 1,
      });
      await appendAudit(manager, audit);
    });
  }

  /** False when the version is no longer the current one; nothing is changed then. */
  update(id: string, version: number, fields: SensorFields, audit: AuditLine): Promise<boolean> {
    return this.#change(audit, (manager) =>
      manager.update(SensorEntity, { id, version }, { ...fields, version: version + 1 }),
    );
  }

  setSecret(id: string, secretHash: string, audit: AuditLine): Promise<boolean> {
    return this.#change(audit, (manager) => manager.update(SensorEntity, { id }, { secretHash }));
  }

  retire(id: string, at: Date, audit: AuditLine): Promise<boolean> {
    return this.#change(audit, (manager) => manager.update(SensorEntity, { id }, { retiredAt: at }));
  }

  /** The newest reading of each sensor. */
  async newest(sensorNos: readonly number[]): Promise<Map<number, NewestValue>> {
    const newest = new Map<number, NewestValue>();
    for (const no of sensorNos) {
      const [row] = await this.dataSource.query<{ at: Date; t_micro: number; rh_micro: number | null }[]>(
        'SELECT at, t_micro, rh_micro FROM reading WHERE sensor_no = ? AND flags & 1 = 0 ORDER BY at DESC LIMIT 1',
        [no],
      );
      if (!row) continue;
      newest.set(no, {
        at: row.at.getTime(),
        celsius: row.t_micro / 1e6,
        humidity: row.rh_micro === null ? null : row.rh_micro / 1e6,
      });
    }
    return newest;
  }

  /** What each sensor measured in the six hours before its newest reading. */
  async recentSpans(newest: ReadonlyMap<number, NewestValue>): Promise<Map<number, RecentSpan>> {
    const spans = new Map<number, RecentSpan>();
    for (const [no, { at }] of newest) {
      const [row] = await this.dataSource.query<
        {
          n: string | null;
          t_min: number;
          t_max: number;
          rh_min: number | null;
          rh_max: number | null;
          first: Date;
          last: Date;
        }[]
      >(
        `SELECT SUM(n) AS n, MIN(t_min) AS t_min, MAX(t_max) AS t_max, MIN(rh_min) AS rh_min, MAX(rh_max) AS rh_max,
           MIN(bucket) AS first, MAX(bucket) AS last
         FROM rollup WHERE sensor_no = ? AND level = 5 AND bucket > ? AND bucket <= ?`,
        [no, new Date(at - SIX_HOURS_MS), new Date(at)],
      );
      if (!row || row.n === null) continue;
      spans.set(no, {
        readings: Number(row.n),
        tMin: row.t_min,
        tMax: row.t_max,
        rhMin: row.rh_min,
        rhMax: row.rh_max,
        hours: (row.last.getTime() - row.first.getTime()) / 3_600_000,
      });
    }
    return spans;
  }

  /** Means of six hours each, by sensor, oldest first; null where nothing was observed. */
  async sixHourMeans(
    sensorNos: readonly number[],
    from: number,
    to: number,
  ): Promise<Map<number, (number | null)[]>> {
    const steps = Math.ceil((to - from) / SIX_HOURS_MS);
    const means = new Map(sensorNos.map((no) => [no, new Array<number | null>(steps).fill(null)]));
    if (sensorNos.length === 0) return means;
    const rows = await this.dataSource.query<{ sensor_no: number; step: string; celsius: string }[]>(
      `SELECT sensor_no, FLOOR(TIMESTAMPDIFF(SECOND, ?, bucket) / 21600) AS step, SUM(t_sum) / SUM(n) / 1e6 AS celsius
       FROM rollup WHERE sensor_no IN (?) AND level = 60 AND bucket >= ? AND bucket < ? GROUP BY sensor_no, step`,
      [new Date(from), sensorNos, new Date(from), new Date(to)],
    );
    for (const row of rows) {
      const series = means.get(row.sensor_no);
      if (series) series[Number(row.step)] = Number(row.celsius);
    }
    return means;
  }

  async quarantine(studioId: string, limit: number): Promise<z.infer<typeof quarantined>[]> {
    const rows = await this.dataSource.query<
      {
        id: string;
        received_at: Date;
        sensor_id: string | null;
        topic: string;
        payload: Buffer;
        reason: string;
      }[]
    >(
      'SELECT id, received_at, sensor_id, topic, payload, reason FROM quarantine WHERE studio_id = ? ORDER BY id DESC LIMIT ?',
      [studioId, limit],
    );
    return rows.map((row) => ({
      id: String(row.id),
      receivedAt: row.received_at.toISOString(),
      sensorId: row.sensor_id,
      topic: row.topic,
      payload: row.payload.toString('utf8'),
      reason: row.reason,
    }));
  }

  #change(
    audit: AuditLine,
    change: (manager: EntityManager) => Promise<{ affected?: number | null }>,
  ): Promise<boolean> {
    return this.dataSource.transaction(async (manager) => {
      if ((await change(manager)).affected !== 1) return false;
      await appendAudit(manager, audit);
      return true;
    });
  }
}

function toKept(row: SensorEntity): KeptSensor {
  return {
    no: row.no,
    id: row.id,
    studioId: row.studioId,
    roomId: row.roomId,
    name: row.name,
    deviceId: row.deviceId,
    trusted: row.trusted,
    offsetCelsius: row.offsetCelsius,
    offsetHumidity: row.offsetHumidity,
    intervalSeconds: row.intervalSeconds,
    acceptLateDays: row.acceptLateDays,
    battery: row.battery,
    futureReadings: Number(row.futureReadings),
    conflicts: Number(row.conflicts),
    quarantined: Number(row.quarantined),
    retiredAt: row.retiredAt,
    version: row.version,
  };
}
