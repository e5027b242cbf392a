import { mkdtempSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
import type { DatabaseOfTheRun } from '../gateway/database/test-database.js';
import { DatabaseServer } from './set-up/database-server.mjs';

/** Starts a MariaDB of its own in a throw-away folder for the integration specs. */
export default async function setup(project: TestProject) {
  const server = new DatabaseServer({
    dataDir: mkdtempSync(join(tmpdir(), 'stillroom-test-')),
    port: await freePort(),
  });
  server.install();
  await server.start();
  const kill = () => {
    server.kill();
    server.remove();
  };
  process.once('exit', kill);
  const database: DatabaseOfTheRun = { socket: server.socket, port: server.options.port };
  project.provide('database', database);
  return async () => {
    await server.stop();
    server.remove();
    process.off('exit', kill);
  };
}

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const { port } = probe.address() as { port: number };
      probe.close(() => resolve(port));
    });
  });
}
