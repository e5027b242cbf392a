import { beforeEach, describe, expect, it } from 'vitest';
import { SlowDown } from './slow-down.js';

describe('SlowDown', () => {
  let now: number;
  let slowDown: SlowDown;
  beforeEach(() => {
    now = 1_000_000;
    slowDown = new SlowDown(() => now);
  });

  const tries = (count: number, account: string, network: string) => {
    for (let i = 0; i < count; i++) slowDown.begin(account, network);
  };

  it('lets the first five tries go, even all at once, then pauses twice as long each time up to a minute', () => {
    for (let i = 0; i < 5; i++) expect(slowDown.begin('ines', 'a')).toEqual({ kind: 'go', holdMs: 0 });
    const pauses: number[] = [];
    for (let i = 0; i < 8; i++) {
      const pace = slowDown.begin('ines', 'a');
      if (pace.kind !== 'wait') throw new Error('no pause');
      pauses.push(pace.seconds);
      now += pace.seconds * 1000;
      expect(slowDown.begin('ines', 'a').kind).toBe('go');
    }
    expect(pauses).toEqual([1, 2, 4, 8, 16, 32, 60, 60]);
  });

  it('never locks the person out at another address', () => {
    tries(12, 'ines', 'a');
    expect(slowDown.begin('ines', 'a').kind).toBe('wait');
    expect(slowDown.begin('ines', 'b')).toEqual({ kind: 'go', holdMs: 0 });
    expect(slowDown.begin('omar', 'a')).toEqual({ kind: 'go', holdMs: 0 });
  });

  it('holds answers back when many addresses try one account, by three seconds at most', () => {
    for (let address = 0; address < 4; address++) tries(4, 'ines', `bot ${address}`);
    expect(slowDown.begin('ines', 'home')).toEqual({ kind: 'go', holdMs: 500 });
    for (let address = 4; address < 40; address++) tries(4, 'ines', `bot ${address}`);
    expect(slowDown.begin('ines', 'office')).toEqual({ kind: 'go', holdMs: 3000 });
  });

  it('starts afresh after the right password and after a quarter of an hour', () => {
    tries(5, 'ines', 'a');
    slowDown.succeeded('ines', 'a');
    expect(slowDown.begin('ines', 'a').kind).toBe('go');
    tries(6, 'omar', 'a');
    expect(slowDown.begin('omar', 'a').kind).toBe('wait');
    now += 15 * 60_000;
    tries(4, 'omar', 'a');
    expect(slowDown.begin('omar', 'a').kind).toBe('go');
  });
});
