import { describe, expect, it } from 'vitest';
import { localDayStart, localDayStarts, nextLocalDayStart } from './local-days.js';

const at = (iso: string) => Date.parse(iso);

describe('local days', () => {
  it.each([
    ['Europe/Lisbon', '2026-03-29T12:00:00Z', 23],
    ['Europe/Lisbon', '2026-10-25T12:00:00Z', 25],
    ['Europe/Helsinki', '2026-03-29T12:00:00Z', 23],
    ['America/Denver', '2026-11-01T12:00:00Z', 25],
    ['America/Denver', '2026-05-04T12:00:00Z', 24],
    ['Asia/Kathmandu', '2026-05-04T12:00:00Z', 24],
  ])('in %s the day of %s has %d hours', (zone, noon, hours) => {
    const start = localDayStart(at(noon), zone);
    expect((nextLocalDayStart(start, zone) - start) / 3_600_000).toBe(hours);
  });

  it('start at local midnight', () => {
    expect(localDayStart(at('2026-05-04T23:30:00Z'), 'Europe/Helsinki')).toBe(at('2026-05-04T21:00:00Z'));
  });

  it('cover a stretch without holes', () => {
    const starts = localDayStarts(at('2026-10-24T12:00:00Z'), at('2026-10-26T12:00:00Z'), 'Europe/Lisbon');
    expect(starts.map((start) => new Date(start).toISOString())).toEqual([
      '2026-10-23T23:00:00.000Z',
      '2026-10-24T23:00:00.000Z',
      '2026-10-26T00:00:00.000Z',
    ]);
  });
});
