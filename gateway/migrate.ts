import { createDataSource } from './database/data-source.js';
import { migrateDatabase } from './database/migrate-database.js';

/** Command: brings the database up to date with the account that may change tables (STILLROOM_DB_OWNER_USER). */
const environment = process.env;
const dataSource = createDataSource(
  {
    host: environment['STILLROOM_DB_HOST'] ?? '127.0.0.1',
    port: Number(environment['STILLROOM_DB_PORT'] ?? 33_061),
    name: environment['STILLROOM_DB_NAME'] ?? 'stillroom',
    user: environment['STILLROOM_DB_OWNER_USER'] ?? 'stillroom_owner',
    password: environment['STILLROOM_DB_OWNER_PASSWORD'] ?? '',
  },
  2,
);
try {
  await dataSource.initialize();
  await migrateDatabase(dataSource, new Date());
} finally {
  if (dataSource.isInitialized) await dataSource.destroy();
}
