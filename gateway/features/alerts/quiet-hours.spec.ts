import { describe, expect, it } from 'vitest';
import { quietUntil } from './quiet-hours.js';

const lisbon = { timeZone: 'Europe/Lisbon', from: 22 * 60, to: 7 * 60 };
const at = (iso: string) => Date.parse(iso);
const iso = (ms: number | null) => (ms === null ? null : new Date(ms).toISOString());

describe('quiet hours', () => {
  it('run over midnight in the studio’s own time', () => {
    expect(iso(quietUntil(at('2026-05-04T20:59:00Z'), lisbon))).toBeNull();
    expect(iso(quietUntil(at('2026-05-04T21:00:00Z'), lisbon))).toBe('2026-05-05T06:00:00.000Z');
    expect(iso(quietUntil(at('2026-05-05T05:59:00Z'), lisbon))).toBe('2026-05-05T06:00:00.000Z');
    expect(iso(quietUntil(at('2026-05-05T06:00:00Z'), lisbon))).toBeNull();
  });

  it('end at the local hour on the nights when the clocks change', () => {
    expect(iso(quietUntil(at('2026-03-28T23:00:00Z'), lisbon))).toBe('2026-03-29T06:00:00.000Z');
    expect(iso(quietUntil(at('2026-10-24T22:30:00Z'), lisbon))).toBe('2026-10-25T07:00:00.000Z');
  });

  it('may lie within a day, and may not be set', () => {
    const noon = { timeZone: 'Europe/Lisbon', from: 12 * 60, to: 13 * 60 };
    expect(iso(quietUntil(at('2026-05-04T11:30:00Z'), noon))).toBe('2026-05-04T12:00:00.000Z');
    expect(quietUntil(at('2026-05-04T13:30:00Z'), noon)).toBeNull();
    expect(quietUntil(at('2026-05-04T13:30:00Z'), { ...noon, from: null })).toBeNull();
  });
});
