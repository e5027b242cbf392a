import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import {
  absoluteHumidity,
  dewPoint,
  humidityRatio,
  magnusDewPoint,
  magnusSaturationPressure,
  relativeHumidity,
  saturationPressure,
} from '#shared/air/moist-air';
import reference from '../reference/moist-air.json' with { type: 'json' };

const { saturation, points } = reference;

describe('saturation vapour pressure', () => {
  it.each(saturation.rows)('at %d °C agrees with the tables', (celsius, magnus, ashrae, iapws, steam) => {
    expect(Math.abs(magnusSaturationPressure(celsius) - magnus)).toBeLessThanOrEqual(
      saturation.tolerance.magnusToPrinted,
    );
    expect(Math.abs(saturationPressure(celsius) - ashrae)).toBeLessThanOrEqual(
      saturation.tolerance.ashraeToPsychrolib,
    );
    expect(Math.abs(saturationPressure(celsius) / iapws - 1)).toBeLessThanOrEqual(
      saturation.tolerance.ashraeToIapwsRelative,
    );
    // The steam table's first row is at 0.01 °C.
    const inSteamTable = celsius === 0 ? 0.01 : celsius;
    expect(Math.abs(magnusSaturationPressure(inSteamTable) / steam - 1)).toBeLessThanOrEqual(
      saturation.tolerance.magnusToSteamTableRelative,
    );
  });
});

describe('dew point, humidity ratio, absolute humidity', () => {
  it.each(points.rows)('at %d °C and %d %%', (celsius, humidity, magnus, ashrae, ratio, absolute) => {
    expect(Math.abs(magnusDewPoint(celsius, humidity) - magnus)).toBeLessThanOrEqual(
      points.tolerance.dewPoint,
    );
    expect(Math.abs(dewPoint(celsius, humidity) - ashrae)).toBeLessThanOrEqual(points.tolerance.dewPoint);
    expect(Math.abs(humidityRatio(celsius, humidity) - ratio)).toBeLessThanOrEqual(
      points.tolerance.humidityRatio,
    );
    expect(Math.abs(absoluteHumidity(celsius, humidity) - absolute)).toBeLessThanOrEqual(
      points.tolerance.absoluteHumidity,
    );
  });

  it('gives back the relative humidity a ratio came from', () => {
    expect(relativeHumidity(22.5, humidityRatio(22.5, 61, 985), 985)).toBeCloseTo(61, 8);
  });

  it('takes bone-dry air and refuses what is no air', () => {
    expect(dewPoint(21, 0)).toBeLessThan(-40);
    expect(() => dewPoint(21, 101)).toThrow(/humidity/);
    expect(() => dewPoint(NaN, 50)).toThrow(/Temperature/);
  });
});

describe('an office recorded over a week (Candanedo 2016, CC BY 4.0)', () => {
  const rows = readFileSync(new URL('../reference/occupancy-excerpt.csv', import.meta.url), 'utf8')
    .trim()
    .split('\n')
    .slice(2)
    .map((line) => line.split(',').slice(1).map(Number));

  it('has the published humidity ratio in every row, to 3e-7 kg/kg at 101 325 Pa', () => {
    expect(rows.length).toBeGreaterThan(200);
    const worst = rows.map(([celsius, humidity, ratio]) =>
      Math.abs(humidityRatio(celsius!, humidity!) - ratio!),
    );
    expect(Math.max(...worst)).toBeLessThanOrEqual(3e-7);
  });
});
