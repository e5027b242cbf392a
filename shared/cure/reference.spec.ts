import { describe, expect, it } from 'vitest';
import { biot, coolingHours, coolingTimeConstant, lumpedTime } from '#shared/cure/cooling';
import { integralVariance } from '#shared/cure/forecast';
import { frostingIndex, frostingLevel, swingDamage } from '#shared/cure/frosting';
import {
  avrami,
  avramiTime,
  daysToHardening,
  hardening,
  loadFactor,
  rate,
  scentSettled,
} from '#shared/cure/kinetics';
import { loadOfMix, loadOfWax, pourGrams } from '#shared/cure/load';
import { equivalentAge, nurseSaul } from '#shared/cure/maturity';
import { MeanKinetic } from '#shared/cure/mean-kinetic';
import { rainflow, RainflowCounter } from '#shared/cure/rainflow';
import { WAX_FAMILY_DEFAULTS, type WaxFamilyName } from '#shared/cure/wax-families';
import avramiReference from '../reference/avrami.json' with { type: 'json' };
import cooling from '../reference/cooling.json' with { type: 'json' };
import cure from '../reference/cure.json' with { type: 'json' };
import maturity from '../reference/maturity.json' with { type: 'json' };
import meanKinetic from '../reference/mean-kinetic.json' with { type: 'json' };
import rainflowReference from '../reference/rainflow.json' with { type: 'json' };

const off = (a: number, b: number) => Math.abs(a - b);

describe('equivalent age', () => {
  it('adds up as in the worked example', () => {
    const { steps, q, reference, hours, parts, tolerance } = maturity.worked;
    expect(off(equivalentAge(steps, q, reference), hours)).toBeLessThanOrEqual(tolerance);
    for (const [index, part] of parts.entries()) {
      expect(off(equivalentAge([steps[index]!], q, reference), part)).toBeLessThanOrEqual(tolerance);
    }
    for (const { datum, degreeHours } of maturity.worked.nurseSaul)
      expect(nurseSaul(steps, datum)).toBe(degreeHours);
    expect(nurseSaul(steps, 22)).toBe(12 * 3 + 24 * 8);
  });

  it.each(maturity.rates.rows)('rates at %d °C', (celsius, q5000, e50, e60) => {
    const { tolerance } = maturity.rates;
    const wax = (energy: number) => rate(celsius, { energy, capC: 27, softC: 38 });
    expect(off(equivalentAge([{ celsius: celsius, duration: 1 }], 5000, 20), q5000)).toBeLessThanOrEqual(
      tolerance,
    );
    expect(off(wax(50), e50)).toBeLessThanOrEqual(tolerance);
    expect(off(wax(60), e60)).toBeLessThanOrEqual(tolerance);
  });
});

describe('mean kinetic temperature', () => {
  it.each(meanKinetic.rows)('is $mkt °C', ({ readings, mkt }) => {
    const mean = new MeanKinetic();
    for (const [celsius, weight] of readings) mean.add(celsius!, weight);
    expect(off(mean.celsius()!, mkt)).toBeLessThanOrEqual(meanKinetic.tolerance);
  });

  it('does not exist without readings', () => {
    expect(new MeanKinetic().celsius()).toBeNull();
  });
});

describe('Avrami shape', () => {
  it.each(avramiReference.rows)('k $k, n $n', ({ k, n, x, half, t90 }) => {
    const { tolerance } = avramiReference;
    for (const [t, value] of Object.entries(x))
      expect(off(avrami(Number(t), k, n), value)).toBeLessThanOrEqual(tolerance);
    expect(off(avramiTime(0.5, k, n), half)).toBeLessThanOrEqual(tolerance);
    expect(off(avramiTime(0.9, k, n), t90)).toBeLessThanOrEqual(tolerance);
  });
});

describe('rainflow counting', () => {
  it.each(rainflowReference.rows)('$history ($source)', ({ history, counts }) => {
    const found: Record<string, number> = {};
    for (const { range, count } of rainflow(history)) found[range] = (found[range] ?? 0) + count;
    expect(found).toEqual(counts);
  });

  it('carries its stack: fed in pieces it counts the same, and a plateau changes nothing', () => {
    const history = [20, 24, 24, 24, 21, 27, 19, 23, 20, 20, 26, 18, 22, 20];
    const counter = new RainflowCounter();
    for (const value of history.slice(0, 6)) counter.push(value);
    counter.residual();
    for (const value of history.slice(6)) counter.push(value);
    const sum = (ranges: { range: number; count: number }[]) =>
      ranges.reduce((total, { range, count }) => total + count * range ** 2, 0);
    expect(sum([...counter.closed, ...counter.residual()])).toBe(sum(rainflow(history)));
  });
});

