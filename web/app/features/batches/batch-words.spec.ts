import { describe, expect, it } from 'vitest';
import type { GateView, Shift } from '#shared/contract/batches';
import { studioFormats } from '../../core/time/studio-formats';
import { gapWords, gateWords, hoursInWords, recheckWords, shiftWords } from './batch-words';

const NOW = Date.parse('2026-05-04T15:00:00Z');
const formats = studioFormats('Europe/Lisbon', 'C');
const gate = (change: Partial<GateView>): GateView => ({
  ...{ state: 'expected', reachedAt: null, t10: null, t50: null, t90: null, chanceNow: 0.03, blockedBy: [] },
  ...change,
});

describe('a batch in words', () => {
  it('tells the middle date with its range and the chance now', () => {
    const words = gateWords(
      gate({ t10: '2026-05-06T10:00:00Z', t50: '2026-05-08T10:00:00Z', t90: '2026-05-12T10:00:00Z' }),
      formats,
      NOW,
    );
    expect(words).toEqual({
      lead: 'Fri 8 May',
      rest: '10 to 90 %: Wed 6 May 11:00 to Tue 12 May 11:00. Chance that it is ready now: 3 %.',
      good: false,
    });
  });

  it('tells when it was reached and what is still missing', () => {
    const reached = { reachedAt: '2026-05-02T10:00:00Z' };
    expect(gateWords(gate({ ...reached, state: 'reached' }), formats, NOW)).toMatchObject({
      lead: 'Ready',
      good: true,
    });
    expect(
      gateWords(gate({ ...reached, state: 'blocked', blockedBy: ['no-passing-test'] }), formats, NOW).rest,
    ).toMatch(/reached Sat 2 May 11:00\. A passing wick test/);
    expect(gateWords(gate({ state: 'blocked', blockedBy: ['re-softened'] }), formats, NOW).lead).toBe(
      'Not valid',
    );
    expect(gateWords(gate({ state: 'unknown', blockedBy: ['no-readings'] }), formats, NOW).lead).toBe(
      'Not known',
    );
    expect(gateWords(gate({ chanceNow: 0.6 }), formats, NOW).lead).toBe('About now');
  });

  it('says why the date moved', () => {
    const shift: Shift = {
      ...{ from: '2026-05-01T00:00:00Z', to: '2026-05-02T00:00:00Z', roomId: 'r', roomName: 'the Loft' },
      ...{ meanCelsius: 18.2, hours: 3.24, because: 'colder' },
    };
    expect(shiftWords(shift, formats)).toMatchObject({
      what: expect.stringMatching(/^Colder than 21\s°C in the Loft, mean 18.2\s°C$/),
      by: '3.2 h later',
    });
    expect(shiftWords({ ...shift, roomName: null, because: 'gap', meanCelsius: null }, formats).what).toBe(
      'No readings without a shelf, filled',
    );
    expect([hoursInWords(-60), hoursInWords(0.01)]).toEqual(['2.5 days earlier', 'no change']);
  });

  it('says how a gap was filled and when to test again', () => {
    const gap = {
      from: '2026-05-01T00:00:00Z',
      to: '2026-05-01T02:00:00Z',
      fill: 'line' as const,
      sdDays: 0.01,
    };
    expect(gapWords(gap, formats)).toBe(
      'Fri 1 May 01:00, 2 h: filled by a straight line between its ends; adds 0.2 h of doubt.',
    );
    const recheck = {
      due: false,
      at: '2026-06-01T00:00:00Z',
      because: 'hardened' as const,
      hardenedSinceTest: 0.021,
    };
    expect(recheckWords(recheck, formats)).toMatch(
      /^Hardened by 2.1 points since its test; the next re-check/,
    );
    expect(recheckWords({ ...recheck, due: true, because: 'time' }, formats)).toMatch(
      /is due since Mon 1 June \(60 days/,
    );
    expect(recheckWords({ ...recheck, hardenedSinceTest: null }, formats)).toBe('');
  });
});
