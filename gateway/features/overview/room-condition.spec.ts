import { describe, expect, it } from 'vitest';
import { cellAgrees, stateOf, staleAfterMs } from './room-condition.js';

const bounds = { bandLow: 18, bandHigh: 24, heatLimit: 25, humidityHigh: 65, swingLimit: 6 };
const air = (celsius: number, humidity: number | null = 50, stale = false) => ({ celsius, humidity, stale });

describe('condition of a room', () => {
  it('names the worst first, and silence before anything else', () => {
    expect(stateOf(null, bounds, 0)).toBe('never-heard');
    expect(stateOf(air(30, 90, true), bounds, 9)).toBe('silent');
    expect(stateOf(air(25.01, 90), bounds, 9)).toBe('heat');
    expect(stateOf(air(17.99, 90), bounds, 9)).toBe('cold');
    expect(stateOf(air(21, 65.1), bounds, 9)).toBe('damp');
    expect(stateOf(air(21), bounds, 6.1)).toBe('swinging');
    expect(stateOf(air(21), bounds, 6)).toBe('fine');
  });

  it('takes limits themselves as still fine', () => {
    expect(stateOf(air(24, 65), bounds, 0)).toBe('fine');
    expect(stateOf(air(25, 65), bounds, 0)).toBe('above-band');
    expect(stateOf(air(18, null), bounds, 0)).toBe('fine');
  });

  it('is asked of ten-minute means only where one mean can tell', () => {
    expect(cellAgrees('heat', air(25.2), bounds)).toBe(true);
    expect(cellAgrees('cold', air(25.2), bounds)).toBe(false);
    expect(cellAgrees('fine', air(21, 70), bounds)).toBe(false);
    expect(cellAgrees('fine', air(24.5), bounds)).toBe(false);
    expect(cellAgrees('above-band', air(24.5), bounds)).toBe(true);
    expect(cellAgrees('damp', air(21, null), bounds)).toBeNull();
    expect(cellAgrees('swinging', air(21), bounds)).toBeNull();
  });

  it('is stale after three intervals, but not before a quarter of an hour', () => {
    expect(staleAfterMs(60)).toBe(15 * 60_000);
    expect(staleAfterMs(600)).toBe(30 * 60_000);
  });
});
