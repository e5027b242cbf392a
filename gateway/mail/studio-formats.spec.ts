import { describe, expect, it } from 'vitest';
import { studioFormats } from './studio-formats.js';

describe('formats of a studio', () => {
  it('writes °F with differences by 9/5 and no offset', () => {
    const formats = studioFormats('F', 'America/Denver');
    expect(formats.temperature(25)).toBe('77.0 °F');
    expect(formats.difference(1.1)).toBe('2.0 °F');
  });

  it('tells times in the studio’s zone, the day only when it is another', () => {
    const formats = studioFormats('C', 'Europe/Helsinki');
    const now = Date.parse('2026-05-04T15:42:00Z');
    expect(formats.timeSeenFrom('2026-05-04T11:20:00Z', now)).toBe('14:20');
    expect(formats.timeSeenFrom('2026-05-03T20:30:00Z', now)).toBe('Sun 3 May 23:30');
    expect([
      formats.duration(20_000),
      formats.duration(3 * 3_600_000),
      formats.duration(9 * 86_400_000),
    ]).toEqual(['1 min', '3 h', '9 days']);
  });
});
