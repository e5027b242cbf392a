import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import { connectAsync, type MqttClient } from 'mqtt';
import { pino } from 'pino';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { CellsChanged, CommittedReading } from '../announcements.js';
import { openTestDatabase, type TestDatabase } from '../database/test-database.js';
import { RollupWorker } from '../history/rollup-worker.js';
import { enrolTestFloor, startTestIntake, type TestFloor } from './test-floor.js';

const run = promisify(execFile);
const NOW = Date.parse('2026-05-04T12:00:00Z');
const clock = { now: () => NOW, speed: () => 1 };

describe('intake', () => {
  let database: TestDatabase;
  let floor: TestFloor;
  let started: Awaited<ReturnType<typeof startTestIntake>>;
  let announced: CommittedReading[];
  const clients: MqttClient[] = [];

  beforeAll(async () => {
    database = await openTestDatabase(new Date(NOW));
  });
  afterAll(() => database.close());
  beforeEach(async () => {
    floor = await enrolTestFloor(database.dataSource, 2);
    started = await startTestIntake(database, clock);
    announced = [];
    started.committed.listen((readings) => announced.push(...readings));
  });
  afterEach(async () => {
    await Promise.all(clients.splice(0).map((client) => client.endAsync(true)));
    await started.intake.stop();
  });

  const connect = async (device: TestFloor['devices'][number], options = {}) => {
    const client = await connectAsync(`mqtt://127.0.0.1:${started.port}`, {
      clientId: device.deviceId,
      username: device.deviceId,
      password: device.secret,
      reconnectPeriod: 0,
      ...options,
    });
    clients.push(client);
    return client;
  };
  const publish = (client: MqttClient, topic: string, payload: unknown) =>
    client.publishAsync(topic, typeof payload === 'string' ? payload : JSON.stringify(payload), { qos: 1 });
  const rows = (sensorNo: number) =>
    database.dataSource.query<{ at: Date; t_micro: number; rh_micro: number | null; flags: number }[]>(
      'SELECT at, t_micro, rh_micro, flags FROM reading WHERE sensor_no = ? ORDER BY at',
      [sensorNo],
    );
  const reasons = async () =>
    (
      await database.dataSource.query<{ reason: string }[]>(
        'SELECT reason FROM quarantine WHERE studio_id = ? ORDER BY id',
        [floor.studioId],
      )
    ).map(({ reason }) => reason);
  const first = () => floor.devices[0]!;

  it('has a reading in the database before it acknowledges it, and tells of it once', async () => {
    const client = await connect(first());
    await publish(client, first().topic, { t: 21.4, rh: 48.2, at: '2026-05-04T11:59:00Z', bat: 77 });
    expect(await rows(first().sensorNo)).toEqual([
      { at: new Date('2026-05-04T11:59:00Z'), t_micro: 21_400_000, rh_micro: 48_200_000, flags: 0 },
    ]);
    expect(announced).toMatchObject([
      { roomId: floor.roomId, celsius: 21.4, humidity: 48.2, battery: 77, future: false },
    ]);
    await publish(client, first().topic, { t: 21.4, rh: 48.2, at: '2026-05-04T11:59:00Z' });
    expect(announced).toHaveLength(1);
    expect(await rows(first().sensorNo)).toHaveLength(1);
  });

  it('keeps the first value of a time and counts the conflict', async () => {
    const client = await connect(first());
    for (const t of [20, 25, 20]) await publish(client, first().topic, { t, at: '2026-05-04T11:58:00Z' });
    expect(await rows(first().sensorNo)).toMatchObject([{ t_micro: 20_000_000 }]);
    await started.intake.stop();
    const [sensor] = await database.dataSource.query<{ conflicts: string; last_heard_at: Date }[]>(
      'SELECT conflicts, last_heard_at FROM sensor WHERE no = ?',
      [first().sensorNo],
    );
    expect(Number(sensor?.conflicts)).toBe(1);
    expect(sensor?.last_heard_at).toEqual(new Date('2026-05-04T11:58:00Z'));
    started = await startTestIntake(database, clock);
  });

  it('flags a reading from ahead of time, and lets the real one take its place', async () => {
    const client = await connect(first());
    await publish(client, first().topic, { t: 30, at: '2026-05-05T12:00:00Z' });
    expect(announced).toMatchObject([{ future: true }]);
    expect(await rows(first().sensorNo)).toMatchObject([{ flags: 1 }]);
    await started.intake.stop();
    started = await startTestIntake(database, { now: () => NOW + 86_400_000, speed: () => 1 });
    const later = await connect(first());
    await publish(later, first().topic, { t: 19, at: '2026-05-05T12:00:00Z' });
    expect(await rows(first().sensorNo)).toMatchObject([{ flags: 0, t_micro: 19_000_000 }]);
  });

  it('puts what it cannot take into quarantine with the reason, and acknowledges it', async () => {
    const client = await connect(first());
    await publish(client, first().topic, 'not json');
    await publish(client, first().topic, [{ t: 20, at: '2026-05-04T11:50:00Z' }, { t: 200 }]);
    await publish(client, first().topic, { t: 20, at: '2026-04-01T00:00:00Z' });
    expect(await reasons()).toEqual([
      expect.stringMatching(/not valid JSON/),
      expect.stringMatching(/200 °C/),
      expect.stringMatching(/older than the 7 days/),
    ]);
    expect(await rows(first().sensorNo)).toHaveLength(1);
  });

  it('takes an old recording once the sensor says so', async () => {
    await database.dataSource.query('UPDATE sensor SET accept_late_days = 5000 WHERE no = ?', [
      first().sensorNo,
    ]);
    started.layout.announce({ studioId: floor.studioId, roomId: floor.roomId });
    await started.intake.reload();
    const client = await connect(first());
    await publish(client, first().topic, { t: 18.19, at: '2015-02-02T14:19:00Z' });
    expect(await rows(first().sensorNo)).toHaveLength(1);
  });

  it('knows readings of a device without a clock by boot and sequence', async () => {
    const client = await connect(first());
    await publish(client, first().topic, { t: 20, boot: 1, seq: 1 });
    await publish(client, first().topic, { t: 20, boot: 1, seq: 1 });
    expect(announced).toHaveLength(1);
    expect(await rows(first().sensorNo)).toMatchObject([{ at: new Date(NOW) }]);
  });

  it('refuses strangers, foreign topics, retained messages, subscriptions and wills', async () => {
    await expect(connect(first(), { password: 'wrong' })).rejects.toThrow(/refused|authorized|user/i);
    await expect(connect(first(), { clientId: floor.devices[1]!.deviceId })).rejects.toThrow();
    await expect(
      connect(first(), {
        will: { topic: floor.devices[1]!.topic, payload: Buffer.from('{}'), qos: 0, retain: false },
      }),
    ).rejects.toThrow();
    for (const [topic, retain] of [
      [floor.devices[1]!.topic, false],
      ['$SYS/anything', false],
      [first().topic, true],
    ] as const) {
      const client = await connect(first());
      const closed = new Promise<void>((resolve) => client.once('close', () => resolve()));
      client.publishAsync(topic, '{"t":20}', { qos: 1, retain }).catch(() => undefined);
      await closed;
    }
    const client = await connect(first());
    const [granted] = await client.subscribeAsync('#').catch(() => [{ qos: 128 }]);
    expect(granted?.qos).toBe(128);
    expect(await rows(first().sensorNo)).toEqual([]);
    expect(await rows(floor.devices[1]!.sensorNo)).toEqual([]);
  });

  it('cuts a device off that announces a packet of more than 65 kB', async () => {
    const client = await connect(first());
    const closed = new Promise<void>((resolve) => client.once('close', () => resolve()));
    client.publishAsync(first().topic, 'x'.repeat(80_000), { qos: 1 }).catch(() => undefined);
    await closed;
    expect(await rows(first().sensorNo)).toEqual([]);
  });

  it('works with Debian’s mosquitto_pub, plain and SenML', async () => {
    const args = (payload: string, secret = first().secret) => [
      ...['-h', '127.0.0.1', '-p', String(started.port), '-u', first().deviceId, '-P', secret, '-q', '1'],
      ...['-t', first().topic, '-m', payload],
    ];
    await run('mosquitto_pub', args('{"t": 21.4, "rh": 48.2, "at": "2026-05-04T11:40:00Z"}'));
    await run('mosquitto_pub', [
      ...args('[{"bn":"urn:dev:x/","bt":1777894860,"n":"t","u":"Cel","v":22.5},{"n":"rh","u":"%RH","v":40}]'),
      '-i',
      first().deviceId,
    ]);
    expect(await rows(first().sensorNo)).toEqual([
      { at: new Date('2026-05-04T11:40:00Z'), t_micro: 21_400_000, rh_micro: 48_200_000, flags: 0 },
      { at: new Date(1_777_894_860_000), t_micro: 22_500_000, rh_micro: 40_000_000, flags: 0 },
    ]);
    await expect(run('mosquitto_pub', args('{"t": 21}', 'wrong'))).rejects.toThrow(
      /not authori[sz]ed|refused/i,
    );
  });

  it('rolls up out-of-order and threefold readings to exactly what a recomputation gives', async () => {
    const client = await connect(first());
    const sent = Array.from({ length: 300 }, (_, index) => ({
      t: 18 + ((index * 7919) % 1000) / 100,
      rh: index % 3 === 0 ? null : 40 + (index % 20),
      at: NOW - index * 47_000,
    }));
    const shuffled = [...sent, ...sent, ...sent].sort((a, b) => ((a.at * 31) % 997) - ((b.at * 31) % 997));
    await Promise.all(
      shuffled.map(({ t, rh, at }) =>
        publish(client, first().topic, { t, at: at / 1000, ...(rh === null ? {} : { rh }) }),
      ),
    );
    const changes: CellsChanged[] = [];
    started.cells.listen((change) => {
      if (change.roomId === floor.roomId) changes.push(change);
    });
    const worker = new RollupWorker({
      dataSource: database.dataSource,
      committed: started.committed,
      cells: started.cells,
      log: pino({ level: 'silent' }),
    });
    await worker.drain();
    expect(
      await database.dataSource.query('SELECT * FROM dirty_mark WHERE sensor_no = ?', [first().sensorNo]),
    ).toEqual([]);
    expect(changes.length).toBeGreaterThan(0);
    for (const [level, lengthMs] of [
      [5, 300_000],
      [60, 3_600_000],
    ] as const) {
      const expected = new Map<number, { n: number; sum: number; min: number; max: number; rh: number }>();
      for (const { t, rh, at } of sent) {
        const bucket = Math.floor(at / lengthMs) * lengthMs;
        const micro = Math.round(t * 1e6);
        const so = expected.get(bucket) ?? { n: 0, sum: 0, min: Infinity, max: -Infinity, rh: 0 };
        expected.set(bucket, {
          n: so.n + 1,
          sum: so.sum + micro,
          min: Math.min(so.min, micro),
          max: Math.max(so.max, micro),
          rh: so.rh + (rh === null ? 0 : rh * 1e6),
        });
      }
      const found = await database.dataSource.query<
        { bucket: Date; n: number; t_sum: string; t_min: number; t_max: number; rh_sum: string }[]
      >('SELECT bucket, n, t_sum, t_min, t_max, rh_sum FROM rollup WHERE sensor_no = ? AND level = ?', [
        first().sensorNo,
        level,
      ]);
      expect(found).toHaveLength(expected.size);
      for (const row of found) {
        expect({
          n: row.n,
          sum: Number(row.t_sum),
          min: row.t_min,
          max: row.t_max,
          rh: Number(row.rh_sum),
        }).toEqual(expected.get(row.bucket.getTime()));
      }
    }
  });

  it('makes the local day of a clock change from its 25 hours', async () => {
    await database.dataSource.query('UPDATE sensor SET accept_late_days = 5000 WHERE no = ?', [
      first().sensorNo,
    ]);
    await started.intake.reload();
    const client = await connect(first());
    const start = Date.parse('2025-10-25T23:00:00Z');
    for (let hour = 0; hour < 26; hour++) {
      await publish(client, first().topic, { t: 10 + hour, at: start / 1000 + hour * 3600 });
    }
    const worker = new RollupWorker({
      dataSource: database.dataSource,
      committed: started.committed,
      cells: started.cells,
      log: pino({ level: 'silent' }),
    });
    await worker.drain();
    const days = await database.dataSource.query<{ bucket: Date; n: number; t_max: number }[]>(
      'SELECT bucket, n, t_max FROM rollup WHERE sensor_no = ? AND level = 1440 ORDER BY bucket',
      [first().sensorNo],
    );
    expect(days).toEqual([
      { bucket: new Date(start), n: 25, t_max: 34_000_000 },
      { bucket: new Date('2025-10-27T00:00:00Z'), n: 1, t_max: 35_000_000 },
    ]);
  });
});
