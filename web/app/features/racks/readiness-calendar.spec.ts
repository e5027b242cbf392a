import { describe, expect, it } from 'vitest';
import type { BatchCard } from '#shared/contract/batches';
import { aBatch, aGate, aRack, REACHED } from '#shared/words/test-floor';
import { studioFormats } from '../../core/time/studio-formats';
import {
  calendarDays,
  calendarRow,
  calendarStart,
  DAYS,
  isReadyBy,
  nextFriday,
  placeOf,
  type RackInStudio,
} from './readiness-calendar';
import { readinessSentence } from './readiness-sentence';
import { gateWhen, rangeInWords } from './readiness-words';

const NOW = Date.parse('2026-05-04T15:00:00Z');
const START = calendarStart(NOW, 'Europe/Lisbon');
const formats = studioFormats('Europe/Lisbon', 'C');
const place = (batches: readonly BatchCard[]): RackInStudio => ({
  ...{ studioId: 's', studioName: 'Quay Street', roomId: 'room', roomName: 'Loft' },
  rack: aRack(1),
  batches,
  formats,
});
const row = (...batches: BatchCard[]) => calendarRow(place(batches), 'ship', START, NOW)!;
const READY = aGate(REACHED);
const UNTESTED = aGate({ ...REACHED, state: 'blocked', blockedBy: ['no-passing-test'] });

describe('the four weeks', () => {
  it('have today on the thirteenth day and eight days of weekends', () => {
    const days = calendarDays(START);
    expect(days).toHaveLength(DAYS);
    expect(days.findIndex(({ today }) => today)).toBe(12);
    expect(days[12]).toMatchObject({ day: 4, label: 'Mon 4 May' });
    expect(days.filter(({ weekend }) => weekend)).toHaveLength(8);
  });

  it('put the same midnight of every studio on the same line, also when it is tomorrow there already', () => {
    expect(placeOf('2026-05-04T23:00:00Z', START, 'Europe/Lisbon')).toBeCloseTo(13 / 28, 9);
    expect(placeOf('2026-05-04T21:00:00Z', START, 'Europe/Helsinki')).toBeCloseTo(13 / 28, 9);
    const lateEvening = Date.parse('2026-05-04T22:30:00Z');
    const start = calendarStart(lateEvening, 'Europe/Lisbon');
    expect(start).toBe(START);
    expect(placeOf(lateEvening, start, 'Europe/Helsinki')).toBeGreaterThan(13 / 28);
  });

  it('know the next Friday', () => {
    expect(nextFriday(NOW, 'Europe/Lisbon')).toBe('2026-05-08');
    expect(nextFriday(Date.parse('2026-05-08T10:00:00Z'), 'Europe/Lisbon')).toBe('2026-05-08');
    expect(nextFriday(Date.parse('2026-05-08T23:30:00Z'), 'Europe/Lisbon')).toBe('2026-05-15');
  });
});

