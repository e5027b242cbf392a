import type { DataSource } from 'typeorm';
import { StartFault } from '../start-faults.js';
import { ALL_MIGRATIONS } from './migrations/all-migrations.js';

/**
 * Refuses a database that may forget what was promised, or whose tables are not those of this version.
 * @throws StartFault with what to do
 */
export async function checkDatabase(dataSource: DataSource): Promise<void> {
  const [server] = await dataSource.query<{ flush: string | number }[]>(
    'SELECT @@global.innodb_flush_log_at_trx_commit AS flush',
  );
  if (Number(server?.flush) !== 1) {
    throw new StartFault(
      'MariaDB runs with innodb_flush_log_at_trx_commit other than 1 and could lose readings that were acknowledged. Set it to 1.',
    );
  }
  const missing = await missingMigrations(dataSource);
  if (missing.length > 0) {
    throw new StartFault(
      `The tables of the database are not those of this version (missing: ${missing.join(', ')}). Run gateway/migrate first.`,
    );
  }
}

async function missingMigrations(dataSource: DataSource): Promise<string[]> {
  const wanted = ALL_MIGRATIONS.map((migration) => new migration().name);
  try {
    const rows = await dataSource.query<{ name: string }[]>('SELECT name FROM migrations');
    const done = new Set(rows.map(({ name }) => name));
    return wanted.filter((name) => !done.has(name));
  } catch (error) {
    if ((error as { code?: string }).code === 'ER_NO_SUCH_TABLE') return wanted;
    throw error;
  }
}

const FIRST_WAIT_MS = 100;
const LONGEST_WAIT_MS = 2000;
const NOT_UP_YET = new Set([
  'ECONNREFUSED',
  'ENOENT',
  'ETIMEDOUT',
  'ECONNRESET',
  'PROTOCOL_CONNECTION_LOST',
  'ER_SERVER_SHUTDOWN',
]);

/**
 * Connects, waiting for a database that is just coming up again.
 * @param patienceMs how long
 * @throws StartFault when it never came; other errors of the database as they are
 */
export async function connectPatiently(
  dataSource: DataSource,
  patienceMs: number,
  waiting: () => void,
): Promise<void> {
  const startedAt = performance.now();
  for (let wait = FIRST_WAIT_MS; ; wait = Math.min(2 * wait, LONGEST_WAIT_MS)) {
    try {
      await dataSource.initialize();
      return;
    } catch (error) {
      const { code = '' } = error as { code?: string };
      if (!NOT_UP_YET.has(code)) throw error;
      if (performance.now() - startedAt + wait > patienceMs) {
        throw new StartFault(
          `The database cannot be reached (${code}). Start it, or check STILLROOM_DB_HOST and STILLROOM_DB_PORT.`,
        );
      }
      waiting();
      await new Promise((resolve) => setTimeout(resolve, wait));
    }
  }
}
