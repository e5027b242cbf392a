import {
  clockTime,
  dayAndTime,
  daySeenFrom,
  durationWords,
  instantOfLocal,
  localDaysBetween,
  localInput,
  timeSeenFrom,
  zoneCity,
} from './zoned-time';

const LISBON = 'Europe/Lisbon';
const HELSINKI = 'Europe/Helsinki';
const NEW_YORK = 'America/New_York';

describe('times on a studio’s wall clock', () => {
  // Offsets by the zones' published rules: Lisbon +1, Helsinki +3, New York −4 in May.
  it('shows one instant in each zone', () => {
    const at = '2026-05-08T12:20:00.000Z';
    expect([LISBON, HELSINKI, NEW_YORK].map((zone) => clockTime(at, zone))).toEqual([
      '13:20',
      '15:20',
      '08:20',
    ]);
    expect(dayAndTime('2026-05-08T01:20:00.000Z', NEW_YORK)).toBe('Thu 7 May 21:20');
  });

  it('counts local days, not spans of 24 hours', () => {
    expect(localDaysBetween('2026-05-08T22:30:00Z', '2026-05-08T23:30:00Z', LISBON)).toBe(1);
    expect(localDaysBetween('2026-05-08T22:30:00Z', '2026-05-08T23:30:00Z', NEW_YORK)).toBe(0);
  });

  it('names near days and spells out far ones', () => {
    const now = '2026-05-04T14:00:00Z';
    const seen = (instant: string) => daySeenFrom(instant, now, LISBON);
    expect(seen('2026-05-04T15:00:00Z')).toBe('today');
    expect(seen('2026-05-04T20:10:00Z')).toBe('tonight');
    expect(seen('2026-05-05T03:00:00Z')).toBe('tomorrow');
    expect(seen('2026-05-03T03:00:00Z')).toBe('yesterday');
    expect(seen('2026-05-08T03:00:00Z')).toBe('Fri 8 May');
    expect(seen('2027-05-08T03:00:00Z')).toBe('8 May 2027');
    expect(timeSeenFrom('2026-05-04T13:20:00Z', now, LISBON)).toBe('14:20');
    expect(timeSeenFrom('2026-05-03T13:20:00Z', now, LISBON)).toBe('yesterday 14:20');
    expect(timeSeenFrom('2026-05-01T13:20:00Z', now, LISBON)).toBe('Fri 1 May 14:20');
  });

  it('calls an evening that has passed today, not tonight', () => {
    expect(daySeenFrom('2026-05-04T18:00:00Z', '2026-05-04T21:00:00Z', LISBON)).toBe('today');
  });

  it('tells durations in their largest useful unit', () => {
    expect(durationWords(2_000)).toBe('2 s');
    expect(durationWords(14 * 60_000)).toBe('14 min');
    expect(durationWords(31 * 3_600_000)).toBe('31 h');
    expect(durationWords(9 * 86_400_000)).toBe('9 days');
    expect(durationWords(-5)).toBe('0 s');
  });

  it('names a zone by its city', () => {
    expect(zoneCity(NEW_YORK)).toBe('New York');
    expect(zoneCity('UTC')).toBe('UTC');
  });
});

describe('local times typed into a field', () => {
  it('come back as they were typed', () => {
    for (const zone of [LISBON, HELSINKI, NEW_YORK]) {
      expect(localInput(instantOfLocal('2026-07-01T09:30', zone), zone)).toBe('2026-07-01T09:30');
      expect(localInput(instantOfLocal('2026-01-15T23:59', zone), zone)).toBe('2026-01-15T23:59');
    }
  });

  // Clock changes of 2026 by the rules in force: Lisbon 29 March 01:00→02:00 and 25 October 02:00→01:00,
  // Helsinki the same nights 03:00→04:00 and 04:00→03:00, New York 8 March 02:00→03:00 and 1 November 02:00→01:00.
  it('that a clock change skips mean the hour after it', () => {
    expect(new Date(instantOfLocal('2026-03-29T01:30', LISBON)).toISOString()).toBe(
      '2026-03-29T01:30:00.000Z',
    );
    expect(new Date(instantOfLocal('2026-03-08T02:30', NEW_YORK)).toISOString()).toBe(
      '2026-03-08T07:30:00.000Z',
    );
  });

  it('that happen twice mean the first', () => {
    expect(new Date(instantOfLocal('2026-10-25T01:30', LISBON)).toISOString()).toBe(
      '2026-10-25T00:30:00.000Z',
    );
    expect(new Date(instantOfLocal('2026-10-25T03:30', HELSINKI)).toISOString()).toBe(
      '2026-10-25T00:30:00.000Z',
    );
    expect(new Date(instantOfLocal('2026-11-01T01:30', NEW_YORK)).toISOString()).toBe(
      '2026-11-01T05:30:00.000Z',
    );
  });

  it('start a day of 23 or 25 hours at its own midnight', () => {
    const hours = (day: string, next: string, zone: string) =>
      (instantOfLocal(next, zone) - instantOfLocal(day, zone)) / 3_600_000;
    expect(hours('2026-03-29', '2026-03-30', HELSINKI)).toBe(23);
    expect(hours('2026-10-25', '2026-10-26', LISBON)).toBe(25);
    expect(hours('2026-11-01', '2026-11-02', NEW_YORK)).toBe(25);
  });
});
