import { pino } from 'pino';
import { describe, expect, it } from 'vitest';
import { GroupCommit, type PendingMessage } from './group-commit.js';
import type { QuarantineRow, ReadingRow, StoredBatch } from './readings-database.js';

const row = (at: number): ReadingRow => ({
  sensorNo: 1,
  at,
  receivedAt: at,
  tMicro: 20_000_000,
  rhMicro: null,
  flags: 0,
  sequence: null,
});
const quarantineOf = (reason: string): QuarantineRow => ({
  receivedAt: 0,
  studioId: null,
  sensorId: null,
  sensorNo: 1,
  topic: 't',
  payload: Buffer.from('x'),
  reason,
});

function commitInto(store: (rows: readonly ReadingRow[], again: boolean) => Promise<void>) {
  const kept: ReadingRow[] = [];
  const quarantined: QuarantineRow[] = [];
  const order: number[] = [];
  const commit = new GroupCommit({
    store: async (rows, quarantine, again): Promise<StoredBatch> => {
      await store(rows, again);
      kept.push(...rows);
      quarantined.push(...quarantine);
      return { stored: rows, repeats: 0, conflicts: [] };
    },
    committed: () => undefined,
    log: pino({ level: 'silent' }),
    wait: () => new Promise((resolve) => setImmediate(resolve)),
  });
  const add = (at: number) =>
    new Promise<void>((resolve) =>
      commit.add({
        rows: [row(at)],
        quarantine: [],
        asQuarantine: quarantineOf,
        done: () => {
          order.push(at);
          resolve();
        },
      } satisfies PendingMessage),
    );
  return { add, kept, quarantined, order, commit };
}

const fault = (properties: object) => Object.assign(new Error('fault'), properties);

describe('group commit', () => {
  it('finds the one poison row in a hundred, quarantines it and stores the rest, in order', async () => {
    const poison = (at: number) => at % 100 === 37;
    const { add, kept, quarantined, order } = commitInto(async (rows) => {
      if (rows.some(({ at }) => poison(at))) throw fault({ sqlState: '22003', errno: 1264 });
    });
    await Promise.all(Array.from({ length: 1000 }, (_, at) => add(at)));
    expect(quarantined).toHaveLength(10);
    expect(kept).toHaveLength(990);
    expect(order).toEqual(Array.from({ length: 1000 }, (_, at) => at));
  });

  it('sends a group again after a deadlock on every tenth one, without waiting and without loss', async () => {
    let calls = 0;
    const { add, kept, commit } = commitInto(async () => {
      if (++calls % 10 === 0) throw fault({ errno: 1213, sqlState: '40001' });
    });
    for (let round = 0; round < 60; round++) await Promise.all([add(round * 2), add(round * 2 + 1)]);
    expect(kept).toHaveLength(120);
    expect(commit.repeatedGroups).toBeGreaterThanOrEqual(5);
  });

  it('says so when it sends a group whose fate is unknown', async () => {
    const sent: boolean[] = [];
    const { add } = commitInto(async (_rows, again) => {
      sent.push(again);
      if (sent.length < 3) throw fault({ code: 'PROTOCOL_CONNECTION_LOST' });
    });
    await add(1);
    expect(sent).toEqual([false, true, true]);
  });

  it('keeps messages while the database is away and counts them', async () => {
    let away = true;
    const { add, commit, kept } = commitInto(async () => {
      if (away) throw fault({ code: 'ECONNREFUSED' });
    });
    const all = Promise.all([add(1), add(2), add(3)]);
    await new Promise((resolve) => setImmediate(resolve));
    expect(commit.depth).toBe(3);
    away = false;
    await all;
    expect(kept).toHaveLength(3);
    expect(commit.depth).toBe(0);
  });
});
