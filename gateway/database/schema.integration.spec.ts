import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openTestDatabase, type TestDatabase } from './test-database.js';

describe('database schema', () => {
  let database: TestDatabase;
  beforeAll(async () => {
    database = await openTestDatabase(new Date('2026-05-04T12:00:00Z'));
  });
  afterAll(() => database.close());

  it('has a table and a column for every entity field', async () => {
    const columns = await database.dataSource.query<{ key: string }[]>(
      'SELECT CONCAT(table_name, ".", column_name) AS `key` FROM information_schema.columns WHERE table_schema = DATABASE()',
    );
    const present = new Set(columns.map((column) => column.key));
    const wanted = database.dataSource.entityMetadatas.flatMap((entity) =>
      entity.columns.map((column) => `${entity.tableName}.${column.databaseName}`),
    );
    expect(wanted.length).toBeGreaterThan(100);
    expect(wanted.filter((key) => !present.has(key))).toEqual([]);
  });

  it('keeps readings by month around the given day', async () => {
    const rows = await database.dataSource.query<{ name: string }[]>(
      `SELECT partition_name AS name FROM information_schema.partitions WHERE table_schema = DATABASE() AND table_name = 'reading'`,
    );
    const names = rows.map((row) => row.name);
    expect(names).toContain('p202605');
    expect(names).toContain('p202405');
    expect(names).toContain('p202805');
  });

  it('lets the run-time account change rows but no tables', async () => {
    await expect(database.dataSource.query('CREATE TABLE intruder (id INT)')).rejects.toThrow(/denied/);
    await database.dataSource.query(`INSERT INTO fact (name, value) VALUES ('spec', '1')`);
    const [row] = await database.dataSource.query<{ value: string }[]>(
      `SELECT value FROM fact WHERE name = 'spec'`,
    );
    expect(row?.value).toBe('1');
  });
});