describe('a rack on the calendar', () => {
  it('draws a bar from the pour to the middle of the range, with the other gate as a notch', () => {
    const [bar] = row(aBatch(1)).bars;
    expect(bar!.start).toBeLessThan(bar!.low);
    expect(bar!.low).toBeLessThan(bar!.middle);
    expect(bar!.middle).toBeLessThan(bar!.high);
    expect(bar!.notches).toEqual([placeOf('2026-05-08T09:00:00Z', START, 'Europe/Lisbon')]);
    expect(bar!.short).toBe('Wed 13 May');
    expect(bar!.when).toBe('Wed 13 May (10 to 17 May)');
  });

  it('is cured when its last batch is', () => {
    expect(row(aBatch(1, { ship: READY }), aBatch(2))).toMatchObject({
      curedAt: Date.parse('2026-05-13T09:00:00Z'),
      last: { code: 'L-102' },
    });
    const undated = row(aBatch(1, { ship: aGate({ t10: null, t50: null, t90: null }) }), aBatch(2));
    expect(undated).toMatchObject({ curedAt: null, last: { code: 'L-101' } });
    expect(undated.bars[0]?.middle).toBeGreaterThan(1);
  });

  it('is not ready while a passing test is missing or the wax softened again', () => {
    const later = NOW + 30 * 86_400_000;
    expect(isReadyBy(row(aBatch(1, { ship: READY })), NOW)).toBe(true);
    expect(isReadyBy(row(aBatch(1)), NOW)).toBe(false);
    expect(isReadyBy(row(aBatch(1)), later)).toBe(true);
    expect(isReadyBy(row(aBatch(1, { ship: UNTESTED })), later)).toBe(false);
    const soft = aGate({ state: 'blocked', blockedBy: ['re-softened'] });
    expect(isReadyBy(row(aBatch(1, { ship: soft })), later)).toBe(false);
  });

  it('puts the words where they cover no bar', () => {
    const side = (batch: BatchCard) => row(batch).bars[0]?.side;
    expect(side(aBatch(1, { ship: READY }))).toBe('after');
    const far = aGate({ t50: '2026-05-19T09:00:00.000Z', t90: '2026-05-25T09:00:00.000Z' });
    expect(side(aBatch(1, { pouredAt: '2026-05-01T09:00:00.000Z', ship: far }))).toBe('before');
    expect(side(aBatch(1, { pouredAt: '2026-04-20T09:00:00.000Z', ship: far }))).toBe('within');
  });
});

describe('readiness in words', () => {
  it('tells the range as shortly as it can be told', () => {
    const range = (t10: string | null, t90: string | null) => rangeInWords({ t10, t90 }, formats);
    expect(range('2026-05-06T08:00:00Z', '2026-05-12T08:00:00Z')).toBe('6 to 12 May');
    expect(range('2026-04-29T08:00:00Z', '2026-05-03T08:00:00Z')).toBe('29 Apr to 3 May');
    expect(range('2026-05-06T08:00:00Z', '2026-05-06T12:10:00Z')).toBe('09:00 to 13:10');
    expect(range(null, '2026-05-12T08:00:00Z')).toBe('now to 12 May');
    expect(range('2026-05-06T08:00:00Z', null)).toBe('from 6 May');
    expect(range(null, null)).toBe('');
  });

  it('says what else stands in the way', () => {
    const when = (gate: BatchCard['ship']) => gateWhen(gate, formats, NOW);
    expect(when(READY)).toBe('ready');
    expect(when(UNTESTED)).toBe('cured, waits for a passing wick test');
    expect(when(aGate({ state: 'blocked', blockedBy: ['re-softened'] }))).toBe(
      'softened again, check by hand',
    );
    expect(when(aGate({ state: 'unknown', t10: null, t50: null, t90: null }))).toBe('nothing measured yet');
    expect(when(aGate({ t10: null, t50: null, t90: null }))).toBe('no date yet');
    expect(when(aGate({ t10: null, t50: null, t90: '2026-05-05T09:00:00.000Z', chanceNow: 0.7 }))).toBe(
      'any time now (now to 5 May)',
    );
  });

  it('counts what is ready by a day, what waits for a test, and names the longest wait', () => {
    const rows = [
      row(aBatch(1, { ship: READY, vessels: 30 })),
      row(aBatch(2)),
      row(aBatch(3, { ship: UNTESTED })),
    ];
    const words = readinessSentence(rows, 'ship', () => NOW, 'Mon 4 May', NOW);
    expect(words.lead).toBe('Ready to ship by Mon 4 May: 1 rack, 30 vessels.');
    expect(words.rest).toBe(
      '1 more rack will be cured by then but waits for a passing wick test. ' +
        'The longest wait is Rack 1 in Loft, Wed 13 May (10 to 17 May), because of L-102.',
    );
    expect(readinessSentence([], 'wickTest', () => NOW, 'Mon 4 May', NOW)).toEqual({
      lead: 'No rack is ready for the wick test by Mon 4 May.',
      rest: '',
    });
  });
});
