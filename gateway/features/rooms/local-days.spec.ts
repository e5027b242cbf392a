import { describe, expect, it } from 'vitest';
import { localDays } from './local-days.js';

const at = Date.parse;
const hours = (days: ReturnType<typeof localDays>) => days.map((day) => (day.to - day.from) / 3_600_000);

/** Nights on which clocks change, by the time zone database (tzdata): each zone once forward and once back. */
const NIGHTS = [
  { zone: 'Europe/Lisbon', forward: '2026-03-29', back: '2026-10-25' },
  { zone: 'America/Halifax', forward: '2026-03-08', back: '2026-11-01' },
  { zone: 'Australia/Hobart', forward: '2026-10-04', back: '2026-04-05' },
];

describe('local days', () => {
  it.each(NIGHTS)(
    'have 23 and 25 hours on the nights when clocks change in $zone',
    ({ zone, forward, back }) => {
      for (const [date, length] of [
        [forward, 23],
        [back, 25],
      ] as const) {
        const noon = at(`${date}T12:00:00Z`);
        const days = localDays(noon - 30 * 3_600_000, noon + 30 * 3_600_000, zone);
        expect(days.find((day) => day.date === date)).toBeDefined();
        expect(days.map((day) => day.to - day.from !== 24 * 3_600_000)).toEqual(
          days.map((day) => day.date === date),
        );
        expect(hours(days.filter((day) => day.date === date))).toEqual([length]);
        days.slice(1).forEach((day, index) => expect(day.from).toBe(days[index]?.to));
      }
    },
  );

  it('cover a period that begins and ends within days', () => {
    const days = localDays(at('2026-05-03T22:59:00Z'), at('2026-05-04T23:00:00Z'), 'Europe/Lisbon');
    expect(days.map((day) => day.date)).toEqual(['2026-05-03', '2026-05-04']);
    expect(days[1]?.from).toBe(at('2026-05-03T23:00:00Z'));
  });

  it('are none for an empty period', () => {
    expect(localDays(at('2026-05-04T12:00:00Z'), at('2026-05-04T00:00:00Z'), 'Europe/Lisbon')).toEqual([]);
  });
});
