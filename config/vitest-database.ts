import { mkdtempSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
import { DatabaseServer } from './set-up/database-server.mjs';

declare module 'vitest' {
  export interface ProvidedContext {
    /** The test run's own MariaDB; specs create a database each (gateway/database/test-database.ts). */
    database: { socket: string; port: number; administrator: string; pid: number; dataDir: string };
  }
}

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
  project.provide('database', {
    socket: server.socket,
    port: server.options.port,
    administrator: process.env['USER'] ?? 'root',
    pid: server.pid ?? 0,
    dataDir: server.options.dataDir,
  });
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
