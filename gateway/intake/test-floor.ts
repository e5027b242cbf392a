import { randomUUID } from 'node:crypto';
import { createServer } from 'node:net';
import { pino } from 'pino';
import type { DataSource } from 'typeorm';
import { readingTopic } from '#shared/contract/telemetry';
import type { CellsChanged, CommittedReading, LayoutChanged } from '../announcements.js';
import { type Clock, systemClock } from '../clock.js';
import type { TestDatabase } from '../database/test-database.js';
import { Feed } from '../feed.js';
import { hashDeviceSecret } from './device-registry.js';
import { Intake } from './intake.js';

/** A studio with one room and sensors in it, for intake specs. */
export interface TestFloor {
  readonly studioId: string;
  readonly roomId: string;
  readonly devices: readonly { deviceId: string; secret: string; topic: string; sensorNo: number }[];
}

/** Enrols `count` sensors in one room of a new studio. */
export async function enrolTestFloor(
  dataSource: DataSource,
  count: number,
  timeZone = 'Europe/Lisbon',
): Promise<TestFloor> {
  const [studioId, roomId] = [randomUUID(), randomUUID()];
  await dataSource.query(
    `INSERT INTO studio (id, name, time_zone, unit, address, pressure_hpa, recipients, escalate_after_minutes) VALUES (?, 'Spec studio', ?, 'C', '', 1013.25, '[]', 30)`,
    [studioId, timeZone],
  );
  await dataSource.query(
    `INSERT INTO room (id, studio_id, name, band_low, band_high, heat_limit, humidity_high, swing_limit, slip_days, notes) VALUES (?, ?, 'Spec room', 18, 23, NULL, 65, 4, 1, '')`,
    [roomId, studioId],
  );
  const devices = [];
  for (let index = 0; index < count; index++) {
    const deviceId = `dev-${studioId.slice(0, 8)}-${index}`;
    const secret = `secret-${studioId}-${index}`;
    const { insertId } = await dataSource.query<{ insertId: number }>(
      `INSERT INTO sensor (id, studio_id, room_id, name, device_id, secret_hash) VALUES (?, ?, ?, ?, ?, ?)`,
      [randomUUID(), studioId, roomId, `Sensor ${index}`, deviceId, hashDeviceSecret(secret)],
    );
    devices.push({ deviceId, secret, topic: readingTopic(studioId, deviceId), sensorNo: insertId });
  }
  return { studioId, roomId, devices };
}

/** A running intake on a free port with its feeds. */
export async function startTestIntake(database: TestDatabase, clock: Clock = systemClock, port?: number) {
  const committed = new Feed<readonly CommittedReading[]>();
  const cells = new Feed<CellsChanged>();
  const layout = new Feed<LayoutChanged>();
  const mqttPort = port ?? (await freePort());
  const intake = new Intake({
    dataSource: database.dataSource,
    database: database.access,
    mqtt: { host: '127.0.0.1', port: mqttPort, tls: null },
    clock,
    demo: null,
    committed,
    layout,
    log: pino({ level: 'silent' }),
  });
  await intake.start();
  return { intake, committed, cells, layout, port: mqttPort };
}

/** A loopback port nobody listens on. */
export function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const { port } = probe.address() as { port: number };
      probe.close(() => resolve(port));
    });
  });
}
