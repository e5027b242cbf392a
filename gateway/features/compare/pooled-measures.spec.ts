import { describe, expect, it } from 'vitest';
import { poolMeasures } from './pooled-measures.js';

const cells = (celsius: readonly (number | null)[], day = '2026-05-04') =>
  celsius.map((value) => ({ celsius: value, humidity: value === null ? null : 50, day }));

describe('measures pooled over rooms', () => {
  it('count every observed ten minutes once, each against its own room’s band', () => {
    const pooled = poolMeasures([
      { cells: cells([20, 20, 20, null]), band: { low: 18, high: 24 } },
      { cells: cells([30]), band: { low: 18, high: 24 } },
    ]);
    expect(pooled.observedHours).toBeCloseTo(4 / 6, 12);
    expect(pooled.gapHours).toBeCloseTo(1 / 6, 12);
    expect(pooled.inBand).toBeCloseTo(0.75, 12);
    expect(pooled.meanCelsius).toBeCloseTo(22.5, 12);
    expect(pooled).toMatchObject({ minCelsius: 20, maxCelsius: 30, meanHumidity: 50, dailySwing: 0 });
  });

  it('give the mean kinetic temperature of all cells together', () => {
    // 20 °C for 18 parts and 30 °C for 6 parts: 23.6445 °C, computed from the stated formula by an independent script.
    const pooled = poolMeasures([
      { cells: cells(Array.from({ length: 18 }, () => 20)), band: { low: 18, high: 24 } },
      { cells: cells(Array.from({ length: 6 }, () => 30)), band: { low: 18, high: 24 } },
    ]);
    expect(pooled.meanKineticCelsius).toBeCloseTo(23.6445, 4);
  });

  it('have nothing to say without rooms', () => {
    expect(poolMeasures([])).toMatchObject({
      observedHours: 0,
      inBand: null,
      meanCelsius: null,
      maxCelsius: null,
    });
  });
});
