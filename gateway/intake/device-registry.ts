import { createHash, timingSafeEqual } from 'node:crypto';
import type { DataSource } from 'typeorm';

/** An enrolled sensor as the intake needs it. */
export interface Device {
  readonly deviceId: string;
  readonly sensorNo: number;
  readonly sensorId: string;
  readonly studioId: string;
  readonly roomId: string;
  readonly secretHash: string;
  /** Readings older than this are not taken, ms. */
  readonly acceptLateMs: number;
}

interface SensorRow {
  device_id: string;
  no: number;
  id: string;
  studio_id: string;
  room_id: string;
  secret_hash: string;
  accept_late_days: number;
}

/** How a device secret is kept: SHA-256, hex. A secret has 128 random bits, so it needs no slow hash. */
export function hashDeviceSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}

/** Enrolled devices in memory; read again when sensors change. */
export class DeviceRegistry {
  #devices = new Map<string, Device>();

  constructor(private readonly dataSource: DataSource) {}

  /** Reads all sensors in service. */
  async load(): Promise<void> {
    const rows = await this.dataSource.query<SensorRow[]>(
      'SELECT device_id, no, id, studio_id, room_id, secret_hash, accept_late_days FROM sensor WHERE retired_at IS NULL',
    );
    this.#devices = new Map(
      rows.map((row) => [
        row.device_id,
        {
          deviceId: row.device_id,
          sensorNo: row.no,
          sensorId: row.id,
          studioId: row.studio_id,
          roomId: row.room_id,
          secretHash: row.secret_hash,
          acceptLateMs: row.accept_late_days * 86_400_000,
        },
      ]),
    );
  }

  find(deviceId: string): Device | null {
    return this.#devices.get(deviceId) ?? null;
  }

  /** The device whose secret this is, or null. Takes the same time whether the device exists or not. */
  authenticate(deviceId: string, secret: Buffer): Device | null {
    const device = this.find(deviceId);
    const given = createHash('sha256').update(secret).digest();
    const kept = device ? Buffer.from(device.secretHash, 'hex') : given;
    const same = timingSafeEqual(given, kept.length === given.length ? kept : Buffer.alloc(given.length));
    return device !== null && same ? device : null;
  }
}
