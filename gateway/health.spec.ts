import { afterEach, describe, expect, it, vi } from 'vitest';
import { Health } from './health.js';

const clock = { now: () => Date.parse('2026-05-04T12:00:00Z'), speed: () => 60 };

function health(query: () => Promise<unknown>, waitingRows = 0, demo = false) {
  const settings = {
    demo: demo ? { deskUrl: 'http://127.0.0.1:4320', simulatorSecret: 'secret of the simulator' } : null,
  };
  return new Health(
    { settings, dataSource: { query: query as never }, clock },
    { health: () => ({ waitingRows }) },
  );
}

describe('Health', () => {
  afterEach(() => vi.useRealTimers());

  it('is well when the database answers and the intake keeps up', async () => {
    expect(await health(async () => [1]).look()).toEqual({
      ok: true,
      parts: { database: 'answers', intake: 'keeps up' },
    });
    expect((await health(async () => [1], 12).look()).parts['intake']).toBe('is storing readings');
  });

  it('is not well when the database refuses, does not answer, or falls far behind', async () => {
    expect((await health(() => Promise.reject(new Error('gone'))).look()).ok).toBe(false);
    expect((await health(async () => [1], 60_000).look()).ok).toBe(false);
    vi.useFakeTimers();
    const look = health(() => new Promise(() => undefined)).look();
    await vi.advanceTimersByTimeAsync(2000);
    expect(await look).toMatchObject({ ok: false, parts: { database: 'does not answer' } });
  });

  it('tells the time of the demo, and never its secret', async () => {
    const answer = await health(async () => [1], 0, true).look();
    expect(answer.parts['clock']).toBe('demo time 2026-05-04T12:00:00.000Z, 60 times as fast');
    expect(JSON.stringify(answer)).not.toContain('secret');
  });
});
