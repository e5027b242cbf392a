import { CELLS_PER_HOUR } from '#shared/cure/grid';
import { MeanKinetic } from '#shared/cure/mean-kinetic';
import { SMALLEST_SWING } from '#shared/cure/frosting';
import { rainflow } from '#shared/cure/rainflow';

/** One ten-minute cell of a room; null where nothing was observed. */
export interface MeasuredCell {
  readonly celsius: number | null;
  readonly humidity: number | null;
  /** Which local day of the studio the cell belongs to, e.g. 2026-05-04. */
  readonly day: string;
}

export interface PeriodMeasures {
  readonly observedHours: number;
  readonly gapHours: number;
  readonly inBand: number | null;
  readonly meanCelsius: number | null;
  readonly meanKineticCelsius: number | null;
  readonly dailySwing: number | null;
  readonly swingsCounted: number | null;
  readonly minCelsius: number | null;
  readonly maxCelsius: number | null;
  readonly meanHumidity: number | null;
}

/**
 * What a room has done over a period, from its ten-minute means: share of observed time in the band (edges included), mean and
 * mean kinetic temperature, mean of the local days' ranges in K, and swings of at least 2 K counted by rainflow.
 */
export function measurePeriod(
  cells: Iterable<MeasuredCell>,
  band: { readonly low: number; readonly high: number },
): PeriodMeasures {
  const kinetic = new MeanKinetic();
  const days = new Map<string, { low: number; high: number }>();
  const observed: number[] = [];
  let [gaps, inside, sum, humidSum, humidCount] = [0, 0, 0, 0, 0];
  for (const { celsius, humidity, day } of cells) {
    if (humidity !== null) {
      humidSum += humidity;
      humidCount++;
    }
    if (celsius === null) {
      gaps++;
      continue;
    }
    observed.push(celsius);
    sum += celsius;
    kinetic.add(celsius);
    if (celsius >= band.low && celsius <= band.high) inside++;
    const range = days.get(day);
    if (range === undefined) days.set(day, { low: celsius, high: celsius });
    else days.set(day, { low: Math.min(range.low, celsius), high: Math.max(range.high, celsius) });
  }
  const n = observed.length;
  const orNull = (value: number) => (n === 0 ? null : value);
  const ranges = [...days.values()].map(({ low, high }) => high - low);
  return {
    observedHours: n / CELLS_PER_HOUR,
    gapHours: gaps / CELLS_PER_HOUR,
    inBand: orNull(inside / n),
    meanCelsius: orNull(sum / n),
    meanKineticCelsius: kinetic.celsius(),
    dailySwing: orNull(ranges.reduce((total, range) => total + range, 0) / ranges.length),
    swingsCounted: orNull(
      rainflow(observed)
        .filter(({ range }) => range >= SMALLEST_SWING)
        .reduce((total, { count }) => total + count, 0),
    ),
    minCelsius: orNull(observed.reduce((low, value) => Math.min(low, value), Infinity)),
    maxCelsius: orNull(observed.reduce((high, value) => Math.max(high, value), -Infinity)),
    meanHumidity: humidCount === 0 ? null : humidSum / humidCount,
  };
}
