import type { DataSource } from 'typeorm';
import { describe, expect, it } from 'vitest';
import { checkDatabase, connectPatiently } from './check-database.js';
import { ALL_MIGRATIONS } from './migrations/all-migrations.js';

const allDone = ALL_MIGRATIONS.map((migration) => ({ name: new migration().name }));

function database(flush: number, migrations: { name: string }[] | Error): DataSource {
  const query = async (sql: string) => {
    if (sql.includes('innodb_flush_log_at_trx_commit')) return [{ flush }];
    if (migrations instanceof Error) throw migrations;
    return migrations;
  };
  return { query } as unknown as DataSource;
}

describe('checkDatabase', () => {
  it('is content with a durable database of this version', async () => {
    await expect(checkDatabase(database(1, allDone))).resolves.toBeUndefined();
  });

  it.each([0, 2])('refuses a database that writes its log lazily (%i)', async (flush) => {
    await expect(checkDatabase(database(flush, allDone))).rejects.toThrow('Set it to 1.');
  });

  it('refuses tables of an earlier version, naming what is missing, and no tables at all', async () => {
    const last = allDone.at(-1)!.name;
    await expect(checkDatabase(database(1, allDone.slice(0, -1)))).rejects.toThrow(last);
    const none = Object.assign(new Error('no table'), { code: 'ER_NO_SUCH_TABLE' });
    await expect(checkDatabase(database(1, none))).rejects.toThrow('Run gateway/migrate first');
  });
});

describe('connectPatiently', () => {
  const refused = Object.assign(new Error('refused'), { code: 'ECONNREFUSED' });

  function comingUp(failures: number, error: Error = refused) {
    let tries = 0;
    const initialize = async () => {
      if (tries++ < failures) throw error;
    };
    return { dataSource: { initialize } as unknown as DataSource, tries: () => tries };
  }

  it('waits for a database that is coming up', async () => {
    const { dataSource, tries } = comingUp(2);
    let waits = 0;
    await connectPatiently(dataSource, 60_000, () => waits++);
    expect([tries(), waits]).toEqual([3, 2]);
  });

  it('gives up in words when it never comes', async () => {
    const { dataSource } = comingUp(Infinity);
    await expect(connectPatiently(dataSource, 0, () => undefined)).rejects.toThrow('STILLROOM_DB_HOST');
  });

  it('does not wait where waiting helps nothing', async () => {
    const denied = Object.assign(new Error('denied'), { code: 'ER_ACCESS_DENIED_ERROR' });
    const { dataSource, tries } = comingUp(1, denied);
    await expect(connectPatiently(dataSource, 60_000, () => undefined)).rejects.toThrow('denied');
    expect(tries()).toBe(1);
  });
});
