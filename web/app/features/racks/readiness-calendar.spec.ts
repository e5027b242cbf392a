import { describe, expect, it } from 'vitest';
import type { BatchCard, GateView } from '#shared/contract/batches';
import { studioFormats } from '../../core/time/studio-formats';
import {
  calendarDays,
  calendarRow,
  DAYS,
  placeOf,
  type RackInStudio,
  readinessSentence,
} from './readiness-calendar';

const NOW = Date.parse('2026-05-04T15:00:00Z');
const gate = (change: Partial<GateView>): GateView => ({
  ...{ state: 'expected', reachedAt: null, t10: null, t50: null, t90: null, chanceNow: 0, blockedBy: [] },
  ...change,
});
const batch = (code: string, ship: Partial<GateView>, vessels = 24): BatchCard => ({
  ...{
    id: code,
    studioId: 's',
    code,
    designName: null,
    waxFamily: 'soy-container',
    vessels,
    status: 'curing',
  },
  ...{
    pouredAt: '2026-04-22T09:00:00Z',
    shelfId: 'sh',
    rackId: 'r',
    roomId: 'room',
    hardening: 0.5,
    scent: 0.5,
  },
  ...{
    cureAgeDays: 9,
    wickTest: gate({ reachedAt: '2026-05-01T09:00:00Z', state: 'reached' }),
    ship: gate(ship),
  },
  ...{ recheckDue: false, frosting: null, atRisk: false, resoftened: false, version: 1 },
});
const place = (batches: readonly BatchCard[], timeZone = 'Europe/Lisbon'): RackInStudio => ({
  ...{ studioId: 's', studioName: 'Quay Street', roomId: 'room', roomName: 'Loft' },
  rack: {
    id: 'r',
    roomId: 'room',
    name: 'Rack 1',
    position: 0,
    version: 1,
    shelves: [{ id: 'sh', position: 1, capacity: 30 }],
  },
  batches,
  formats: studioFormats(timeZone, 'C'),
});
const later = { t10: '2026-05-06T10:00:00Z', t50: '2026-05-08T10:00:00Z', t90: '2026-05-12T10:00:00Z' };

describe('calendar of readiness', () => {
  it('has four weeks with today on the thirteenth day, weekends marked', () => {
    const days = calendarDays(NOW, 'Europe/Lisbon');
    expect(days).toHaveLength(DAYS);
    expect(days.findIndex(({ today }) => today)).toBe(12);
    expect(days[12]).toMatchObject({ day: 4, label: 'Mon 4 May' });
    expect(days.filter(({ weekend }) => weekend)).toHaveLength(8);
  });

  it('puts midnights of every zone on the same line', () => {
    const lisbon = placeOf('2026-05-04T23:00:00Z', NOW, 'Europe/Lisbon');
    const helsinki = placeOf('2026-05-04T21:00:00Z', NOW, 'Europe/Helsinki');
    expect(lisbon).toBeCloseTo(13 / 28, 9);
    expect(helsinki).toBeCloseTo(13 / 28, 9);
  });

  it('draws a bar from the pour to the middle of the range, and says when', () => {
    const row = calendarRow(place([batch('L-118', later)]), 'ship', NOW);
    const [bar] = row.bars;
    expect(bar!.start).toBeLessThan(bar!.low);
    expect(bar!.low).toBeLessThan(bar!.middle);
    expect(bar!.middle).toBeLessThan(bar!.high);
    expect(bar!.notches).toHaveLength(1);
    expect(bar!.when).toBe('Fri 8 May (Wed 6 May to Tue 12 May)');
    expect(row.size).toBe('1 shelf, 24 vessels');
  });

  it('a rack is ready when its last batch is', () => {
    const ready = batch('A', { state: 'reached', reachedAt: '2026-05-02T09:00:00Z' });
    expect(calendarRow(place([ready]), 'ship', NOW).readyAt).toBe(Date.parse('2026-05-02T09:00:00Z'));
    const both = calendarRow(place([ready, batch('B', later)]), 'ship', NOW);
    expect(both).toMatchObject({ readyAt: Date.parse(later.t50), lastCode: 'B' });
    expect(calendarRow(place([ready, batch('C', {})]), 'ship', NOW).readyAt).toBeNull();
  });

  it('says what else stands in the way', () => {
    const waits = batch('A', {
      state: 'blocked',
      reachedAt: '2026-05-02T09:00:00Z',
      blockedBy: ['no-passing-test'],
    });
    expect(calendarRow(place([waits]), 'ship', NOW).bars[0]?.when).toBe(
      'cured, waits for a passing wick test',
    );
    const soft = batch('B', { state: 'blocked', blockedBy: ['re-softened'] });
    expect(calendarRow(place([soft]), 'ship', NOW).bars[0]?.when).toBe('softened again, check by hand');
  });

  it('counts what is ready by a day and names the longest wait', () => {
    const ready = calendarRow(
      place([batch('A', { state: 'reached', reachedAt: '2026-05-02T09:00:00Z' }, 30)]),
      'ship',
      NOW,
    );
    const late = calendarRow(place([batch('B', later)]), 'ship', NOW);
    const formats = studioFormats('Europe/Lisbon', 'C');
    const words = readinessSentence([ready, late], 'ship', NOW, 'today', () => formats, NOW);
    expect(words.lead).toBe('Ready to ship by today: 1 rack, 30 vessels.');
    expect(words.rest).toBe('The longest wait is Rack 1 in Loft: Fri 8 May, because of B.');
    expect(readinessSentence([], 'wickTest', NOW, 'today', () => formats, NOW).lead).toBe(
      'No rack is ready for the wick test by today.',
    );
  });
});
