import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openTestDatabase, type TestDatabase } from '../../database/test-database.js';
import type { Actor } from '../../http/actor.js';
import { hashDeviceSecret } from '../../intake/device-registry.js';
import { enrolTestFloor, type TestFloor } from '../../intake/test-floor.js';
import { Sensors } from './sensors.js';
import { SensorsRepository } from './sensors-repository.js';

const NOW = Date.parse('2026-05-04T12:00:00Z');
const actor: Actor = {
  personId: '6a0e7cc2-5c0b-4b7d-9d1e-3f54f6c9a001',
  name: 'Spec',
  role: 'lead',
  address: '',
};
const FIELDS = {
  name: 'By the door',
  trusted: true,
  offsetCelsius: 0.3,
  offsetHumidity: -1,
  intervalSeconds: 120,
  acceptLateDays: 7,
};

describe('sensors', () => {
  let database: TestDatabase;
  let floor: TestFloor;
  let other: TestFloor;
  let sensors: Sensors;
  const changed: string[] = [];

  beforeAll(async () => {
    database = await openTestDatabase(new Date(NOW));
    floor = await enrolTestFloor(database.dataSource, 1);
    other = await enrolTestFloor(database.dataSource, 1);
    sensors = new Sensors({
      repository: new SensorsRepository(database.dataSource),
      rooms: { get: async () => ({ name: 'Loft' }) },
      clock: { now: () => NOW, speed: () => 1 },
      connectedDevices: () => new Set([floor.devices[0]!.deviceId]),
      changed: (_studioId, roomId) => changed.push(roomId),
    });
  });
  afterAll(() => database.close());

  it('shows the secret once and keeps only its hash', async () => {
    const { sensor, secret } = await sensors.enrol(
      floor.studioId,
      { ...FIELDS, roomId: floor.roomId },
      actor,
    );
    expect(secret).toMatch(/^[\w-]{22}$/);
    expect(sensor).toMatchObject({ ...FIELDS, health: { state: 'never-heard', connected: false } });
    const [row] = await database.dataSource.query<{ secret_hash: string }[]>(
      'SELECT secret_hash FROM sensor WHERE id = ?',
      [sensor.id],
    );
    expect(row?.secret_hash).toBe(hashDeviceSecret(secret));
    expect(changed).toContain(floor.roomId);
    const audit = await database.dataSource.query<{ became: string }[]>(
      'SELECT became FROM audit WHERE thing_id = ?',
      [sensor.id],
    );
    expect(audit).toHaveLength(1);
    expect(JSON.stringify(audit)).not.toContain(secret);
  });

  it('tells health from what was measured', async () => {
    const { sensorNo } = floor.devices[0]!;
    const at = (minutes: number) => new Date(NOW - minutes * 60_000);
    await database.dataSource.query(
      'INSERT INTO reading (sensor_no, at, received_at, t_micro, rh_micro, flags) VALUES ?',
      [
        [
          [sensorNo, at(5), at(5), 20_500_000, 48_000_000, 0],
          [sensorNo, at(-60 * 24), at(5), 44_000_000, 48_000_000, 1],
        ],
      ],
    );
    const [view] = (await sensors.list(floor.studioId)).filter(
      ({ deviceId }) => deviceId === floor.devices[0]!.deviceId,
    );
    expect(view?.health).toMatchObject({
      state: 'fine',
      lastCelsius: 20.5,
      lastHumidity: 48,
      connected: true,
    });
    await database.dataSource.query('INSERT INTO rollup VALUES ?', [
      Array.from({ length: 72 }, (_, index) => [
        ...[sensorNo, 5, at(10 + index * 5), 1, 20_500_000, 20_500_000, 20_500_000],
        ...[1, 48_000_000, 48_000_000, 48_000_000],
      ]),
    ]);
    const [stuck] = (await sensors.list(floor.studioId)).filter(
      ({ deviceId }) => deviceId === floor.devices[0]!.deviceId,
    );
    expect(stuck?.health.state).toBe('stuck');
  });

  it('refuses an old version and a sensor of another studio; a retired one stays retired', async () => {
    const { sensor } = await sensors.enrol(floor.studioId, { ...FIELDS, roomId: floor.roomId }, actor);
    const changedSensor = await sensors.change(
      floor.studioId,
      sensor.id,
      { ...FIELDS, name: 'High', version: 1 },
      actor,
    );
    expect(changedSensor).toMatchObject({ name: 'High', version: 2 });
    await expect(
      sensors.change(floor.studioId, sensor.id, { ...FIELDS, version: 1 }, actor),
    ).rejects.toMatchObject({
      code: 'changed-meanwhile',
    });
    await expect(
      sensors.change(other.studioId, sensor.id, { ...FIELDS, version: 2 }, actor),
    ).rejects.toMatchObject({
      code: 'not-found',
    });
    await sensors.retire(floor.studioId, sensor.id, actor);
    await expect(sensors.newSecret(floor.studioId, sensor.id, actor)).rejects.toMatchObject({
      code: 'conflict',
    });
    expect((await sensors.list(floor.studioId)).at(-1)).toMatchObject({
      retired: true,
      health: { state: 'retired' },
    });
  });
});
