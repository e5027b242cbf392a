import { describe, expect, it } from 'vitest';
import { aBatch, aGate, aRack, REACHED } from '#shared/words/test-floor';
import { rackReadiness, readyLine } from '#shared/words/rack-readiness';

const NOW = Date.parse('2026-05-04T14:00:00.000Z');
const formats = {
  daySeenFrom: (instant: string | number) => new Date(instant).toISOString().slice(5, 10),
  time: (instant: string | number) => new Date(instant).toISOString().slice(11, 16),
};
const rack = aRack(1);
const [top, bottom] = rack.shelves.map((shelf) => shelf.id);
const done = (number: number, reachedAt: string, shelfId = top) =>
  aBatch(number, { shelfId, ship: aGate({ ...REACHED, reachedAt }) });

describe('readiness of a rack', () => {
  it('is reached with the last of its batches', () => {
    const batches = [done(1, '2026-05-02T09:00:00.000Z'), done(2, '2026-05-03T10:00:00.000Z', bottom)];
    const [one] = rackReadiness([rack, aRack(2)], batches);
    expect(rackReadiness([rack, aRack(2)], batches)).toHaveLength(1);
    expect(one?.readySince).toBe(Date.parse('2026-05-03T10:00:00.000Z'));
    expect(one?.vessels).toBe(48);
    expect(one?.expected).toBeNull();
  });

  it('is expected with the latest of the open gates', () => {
    const early = aGate({
      t10: '2026-05-09T08:00:00.000Z',
      t50: '2026-05-10T08:00:00.000Z',
      t90: '2026-05-20T08:00:00.000Z',
    });
    const late = aGate({
      t10: '2026-05-11T08:00:00.000Z',
      t50: '2026-05-12T08:00:00.000Z',
      t90: '2026-05-13T08:00:00.000Z',
    });
    const [one] = rackReadiness(
      [rack],
      [aBatch(1, { ship: early }), aBatch(2, { ship: late }), done(3, '2026-05-02T09:00:00.000Z')],
    );
    expect(one?.readySince).toBeNull();
    expect(one?.expected).toEqual({
      t10: Date.parse('2026-05-11T08:00:00.000Z'),
      t50: Date.parse('2026-05-12T08:00:00.000Z'),
      t90: Date.parse('2026-05-20T08:00:00.000Z'),
    });
  });

  it('has no date while one of its batches has none', () => {
    const [one] = rackReadiness(
      [rack],
      [aBatch(1), aBatch(2, { ship: aGate({ state: 'unknown', t50: null }) })],
    );
    expect(one?.expected).toBeNull();
  });
});

describe('the line under a wall', () => {
  it('names shelves that are ready, or the whole rack', () => {
    const ready = done(1, '2026-05-02T09:00:00.000Z');
    expect(readyLine([rack], [ready, aBatch(2, { shelfId: bottom })], formats, NOW)).toEqual({
      lead: 'Ready now:',
      rest: 'Rack 1 shelf 1',
    });
    expect(readyLine([rack], [ready], formats, NOW)?.rest).toBe('Rack 1');
  });

  it('names the next rack with its range', () => {
    expect(readyLine([rack], [aBatch(1)], formats, NOW)).toEqual({
      lead: 'Next ready:',
      rest: 'Rack 1 05-13 (05-10 to 05-17)',
    });
  });

  it('tells times within one day', () => {
    const ship = aGate({
      t10: '2026-05-04T12:00:00.000Z',
      t50: '2026-05-04T20:10:00.000Z',
      t90: '2026-05-04T22:30:00.000Z',
    });
    expect(readyLine([rack], [aBatch(1, { ship })], formats, NOW)?.rest).toBe(
      'Rack 1 05-04 20:10 (14:00 to 22:30)',
    );
  });

  it('says nothing about an empty wall', () => {
    expect(readyLine([rack], [], formats, NOW)).toBeNull();
  });
});
