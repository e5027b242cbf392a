import { randomBytes } from 'node:crypto';
import { userInfo } from 'node:os';
import { createConnection } from 'mysql2/promise';
import type { DataSource } from 'typeorm';
import { inject } from 'vitest';
import { createDataSource, type DatabaseAccess } from './data-source.js';
import { migrateDatabase } from './migrate-database.js';

/** Where the test run's own MariaDB listens (config/vitest-database.ts starts it). */
export interface DatabaseOfTheRun {
  readonly socket: string;
  readonly port: number;
}

declare module 'vitest' {
  export interface ProvidedContext {
    database: DatabaseOfTheRun;
  }
}

/** A freshly migrated database of its own on the test run's MariaDB, for one integration spec. */
export interface TestDatabase {
  /** Connected with the run-time account, which may not change tables. */
  readonly dataSource: DataSource;
  readonly access: DatabaseAccess;
  /** Disconnects and drops the database. */
  close(): Promise<void>;
}

/** Creates, migrates and opens a database; `now` decides which months get a partition. */
export async function openTestDatabase(now = new Date()): Promise<TestDatabase> {
  const server = inject('database');
  const name = `spec_${randomBytes(6).toString('hex')}`;
  const user = `u_${randomBytes(6).toString('hex')}`;
  const administrator = await createConnection({
    socketPath: server.socket,
    user: userInfo().username,
    multipleStatements: true,
  });
  await administrator.query(
    `CREATE DATABASE ${name};
     CREATE USER '${user}_o'@'127.0.0.1' IDENTIFIED BY 'owner'; GRANT ALL ON ${name}.* TO '${user}_o'@'127.0.0.1';
     CREATE USER '${user}'@'127.0.0.1' IDENTIFIED BY 'app'; GRANT SELECT, INSERT, UPDATE, DELETE ON ${name}.* TO '${user}'@'127.0.0.1'`,
  );
  const address = { host: '127.0.0.1', port: server.port, name };
  const owner = createDataSource({ ...address, user: `${user}_o`, password: 'owner' }, 2);
  await owner.initialize();
  await migrateDatabase(owner, now);
  await owner.destroy();
  const access = { ...address, user, password: 'app' };
  const dataSource = createDataSource(access);
  await dataSource.initialize();
  return {
    dataSource,
    access,
    async close() {
      if (dataSource.isInitialized) await dataSource.destroy();
      await administrator.query(
        `DROP DATABASE ${name}; DROP USER '${user}_o'@'127.0.0.1'; DROP USER '${user}'@'127.0.0.1'`,
      );
      await administrator.end();
    },
  };
}
