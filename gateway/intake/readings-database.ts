import {
  createPool,
  type Pool,
  type PoolConnection,
  type ResultSetHeader,
  type RowDataPacket,
} from 'mysql2/promise';
import type { DatabaseAccess } from '../database/data-source.js';

/** A reading on its way into the database. Measured values are millionths of °C and of %. */
export interface ReadingRow {
  readonly sensorNo: number;
  readonly at: number;
  readonly receivedAt: number;
  readonly tMicro: number;
  readonly rhMicro: number | null;
  /** 1: the device's time is ahead of ours. */
  readonly flags: number;
  readonly sequence: { readonly boot: number; readonly seq: number } | null;
}

export interface QuarantineRow {
  readonly receivedAt: number;
  readonly studioId: string | null;
  readonly sensorId: string | null;
  readonly sensorNo: number | null;
  readonly topic: string;
  readonly payload: Buffer;
  readonly reason: string;
}

/** What became of a batch of rows. */
export interface StoredBatch {
  /** Rows that are in the database because of this batch. */
  readonly stored: readonly ReadingRow[];
  /** Rows that had been there before with the same value. */
  readonly repeats: number;
  /** Rows whose key had been there before with another value; the first was kept. */
  readonly conflicts: readonly ReadingRow[];
}

export const FUTURE_FLAG = 1;
const ROLLUP_MS = 300_000;
/** A statement that takes longer is given up and its connection with it: the database may be stopped. */
const STATEMENT_TIMEOUT_MS = 5000;
const LONGEST_KEPT_PAYLOAD = 2048;

/** Writes batches of readings: one transaction each, with the marks of what has to be rolled up anew. */
export class ReadingsDatabase {
  readonly #pool: Pool;