describe('wax families', () => {
  it.each(cure.families.rows)('%s hardens by day %d', (name, day, value) => {
    const { kinetics } = WAX_FAMILY_DEFAULTS[name as WaxFamilyName];
    const found = hardening(Number(day), kinetics.testDays, kinetics.hardeningAtTest, kinetics.exponent);
    expect(off(found, Number(value))).toBeLessThanOrEqual(cure.families.tolerance);
  });

  it('reach their hardening at the test day exactly, and the inverse leads back', () => {
    for (const { kinetics } of Object.values(WAX_FAMILY_DEFAULTS)) {
      const { testDays, hardeningAtTest, exponent } = kinetics;
      expect(hardening(testDays, testDays, hardeningAtTest, exponent)).toBeCloseTo(hardeningAtTest, 12);
      const days = daysToHardening(0.97, testDays, hardeningAtTest, exponent);
      expect(hardening(days, testDays, hardeningAtTest, exponent)).toBeCloseTo(0.97, 12);
    }
    expect(scentSettled(14, 14)).toBeCloseTo(0.9, 12);
    expect(daysToHardening(1, 14, 0.9, 0.5)).toBe(Infinity);
  });

  it('a load moves the days only when the wax says so, and never below a tenth', () => {
    const { kinetics } = WAX_FAMILY_DEFAULTS['soy-container'];
    expect(loadFactor(kinetics, 9)).toBe(1);
    expect(loadFactor({ ...kinetics, loadSensitivity: 0.05 }, 9)).toBeCloseTo(1.15, 12);
    expect(loadFactor({ ...kinetics, loadSensitivity: -0.2 }, 20)).toBe(0.1);
  });

  it('soy tested at 14 d is due for a re-check at the printed day', () => {
    const due = daysToHardening(0.95 + 1e-6, 14, 0.9, 0.5);
    expect(off(due, cure.recheckDay.days)).toBeLessThanOrEqual(cure.recheckDay.tolerance);
  });
});

describe('frosting index', () => {
  it.each(cure.frosting.rows)('DH %d, C %d (%s)', (degreeHours, cycles, prone, value) => {
    const found = frostingIndex(Number(degreeHours), Number(cycles), prone as 'yes' | 'slight');
    expect(off(found, Number(value))).toBeLessThanOrEqual(cure.frosting.tolerance);
  });

  it('is 0 for waxes that do not frost; small swings do not count', () => {
    expect(frostingIndex(100, 20, 'no')).toBe(0);
    expect(swingDamage({ range: 1.99, count: 1 })).toBe(0);
    expect(swingDamage({ range: 10, count: 0.5 })).toBe(2);
    expect([frostingLevel(24.9), frostingLevel(25), frostingLevel(60)]).toEqual(['low', 'watch', 'high']);
  });
});

describe('forecast', () => {
  it.each(cure.integralSd.rows)('sd of the temperature integral after %d h', (hours, sd) => {
    expect(off(Math.sqrt(integralVariance(hours, 0)), sd)).toBeLessThanOrEqual(cure.integralSd.tolerance);
  });

  it('adds the drift in squares and starts at nothing', () => {
    expect(integralVariance(0)).toBe(0);
    expect(integralVariance(24)).toBeCloseTo(integralVariance(24, 0) + 576, 9);
  });
});

describe('cooling after the pour', () => {
  it.each(cooling.spheres)('$source', ({ diameter, h, c, rho, from, to, around, seconds, tolerance }) => {
    const found = lumpedTime(coolingTimeConstant(rho, c, diameter / 6, h), from, to, around);
    expect(off(found, seconds)).toBeLessThanOrEqual(tolerance);
  });

  it.each(cooling.cylinder.rows)('a cylinder of $name', ({ wax, hours, k }) => {
    const { lengthMm, h, pour, room, endDifference, tolerance } = cooling.cylinder;
    const found = coolingHours(wax, lengthMm / 1000, h, pour, room, endDifference);
    for (const [index, value] of [found.liquid, found.plateau, found.solid, found.total].entries()) {
      expect(off(value, hours[index]!)).toBeLessThanOrEqual(tolerance);
    }
    // Above 0.1: the lumped model is a lower bound.
    expect(biot(h, lengthMm / 1000, k)).toBeGreaterThan(0.6);
    expect(biot(h, lengthMm / 1000, k)).toBeLessThan(0.76);
  });
});

describe('fragrance load, both ways', () => {
  it('per cent of wax and per cent of the finished mix', () => {
    expect(loadOfMix(10)).toBeCloseTo(100 / 11, 12);
    expect(loadOfWax(loadOfMix(8))).toBeCloseTo(8, 12);
    const { wax, fragrance } = pourGrams(220, 12, 10);
    expect(wax).toBeCloseTo(2400, 9);
    expect(fragrance).toBeCloseTo(240, 9);
  });
});
