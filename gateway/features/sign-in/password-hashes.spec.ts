import { afterAll, describe, expect, it } from 'vitest';
import { PasswordHashes } from './password-hashes.js';

describe('PasswordHashes', () => {
  const hashes = new PasswordHashes();
  const quick = new PasswordHashes(4);
  afterAll(() => Promise.all([hashes.stop(), quick.stop()]));

  it('costs 12 rounds and keeps the thread of readings free', async () => {
    let turns = 0;
    let running = true;
    const turn = () => {
      turns++;
      if (running) setImmediate(turn);
    };
    turn();
    const hash = await hashes.hash('copper kettle by noon');
    running = false;
    expect(hash).toMatch(/^\$2b\$12\$/);
    // Computed on this thread it would be three or four turns of 100 ms.
    expect(turns).toBeGreaterThan(100);
    expect(await hashes.verify('copper kettle by noon', hash)).toBe(true);
    expect(await hashes.verify('copper kettle by moon', hash)).toBe(false);
  });

  it('tells passwords apart that differ only after 72 bytes', async () => {
    const long = 'k'.repeat(72);
    const hash = await quick.hash(`${long}one`);
    expect(await quick.verify(`${long}two`, hash)).toBe(false);
    expect(await quick.verify(`${long}one`, hash)).toBe(true);
  });

  it('knows a password however its accents were typed', async () => {
    expect(await quick.verify('cafe\u0301 am morgen', await quick.hash('caf\u00e9 am morgen'))).toBe(true);
  });

  it('never lets anybody in without a hash, and takes as long to say so', async () => {
    const hash = await hashes.hash('copper kettle by noon');
    const times = { known: Infinity, unknown: Infinity };
    // The shortest of three tells the work from what else the machine does.
    for (let round = 0; round < 3; round++) {
      for (const [who, against] of [
        ['known', hash],
        ['unknown', null],
      ] as const) {
        const startedAt = performance.now();
        expect(await hashes.verify('a wrong password', against)).toBe(false);
        times[who] = Math.min(times[who], performance.now() - startedAt);
      }
    }
    expect(times.unknown / times.known).toBeGreaterThan(0.6);
    expect(times.unknown / times.known).toBeLessThan(1.6);
  });

  it('works through many at once and refuses too many', async () => {
    const all = await Promise.all(Array.from({ length: 20 }, (_, i) => quick.hash(`password number ${i}`)));
    expect(new Set(all).size).toBe(20);
    const rush = Array.from({ length: 150 }, (_, i) => quick.hash(`password number ${i}`));
    const outcomes = await Promise.allSettled(rush);
    expect(outcomes.filter(({ status }) => status === 'fulfilled').length).toBeGreaterThanOrEqual(100);
    const refused = outcomes.filter(({ status }) => status === 'rejected') as PromiseRejectedResult[];
    expect(refused.length).toBeGreaterThan(0);
    expect(refused[0]?.reason).toMatchObject({ code: 'busy' });
  });

  it('rejects what waits when it is stopped', async () => {
    const closing = new PasswordHashes(10);
    const waiting = Promise.allSettled([1, 2, 3, 4].map((i) => closing.hash(`password ${i}`)));
    await closing.stop();
    expect((await waiting).every(({ status }) => status === 'rejected')).toBe(true);
  });
});