  constructor(access: DatabaseAccess) {
    this.#pool = createPool({
      host: access.host,
      port: access.port,
      user: access.user,
      password: access.password,
      database: access.name,
      timezone: 'Z',
      connectionLimit: 2,
      connectTimeout: STATEMENT_TIMEOUT_MS,
      // An unchanged row must count as not affected: that is how a repeat is seen.
      flags: ['-FOUND_ROWS'],
    });
  }

  /**
   * Stores a batch; when it resolves, everything is on disk. Safe to repeat after any failure.
   * @param again the same batch was sent before and its fate is unknown: rows found as received then are its own
   */
  async store(
    rows: readonly ReadingRow[],
    quarantine: readonly QuarantineRow[],
    again = false,
  ): Promise<StoredBatch> {
    const connection = await this.#pool.getConnection();
    try {
      const result = await this.#inTransaction(connection, rows, quarantine, again);
      connection.release();
      return result;
    } catch (error) {
      // The state of the transaction is unknown: this connection must never be used again.
      connection.destroy();
      throw error;
    }
  }

  /** Notes when sensors were last heard and what was counted of them. */
  async noteHeard(
    heard: readonly {
      sensorNo: number;
      at: number | null;
      battery: number | null;
      future: number;
      conflicts: number;
      quarantined: number;
    }[],
  ): Promise<void> {
    for (const one of heard) {
      await this.#pool.query(
        `UPDATE sensor SET last_heard_at = GREATEST(COALESCE(last_heard_at, '1970-01-01'), COALESCE(?, '1970-01-01')), battery = COALESCE(?, battery),
           future_readings = future_readings + ?, conflicts = conflicts + ?, quarantined = quarantined + ? WHERE no = ?`,
        [
          one.at === null ? null : new Date(one.at),
          one.battery,
          one.future,
          one.conflicts,
          one.quarantined,
          one.sensorNo,
        ],
      );
    }
  }

  /** @throws Error unless a commit is on disk before it is acknowledged */
  async checkDurability(): Promise<void> {
    const [rows] = await this.#pool.query<RowDataPacket[]>(
      'SELECT @@innodb_flush_log_at_trx_commit AS flush',
    );
    if (Number(rows[0]?.['flush']) !== 1) {
      throw new Error(
        'The database does not write every commit to disk. Set innodb_flush_log_at_trx_commit=1: an acknowledged reading must not be lost.',
      );
    }
  }

  close(): Promise<void> {
    return this.#pool.end();
  }

  async #inTransaction(
    connection: PoolConnection,
    rows: readonly ReadingRow[],
    quarantine: readonly QuarantineRow[],
    again: boolean,
  ): Promise<StoredBatch> {
    const distinct = distinctByKey(rows);
    await this.#query(connection, 'START TRANSACTION');
    let { fresh, repeats } = await this.#knownSequences(connection, distinct.rows, again);
    let { conflicts } = distinct;
    repeats += distinct.repeats;
    let ours: readonly ReadingRow[] = [];
    if (fresh.length > 0 && (await this.#insert(connection, fresh)) < fresh.length) {
      // Some keys were there before. Find out which, and keep what is there.
      await this.#query(connection, 'ROLLBACK');
      await this.#query(connection, 'START TRANSACTION');
      const known = await this.#known(connection, fresh);
      const sorted = sortOut(fresh, known, again);
      ours = sorted.ours;
      repeats += sorted.repeats;
      conflicts = [...conflicts, ...sorted.conflicts];
      fresh = sorted.fresh;
      if (sorted.replaceable.length > 0) await this.#replace(connection, sorted.replaceable);
      if (fresh.length > 0) await this.#insert(connection, fresh);
      fresh = [...fresh, ...sorted.replaceable];
    }
    await this.#noteSequences(connection, fresh);
    await this.#mark(connection, fresh);
    if (quarantine.length > 0) await this.#quarantine(connection, quarantine);
    await this.#query(connection, 'COMMIT');
    return { stored: [...fresh, ...ours], repeats, conflicts };
  }

  async #insert(connection: PoolConnection, rows: readonly ReadingRow[]): Promise<number> {
    const values = rows.map((row) => [
      row.sensorNo,
      new Date(row.at),
      new Date(row.receivedAt),
      row.tMicro,
      row.rhMicro,
      row.flags,
    ]);
    const result = await this.#query<ResultSetHeader>(
      connection,
      'INSERT INTO reading (sensor_no, at, received_at, t_micro, rh_micro, flags) VALUES ? ON DUPLICATE KEY UPDATE sensor_no = VALUES(sensor_no)',
      [values],
    );
    return result.affectedRows;
  }

  /** A reading whose time was doubtful gives way to one that really belongs there. */
  async #replace(connection: PoolConnection, rows: readonly ReadingRow[]): Promise<void> {
    for (const row of rows) {
      await this.#query(
        connection,
        'UPDATE reading SET t_micro = ?, rh_micro = ?, flags = ?, received_at = ? WHERE sensor_no = ? AND at = ?',
        [row.tMicro, row.rhMicro, row.flags, new Date(row.receivedAt), row.sensorNo, new Date(row.at)],
      );
    }
  }

  async #known(connection: PoolConnection, rows: readonly ReadingRow[]): Promise<Map<string, KnownReading>> {
    const known = new Map<string, KnownReading>();
    for (const [sensorNo, ofSensor] of bySensor(rows)) {
      const found = await this.#query<RowDataPacket[]>(
        connection,
        'SELECT at, received_at, t_micro, rh_micro, flags FROM reading WHERE sensor_no = ? AND at IN (?)',
        [sensorNo, ofSensor.map((row) => new Date(row.at))],
      );
      for (const row of found as unknown as KnownReading[]) known.set(`${sensorNo}/${row.at.getTime()}`, row);
    }
    return known;
  }

  /** Readings of devices without a clock are known by boot and sequence number. */
  async #knownSequences(connection: PoolConnection, rows: readonly ReadingRow[], again: boolean) {
    const sequenced = rows.filter((row) => row.sequence !== null);
    if (sequenced.length === 0) return { fresh: rows, repeats: 0 };
    const known = new Map<string, number>();
    for (const [sensorNo, ofSensor] of bySensor(sequenced)) {
      const found = await this.#query<RowDataPacket[]>(
        connection,
        'SELECT boot, seq, at FROM sequence_seen WHERE sensor_no = ? AND (boot, seq) IN (?)',
        [sensorNo, ofSensor.map((row) => [row.sequence?.boot, row.sequence?.seq])],
      );
      for (const row of found)
        known.set(`${sensorNo}/${row['boot']}/${row['seq']}`, (row['at'] as Date).getTime());
    }
    let repeats = 0;
    const fresh = rows.filter((row) => {
      if (row.sequence === null) return true;
      const at = known.get(`${row.sensorNo}/${row.sequence.boot}/${row.sequence.seq}`);
      // Known at its own time of receipt: this very batch was committed before, its answer was lost.
      if (at === undefined || (again && at === row.at)) return true;
      repeats++;
      return false;
    });
    return { fresh, repeats };
  }

  async #noteSequences(connection: PoolConnection, rows: readonly ReadingRow[]): Promise<void> {
    const values = rows.flatMap((row) =>
      row.sequence === null ? [] : [[row.sensorNo, row.sequence.boot, row.sequence.seq, new Date(row.at)]],
    );
    if (values.length === 0) return;
    await this.#query(
      connection,
      'INSERT INTO sequence_seen (sensor_no, boot, seq, at) VALUES ? ON DUPLICATE KEY UPDATE sensor_no = VALUES(sensor_no)',
      [values],
    );
  }

  async #mark(connection: PoolConnection, rows: readonly ReadingRow[]): Promise<void> {
    const marks = new Map<string, [number, Date]>();
    for (const row of rows) {
      const bucket = Math.floor(row.at / ROLLUP_MS) * ROLLUP_MS;
      marks.set(`${row.sensorNo}/${bucket}`, [row.sensorNo, new Date(bucket)]);
    }
    if (marks.size === 0) return;
    // In one order everywhere, so that two transactions never wait for each other crosswise.
    const values = [...marks.values()].sort((a, b) => a[0] - b[0] || a[1].getTime() - b[1].getTime());
    await this.#query(
      connection,
      'INSERT INTO dirty_mark (sensor_no, bucket) VALUES ? ON DUPLICATE KEY UPDATE sensor_no = VALUES(sensor_no)',
      [values],
    );
  }

  async #quarantine(connection: PoolConnection, rows: readonly QuarantineRow[]): Promise<void> {
    await this.#query(
      connection,
      'INSERT INTO quarantine (received_at, studio_id, sensor_id, topic, payload, reason) VALUES ?',
      [
        rows.map((row) => [
          new Date(row.receivedAt),
          row.studioId,
          row.sensorId,
          row.topic.slice(0, 300),
          row.payload.subarray(0, LONGEST_KEPT_PAYLOAD),
          row.reason.slice(0, 300),
        ]),
      ],
    );
  }

  async #query<T extends ResultSetHeader | RowDataPacket[]>(
    connection: PoolConnection,
    sql: string,
    values?: unknown[],
  ): Promise<T> {
    const [result] = await connection.query<T>({
      sql,
      timeout: STATEMENT_TIMEOUT_MS,
      ...(values ? { values } : {}),
    });
    return result;
  }
}

