import { fork, type ChildProcess } from 'node:child_process';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { connect, type MqttClient } from 'mqtt';
import { pino } from 'pino';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { DataSource } from 'typeorm';
import { DatabaseServer } from '../../config/set-up/database-server.mjs';
import { createDataSource, type DatabaseAccess } from '../database/data-source.js';
import { migrateDatabase } from '../database/migrate-database.js';
import { Feed } from '../feed.js';
import { RollupWorker } from '../history/rollup-worker.js';
import { enrolTestFloor, freePort, type TestFloor } from './test-floor.js';
import { TcpProxy } from './test-tcp-proxy.js';

const DEVICES = 20;
const program = new URL('./test-intake-process.ts', import.meta.url).pathname;
const pause = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms));

/** Real processes are killed here: a MariaDB of this spec's own and the intake as a program. */
describe('intake under faults', () => {
  let server: DatabaseServer;
  let access: DatabaseAccess;
  let dataSource: DataSource;
  let databaseProxy: TcpProxy;
  let floor: TestFloor;
  let mqttPort: number;
  let child: ChildProcess | null = null;
  let clients: MqttClient[] = [];
  let restarting = true;

  beforeAll(async () => {
    server = new DatabaseServer({
      dataDir: mkdtempSync(join(tmpdir(), 'sr-faults-')),
      port: await freePort(),
    });
    server.install();
    await server.start();
    const names = {
      name: 'spec',
      ownerUser: 'owner',
      ownerPassword: 'owner',
      appUser: 'app',
      appPassword: 'app',
    };
    await server.createDatabase(names);
    const port: number = server.options.port;
    const owner = createDataSource(
      { host: '127.0.0.1', port, name: 'spec', user: 'owner', password: 'owner' },
      1,
    );
    await owner.initialize();
    await migrateDatabase(owner, new Date());
    await owner.destroy();
    databaseProxy = new TcpProxy(() => port);
    access = {
      host: '127.0.0.1',
      port: await databaseProxy.start(),
      name: 'spec',
      user: 'app',
      password: 'app',
    };
    dataSource = createDataSource({ ...access, port }, 2);
    await dataSource.initialize();
  });
  afterAll(async () => {
    await dataSource.destroy().catch(() => undefined);
    await databaseProxy.stop();
    await server.stop();
    server.remove();
  });
  beforeEach(async () => {
    floor = await enrolTestFloor(dataSource, DEVICES);
    mqttPort = await freePort();
    restarting = true;
    await startChild();
  });
  afterEach(async () => {
    restarting = false;
    databaseProxy.cutAfter = () => false;
    await Promise.all(clients.map((client) => client.endAsync(true)));
    clients = [];
    const gone = new Promise<void>((resolve) => child?.once('exit', () => resolve()));
    child?.kill('SIGKILL');
    await gone;
  });

  /** Starts the intake and, like the supervisor, starts it again when it ends. */
  function startChild(): Promise<void> {
    return new Promise((resolve) => {
      const started = fork(program, [], {
        execArgv: ['--import', 'tsx'],
        env: {
          ...process.env,
          TSX_TSCONFIG_PATH: new URL('../tsconfig.json', import.meta.url).pathname,
          SPEC_DB_PORT: String(access.port),
          SPEC_DB_NAME: access.name,
          SPEC_DB_USER: access.user,
          SPEC_DB_PASSWORD: access.password,
          SPEC_MQTT_PORT: String(mqttPort),
        },
      });
      child = started;
      started.once('message', () => resolve());
      started.once('exit', () => {
        if (restarting) void startChild();
      });
    });
  }

  async function restartDatabase(): Promise<void> {
    server.kill();
    await pause(700);
    await server.start();
  }

  /**
   * Publishes readings at QoS 1 from all devices while `disturb` does its worst, until every one is acknowledged; then nothing
   * may be lost or doubled, neither in the readings nor in the rollups.
   */
  async function publishWhile(total: number, disturb: () => Promise<void>, port = mqttPort): Promise<void> {
    clients = floor.devices.map(({ deviceId, secret }) =>
      connect(`mqtt://127.0.0.1:${port}`, {
        clientId: deviceId,
        username: deviceId,
        password: secret,
        reconnectPeriod: 150,
        connectTimeout: 4000,
        clean: false,
      }),
    );
    for (const client of clients) client.on('error', () => undefined);
    const start = Date.now() - 3_600_000;
    const acknowledged: { sensorNo: number; at: number }[] = [];
    const perDevice = total / DEVICES;
    const sending = Promise.all(
      clients.map(async (client, index) => {
        const device = floor.devices[index]!;
        for (let sent = 0; sent < perDevice; sent += 5) {
          await Promise.all(
            Array.from({ length: 5 }, async (_, offset) => {
              const at = start + (sent + offset) * 1000;
              await client.publishAsync(
                device.topic,
                JSON.stringify({ t: 20 + (sent % 50) / 10, at: at / 1000 }),
                { qos: 1 },
              );
              acknowledged.push({ sensorNo: device.sensorNo, at });
            }),
          );
        }
      }),
    );
    await Promise.all([sending, disturb()]);
    expect(acknowledged).toHaveLength(total);
    const rows = await dataSource.query<{ sensor_no: number; at: Date }[]>(
      'SELECT sensor_no, at FROM reading WHERE sensor_no IN (?)',
      [floor.devices.map(({ sensorNo }) => sensorNo)],
    );
    const stored = new Set(rows.map((row) => `${row.sensor_no}/${row.at.getTime()}`));
    expect(acknowledged.filter(({ sensorNo, at }) => !stored.has(`${sensorNo}/${at}`))).toEqual([]);
    expect(rows).toHaveLength(total);
    const worker = new RollupWorker({
      dataSource,
      committed: new Feed(),
      cells: new Feed(),
      log: pino({ level: 'silent' }),
    });
    await worker.drain();
    const [counted] = await dataSource.query<{ n: string }[]>(
      'SELECT SUM(n) AS n FROM rollup WHERE level = 5 AND sensor_no IN (?)',
      [floor.devices.map(({ sensorNo }) => sensorNo)],
    );
    expect(Number(counted?.n)).toBe(total);
  }

  it('loses and doubles nothing when the gateway is killed three times', async () => {
    await publishWhile(6000, async () => {
      for (const ms of [130, 900, 1400]) {
        await pause(ms);
        child?.kill('SIGKILL');
      }
    });
  });

  it('loses and doubles nothing when MariaDB is killed', async () => {
    await publishWhile(6000, async () => {
      await pause(200);
      await restartDatabase();
    });
  });

  it('loses and doubles nothing when both are killed at once', async () => {
    await publishWhile(6000, async () => {
      await pause(250);
      child?.kill('SIGKILL');
      await restartDatabase();
    });
  });

  it('gives a stopped MariaDB up and sends again what is in doubt', async () => {
    await publishWhile(4000, async () => {
      await pause(150);
      process.kill(server.pid!, 'SIGSTOP');
      await pause(6500);
      process.kill(server.pid!, 'SIGCONT');
    });
  });

  it('replays cleanly when the connection is cut after COMMIT was sent', async () => {
    let commits = 0;
    databaseProxy.cuts = 0;
    databaseProxy.cutAfter = (chunk) => chunk.includes('COMMIT') && ++commits % 4 === 0;
    await publishWhile(5000, async () => undefined);
    expect(databaseProxy.cuts).toBeGreaterThanOrEqual(20);
  });

  it('stores once what devices send again because an acknowledgement was lost', async () => {
    const proxy = new TcpProxy(() => mqttPort);
    const port = await proxy.start();
    let on = true;
    const cutting = (async () => {
      while (on) {
        await pause(120);
        proxy.cutAll();
      }
    })();
    await publishWhile(
      5000,
      async () => {
        await pause(1500);
        on = false;
        await cutting;
      },
      port,
    );
    expect(proxy.cuts).toBeGreaterThanOrEqual(100);
    await proxy.stop();
  });
});
