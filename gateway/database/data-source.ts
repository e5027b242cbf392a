import 'reflect-metadata';
import { DataSource } from 'typeorm';
import { ALL_ENTITIES } from './entities/all-entities.js';
import { ALL_MIGRATIONS } from './migrations/all-migrations.js';

export interface DatabaseAccess {
  readonly host: string;
  readonly port: number;
  readonly name: string;
  readonly user: string;
  readonly password: string;
}

/** A data source that is not yet connected. Times are UTC on both sides; the schema only ever changes by migration. */
export function createDataSource(access: DatabaseAccess, poolSize = 12): DataSource {
  return new DataSource({
    type: 'mariadb',
    host: access.host,
    port: access.port,
    username: access.user,
    password: access.password,
    database: access.name,
    timezone: 'Z',
    charset: 'utf8mb4_unicode_ci',
    synchronize: false,
    migrationsTransactionMode: 'none',
    entities: ALL_ENTITIES,
    migrations: ALL_MIGRATIONS,
    poolSize,
    extra: { connectTimeout: 5000 },
  });
}