interface KnownReading {
  readonly at: Date;
  readonly received_at: Date;
  readonly t_micro: number;
  readonly rh_micro: number | null;
  readonly flags: number;
}

const keyOf = (row: ReadingRow) => `${row.sensorNo}/${row.at}`;
const sameValue = (row: ReadingRow, tMicro: number, rhMicro: number | null) =>
  row.tMicro === tMicro && row.rhMicro === rhMicro;

function bySensor(rows: readonly ReadingRow[]): Map<number, ReadingRow[]> {
  const groups = new Map<number, ReadingRow[]>();
  for (const row of rows) {
    const group = groups.get(row.sensorNo);
    if (group) group.push(row);
    else groups.set(row.sensorNo, [row]);
  }
  return groups;
}

/** The first row of every key; later ones are repeats or conflicts. */
function distinctByKey(rows: readonly ReadingRow[]) {
  const first = new Map<string, ReadingRow>();
  const conflicts: ReadingRow[] = [];
  let repeats = 0;
  for (const row of rows) {
    const known = first.get(keyOf(row));
    if (known === undefined) first.set(keyOf(row), row);
    else if (sameValue(row, known.tMicro, known.rhMicro)) repeats++;
    else conflicts.push(row);
  }
  return { rows: [...first.values()], repeats, conflicts };
}

/** Sorts rows by what the database already holds under their keys. */
function sortOut(rows: readonly ReadingRow[], known: ReadonlyMap<string, KnownReading>, again: boolean) {
  const fresh: ReadingRow[] = [];
  const ours: ReadingRow[] = [];
  const replaceable: ReadingRow[] = [];
  const conflicts: ReadingRow[] = [];
  let repeats = 0;
  for (const row of rows) {
    const found = known.get(keyOf(row));
    if (found === undefined) fresh.push(row);
    else if (!sameValue(row, found.t_micro, found.rh_micro)) {
      const wasDoubtful = (found.flags & FUTURE_FLAG) !== 0 && (row.flags & FUTURE_FLAG) === 0;
      (wasDoubtful ? replaceable : conflicts).push(row);
    } else if (again && found.received_at.getTime() === row.receivedAt) ours.push(row);
    else repeats++;
  }
  return { fresh, ours, replaceable, conflicts, repeats };
}
