import { describe, expect, it } from 'vitest';
import { nextGate } from '#shared/words/gate-words';
import { aBatch, aGate, REACHED } from '#shared/words/test-floor';

const NOW = Date.parse('2026-05-04T14:00:00.000Z');
const formats = { daySeenFrom: (instant: string | number) => new Date(instant).toISOString().slice(5, 10) };
const said = (over: Parameters<typeof aBatch>[1], withRange = false) => {
  const { what, when } = nextGate(aBatch(1, over), formats, NOW, withRange);
  return `${what}|${when}`;
};
const reached = aGate(REACHED);

describe('the next gate of a batch in words', () => {
  it('is the wick test first, then shipping', () => {
    expect(said({})).toBe('test|05-08');
    expect(said({ wickTest: reached })).toBe('ship|05-13');
    expect(said({ wickTest: reached, ship: reached })).toBe('|ready');
  });

  it('asks for the test that is missing once the wax has cured', () => {
    const ship = aGate({ state: 'blocked', t50: '2026-05-03T09:00:00.000Z', blockedBy: ['no-passing-test'] });
    expect(said({ wickTest: reached, ship })).toBe('|test due');
  });

  it('puts a re-check before a date', () => {
    expect(said({ recheckDue: true })).toBe('|re-check');
    expect(nextGate(aBatch(1, { recheckDue: true, ship: reached }), formats, NOW).sentence).toBe(
      'ready to ship, wick re-check due',
    );
  });

  it('tells half the range where a date rests on a forecast', () => {
    expect(said({}, true)).toBe('test|05-08 ±3 d');
    expect(
      said({ wickTest: aGate({ t10: '2026-05-08T08:00:00.000Z', t90: '2026-05-08T16:00:00.000Z' }) }, true),
    ).toBe('test|05-08');
  });

  it('claims no date where there is none', () => {
    expect(said({ wickTest: aGate({ state: 'unknown', t50: null }) })).toBe('test|no date');
    expect(said({ wickTest: aGate({ blockedBy: ['re-softened'], state: 'blocked' }) })).toBe(
      'test|re-softened',
    );
  });
});
