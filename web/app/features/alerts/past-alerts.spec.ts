import { describe, expect, it } from 'vitest';
import type { Alert } from '#shared/contract/alerts';
import { PastAlerts } from './past-alerts';

const alert = (studioId: string, day: number) =>
  ({
    id: `${studioId}${day}`,
    studioId,
    raisedAt: `2026-05-${String(day).padStart(2, '0')}T10:00:00.000Z`,
  }) as Alert;

/** Answers as the gateway does: the newest first, raised before an instant. */
const gateway = (all: readonly Alert[], size: number) => {
  const asked: string[] = [];
  const ask = (studioId: string, before: string | undefined) => {
    asked.push(studioId);
    return Promise.resolve(
      all
        .filter((one) => one.studioId === studioId && (before === undefined || one.raisedAt < before))
        .sort((a, b) => b.raisedAt.localeCompare(a.raisedAt))
        .slice(0, size),
    );
  };
  return { ask, asked };
};

describe('past alerts of several studios', () => {
  // One studio is noisy, the other is not: its first page reaches much further back.
  const all = [28, 27, 26, 25, 24]
    .map((day) => alert('a', day))
    .concat([26, 9, 2].map((day) => alert('b', day)));

  it('come page by page, with none left out between two studios', async () => {
    const { ask } = gateway(all, 2);
    const past = new PastAlerts(['a', 'b'], 2, ask);
    const first = await past.further();
    expect(first.alerts.map(({ id }) => id)).toEqual(['a28', 'a27']);
    expect(first.more).toBe(true);
    const seen = [first];
    while (seen.at(-1)?.more) seen.push(await past.further());
    expect(seen.at(-1)?.alerts.map(({ id }) => id)).toEqual([
      'a28',
      'a27',
      'a26',
      'b26',
      'a25',
      'a24',
      'b9',
      'b2',
    ]);
    for (const [index, later] of seen.slice(1).entries()) {
      expect(later.alerts.slice(0, seen[index]?.alerts.length)).toEqual(seen[index]?.alerts);
    }
  });

  it('read only the studio that holds the others up', async () => {
    const { ask, asked } = gateway(all, 2);
    const past = new PastAlerts(['a', 'b'], 2, ask);
    await past.further();
    await past.further();
    expect(asked).toEqual(['a', 'b', 'a']);
  });

  it('stay as they are when a studio cannot be read', async () => {
    const { ask } = gateway(all, 2);
    let broken = false;
    const past = new PastAlerts(['a', 'b'], 2, (id, before) =>
      broken ? Promise.reject(new Error('away')) : ask(id, before),
    );
    await past.further();
    broken = true;
    await expect(past.further()).rejects.toThrow('away');
    broken = false;
    expect((await past.further()).alerts.map(({ id }) => id)).toEqual(['a28', 'a27', 'a26', 'b26', 'a25']);
  });
});
