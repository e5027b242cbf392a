import { describe, expect, it } from 'vitest';
import { healthState, isDrifting, isStuck, type RecentSpan } from './sensor-health.js';

const NOW = Date.parse('2026-05-04T12:00:00Z');
const span = (change: Partial<RecentSpan> = {}): RecentSpan => ({
  readings: 36,
  tMin: 20_100_000,
  tMax: 20_100_000,
  rhMin: 48_000_000,
  rhMax: 48_000_000,
  hours: 5.9,
  ...change,
});

describe('health of a sensor', () => {
  it('is stuck when nothing moves for six hours, and only then', () => {
    expect(isStuck(span())).toBe(true);
    expect(isStuck(span({ tMax: 20_101_000 }))).toBe(false);
    expect(isStuck(span({ rhMax: 48_100_000 }))).toBe(false);
    expect(isStuck(span({ readings: 5 }))).toBe(false);
    expect(isStuck(span({ hours: 3 }))).toBe(false);
    expect(isStuck(null)).toBe(false);
  });

  it('is silent after three intervals, but not before 15 minutes', () => {
    const state = (intervalSeconds: number, minutes: number) =>
      healthState({ intervalSeconds, retired: false, lastHeardAt: NOW - minutes * 60_000 }, NOW, null, false);
    expect(state(60, 14)).toBe('fine');
    expect(state(60, 16)).toBe('silent');
    expect(state(1200, 59)).toBe('fine');
    expect(state(1200, 61)).toBe('silent');
  });

  it('says what matters first', () => {
    const base = { intervalSeconds: 60, retired: false, lastHeardAt: NOW };
    expect(healthState({ ...base, retired: true }, NOW, span(), true)).toBe('retired');
    expect(healthState({ ...base, lastHeardAt: null }, NOW, null, false)).toBe('never-heard');
    expect(healthState(base, NOW, span(), true)).toBe('stuck');
    expect(healthState(base, NOW, span({ tMax: 21_000_000 }), true)).toBe('drifting');
  });

  it('drifts when it leaves the others slowly, not when the weather moves them all', () => {
    const weather = (step: number) => 20 + Math.sin(step / 3);
    const noise = (step: number, salt: number) => (((step * 37 + salt * 11) % 17) - 8) * 0.01;
    const steps = Array.from({ length: 60 }, (_, step) => step);
    const fine = (salt: number) => steps.map((step) => weather(step) + noise(step, salt));
    const drifting = steps.map((step) => weather(step) + noise(step, 5) + Math.max(0, step - 30) * 0.02);
    expect(isDrifting(drifting, [fine(1), fine(2)])).toBe(true);
    expect(isDrifting(fine(3), [fine(1), fine(2)])).toBe(false);
    expect(isDrifting(drifting, [])).toBe(false);
    expect(isDrifting(drifting.slice(0, 20), [fine(1).slice(0, 20)])).toBe(false);
  });
});
