import type { DataSource } from 'typeorm';

const MONTHS_BACK = 24;
const MONTHS_AHEAD = 24;

/**
 * Brings the schema up to date and makes sure that readings have a partition for every month from two years back
 * to two years ahead. Needs the account that may change tables; the gateway itself runs without that right.
 */
export async function migrateDatabase(dataSource: DataSource, now: Date): Promise<void> {
  await dataSource.runMigrations({ transaction: 'none' });
  await ensureReadingPartitions(dataSource, now);
}

/** Splits the catch-all partition so that every month in reach has its own; existing months are left alone. */
export async function ensureReadingPartitions(dataSource: DataSource, now: Date): Promise<void> {
  const rows = await dataSource.query<{ name: string }[]>(
    `SELECT partition_name AS name FROM information_schema.partitions WHERE table_schema = DATABASE() AND table_name = 'reading'`,
  );
  const existing = new Set(rows.map((row) => row.name));
  const newest =
    [...existing]
      .filter((name) => /^p\d{6}$/.test(name))
      .sort()
      .at(-1) ?? '';
  const parts: string[] = [];
  for (let month = -MONTHS_BACK; month <= MONTHS_AHEAD; month++) {
    const start = new Date(Date.UTC(now.getUTCFullYear(), now.getUTCMonth() + month, 1));
    const next = new Date(Date.UTC(now.getUTCFullYear(), now.getUTCMonth() + month + 1, 1));
    const name = `p${start.toISOString().slice(0, 7).replace('-', '')}`;
    // MariaDB can only split the catch-all at its upper end, so months older than the newest one stay where they are.
    if (!existing.has(name) && name > newest)
      parts.push(`PARTITION ${name} VALUES LESS THAN ('${next.toISOString().slice(0, 10)}')`);
  }
  if (parts.length === 0) return;
  await dataSource.query(
    `ALTER TABLE reading REORGANIZE PARTITION p_rest INTO (${parts.join(', ')}, PARTITION p_rest VALUES LESS THAN (MAXVALUE))`,
  );
}
