import { describe, expect, it } from 'vitest';
import { humidityRatio } from '#shared/air/moist-air';
import { humidityOf, type RoomBuild, type RoomState, settledRoom, stepRoom } from './room-model.js';
import { gaussian, hashed, smoothNoise } from './seeded-noise.js';
import { measure, payloadOf } from './sensor-model.js';
import { outsideCelsius } from './weather.js';

const MIDNIGHT = Date.parse('2026-05-04T00:00:00Z');
const HOUR = 3_600_000;
const BARE: RoomBuild = {
  seed: 1,
  timeConstant: 10,
  gain: 0,
  exposure: 1,
  house: 20,
  heatTo: null,
  heater: 0,
  coolTo: null,
  cooler: 0,
  airing: 2,
  moisture: 0,
};
const NO_PUSH = { heat: 0, moisture: 0 };
const OUTSIDE = { celsius: 10, humidity: 60 };
const from = (celsius: number): RoomState => ({ celsius, ratio: 0.006, heating: false, cooling: false });

describe('a room', () => {
  it('follows the analytic step response of a first-order body', () => {
    let state = from(20);
    // At night no door opens.
    for (let minute = 0; minute < 300; minute++)
      state = stepRoom(BARE, state, MIDNIGHT + minute * 60_000, 60_000, OUTSIDE, NO_PUSH);
    expect(state.celsius).toBeCloseTo(10 + 10 * Math.exp(-5 / 10), 9);
    const inOneStep = stepRoom(BARE, from(20), MIDNIGHT, 5 * HOUR, OUTSIDE, NO_PUSH);
    expect(inOneStep.celsius).toBeCloseTo(state.celsius, 9);
  });

  it('keeps its thermostats within their hysteresis', () => {
    const heated = { ...BARE, heatTo: 20, heater: 6 };
    let state = from(14);
    const seen: number[] = [];
    for (let minute = 0; minute < 12 * 60; minute++) {
      state = stepRoom(heated, state, MIDNIGHT, 60_000, OUTSIDE, NO_PUSH);
      if (minute > 6 * 60) seen.push(state.celsius);
    }
    expect(Math.min(...seen)).toBeGreaterThan(19.6);
    expect(Math.max(...seen)).toBeLessThan(20.4);
  });

  it('a push of 4 K/h warms it by about that in an hour', () => {
    const after = stepRoom(BARE, from(10), MIDNIGHT, HOUR, OUTSIDE, { heat: 4, moisture: 0 });
    expect(after.celsius).toBeCloseTo(10 + 40 * (1 - Math.exp(-0.1)), 9);
  });

  it('settles at the outside’s moisture, warmer air being relatively drier', () => {
    const state = settledRoom({ ...BARE, exposure: 0, gain: 1 }, 10, humidityRatio(10, 60));
    expect(state.celsius).toBe(21);
    expect(humidityOf(state)).toBeCloseTo(29.6, 0);
  });
});

describe('seeded noise', () => {
  it('is the same for ever, spread evenly, and of sd 1 where it should be', () => {
    expect(hashed(1, 2, 3)).toBe(hashed(1, 2, 3));
    const values = Array.from({ length: 4000 }, (_, index) => gaussian(42, index));
    const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
    const variance = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / values.length;
    expect(Math.abs(mean)).toBeLessThan(0.06);
    expect(Math.abs(variance - 1)).toBeLessThan(0.08);
    expect(Math.abs(smoothNoise(3, 7.001) - smoothNoise(3, 7))).toBeLessThan(0.001);
  });

  it('weather has seasons, and a spell warms it', () => {
    const climate = { seed: 9, mean: 12, season: 9, day: 4, fronts: 0, hoursAhead: 0, humidity: 70 };
    const noon = (date: string) => outsideCelsius(climate, Date.parse(`${date}T12:00:00Z`));
    expect(noon('2026-07-24')).toBeGreaterThan(noon('2026-01-24') + 12);
    const at = Date.parse('2026-07-24T12:00:00Z');
    const spell = { from: at - 48 * HOUR, to: at + 48 * HOUR, warmer: 6 };
    expect(outsideCelsius(climate, at, [spell]) - outsideCelsius(climate, at)).toBeCloseTo(6, 9);
  });
});

describe('a sensor', () => {
  const build = { deviceId: 'spec-1', bias: 0.2, noise: 0.05 };
  const air = { celsius: 20, humidity: 50 };

  it('is reproducible and close to the truth plus its bias', () => {
    const reading = measure(build, air, MIDNIGHT, null);
    expect(reading).toEqual(measure(build, air, MIDNIGHT, null));
    expect(Math.abs(reading!.celsius - 20.2)).toBeLessThan(0.3);
    expect(JSON.parse(payloadOf([reading!]))).toMatchObject({ at: '2026-05-04T00:00:00.000Z' });
  });

  it('shows each fault', () => {
    const with_ = (fault: Parameters<typeof measure>[3]) => measure(build, air, MIDNIGHT, fault);
    const since = MIDNIGHT - 10 * 24 * HOUR;
    expect(with_({ fault: 'silent', since })).toBeNull();
    expect(with_({ fault: 'stuck', since })?.celsius).toBe(20.6);
    expect(with_({ fault: 'drifting', since })!.celsius).toBeGreaterThan(20.7);
    expect(with_({ fault: 'wrong-clock', since })!.at).toBe(MIDNIGHT + 3 * HOUR);
    expect(with_({ fault: 'battery-low', since })!.battery).toBeLessThan(15);
    const spiking = Array.from({ length: 200 }, (_, second) =>
      measure(build, air, MIDNIGHT + second * 1000, { fault: 'spiking', since }),
    );
    expect(spiking.filter((reading) => reading!.celsius > 25).length).toBeGreaterThan(3);
  });
});
