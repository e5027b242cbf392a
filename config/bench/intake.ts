import { fork } from 'node:child_process';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { connectAsync } from 'mqtt';
import { createDataSource } from '../../gateway/database/data-source.js';
import { migrateDatabase } from '../../gateway/database/migrate-database.js';
import { enrolTestFloor, freePort } from '../../gateway/intake/test-floor.js';
import { DatabaseServer } from '../set-up/database-server.mjs';

/** Acknowledgements under load: a hundred devices at QoS 1 against the real intake, broker and MariaDB. */
const DEVICES = 100;
const TICK_MS = 20;

const server = new DatabaseServer({
  dataDir: mkdtempSync(join(tmpdir(), 'sr-bench-')),
  port: await freePort(),
});
server.install();
await server.start();
try {
  await server.createDatabase({
    ...{ name: 'bench', ownerUser: 'owner', ownerPassword: 'owner', appUser: 'app', appPassword: 'app' },
  });
  const { port } = server.options;
  const owner = createDataSource(
    { host: '127.0.0.1', port, name: 'bench', user: 'owner', password: 'owner' },
    2,
  );
  await owner.initialize();
  await migrateDatabase(owner, new Date());
  const floor = await enrolTestFloor(owner, DEVICES);
  const mqttPort = await freePort();
  const child = fork(new URL('../../gateway/intake/test-intake-process.ts', import.meta.url).pathname, [], {
    execArgv: ['--import', 'tsx'],
    env: {
      ...process.env,
      ...{ SPEC_DB_PORT: String(port), SPEC_DB_NAME: 'bench', SPEC_DB_USER: 'app', SPEC_DB_PASSWORD: 'app' },
      SPEC_MQTT_PORT: String(mqttPort),
    },
  });
  await new Promise<void>((resolve) => child.once('message', () => resolve()));
  const clients = await Promise.all(
    floor.devices.map(({ deviceId, secret }) =>
      connectAsync(`mqtt://127.0.0.1:${mqttPort}`, {
        clientId: deviceId,
        username: deviceId,
        password: secret,
      }),
    ),
  );
  let sent = 0;
  for (const [rate, seconds] of [
    [1000, 20],
    [5000, 10],
  ] as const) {
    const waits: number[] = [];
    const pending: Promise<void>[] = [];
    const start = performance.now();
    for (let tick = 0; tick < (seconds * 1000) / TICK_MS; tick++) {
      for (let index = 0; index < (rate * TICK_MS) / 1000; index++) {
        const device = sent % DEVICES;
        // A time of its own for every reading, a millisecond apart.
        const at = (Date.now() - 3_600_000 + Math.floor(sent / DEVICES)) / 1000;
        sent++;
        const began = performance.now();
        const payload = JSON.stringify({ t: 20 + (sent % 50) / 10, rh: 45, at });
        pending.push(
          (
            clients[device]?.publishAsync(floor.devices[device]?.topic ?? '', payload, { qos: 1 }) ??
            Promise.resolve(undefined)
          ).then(() => void waits.push(performance.now() - began)),
        );
      }
      const ahead = start + (tick + 1) * TICK_MS - performance.now();
      if (ahead > 0) await new Promise((resolve) => setTimeout(resolve, ahead));
    }
    await Promise.all(pending);
    const took = (performance.now() - start) / 1000;
    waits.sort((a, b) => a - b);
    const part = (share: number) => (waits[Math.floor(waits.length * share)] ?? 0).toFixed(1);
    const health = await new Promise<{ rss: number }>((resolve) => {
      child.once('message', (message) => resolve(message as { rss: number }));
      child.send('health');
    });
    console.log(
      `  ${rate}/s for ${seconds} s: acknowledged p50 ${part(0.5)} ms, p99 ${part(0.99)} ms; all after ${took.toFixed(1)} s; gateway ${(health.rss / 1e6).toFixed(0)} MB`,
    );
  }
  const [row] = await owner.query<{ n: string }[]>('SELECT COUNT(*) AS n FROM reading');
  console.log(`  sent ${sent}, stored ${row?.n}`);
  await Promise.all(clients.map((client) => client.endAsync(true)));
  child.kill();
  await owner.destroy();
} finally {
  await server.stop();
  server.remove();
}
