import type { z } from 'zod';
import type { PERIOD_MEASURES } from '#shared/contract/measures';
import { MeanKinetic } from '#shared/cure/mean-kinetic';
import { type MeasuredCell, measurePeriod } from '#shared/cure/period-measures';

/** The measures of one studio over a period. */
export type PooledMeasures = z.infer<z.ZodObject<typeof PERIOD_MEASURES>>;

export interface RoomCellsOfPeriod {
  readonly cells: readonly MeasuredCell[];
  readonly band: { readonly low: number; readonly high: number };
}

/**
 * Measures of several rooms taken together: each observed ten minutes of each room counts once, held against that room's own
 * band; the daily swing is the mean over the rooms' local days; swings are added up.
 */
export function poolMeasures(rooms: readonly RoomCellsOfPeriod[]): PooledMeasures {
  const kinetic = new MeanKinetic();
  const parts = rooms.map(({ cells, band }) => {
    const days = new Set<string>();
    let humid = 0;
    for (const { celsius, humidity, day } of cells) {
      if (humidity !== null) humid++;
      if (celsius === null) continue;
      kinetic.add(celsius);
      days.add(day);
    }
    return { ...measurePeriod(cells, band), days: days.size, humid };
  });
  const mean = (
    value: (part: (typeof parts)[number]) => number | null,
    weight: (part: (typeof parts)[number]) => number,
  ) => {
    let [sum, weights] = [0, 0];
    for (const part of parts) {
      const one = value(part);
      if (one === null) continue;
      sum += one * weight(part);
      weights += weight(part);
    }
    return weights === 0 ? null : sum / weights;
  };
  const total = (value: (part: (typeof parts)[number]) => number | null) =>
    parts.reduce<number | null>((sum, part) => {
      const one = value(part);
      return one === null ? sum : (sum ?? 0) + one;
    }, null);
  const edge = (
    value: (part: (typeof parts)[number]) => number | null,
    pick: (...values: number[]) => number,
  ) => {
    const known = parts.flatMap((part) => value(part) ?? []);
    return known.length === 0 ? null : pick(...known);
  };
  return {
    observedHours: total((part) => part.observedHours) ?? 0,
    gapHours: total((part) => part.gapHours) ?? 0,
    inBand: mean(
      (part) => part.inBand,
      (part) => part.observedHours,
    ),
    meanCelsius: mean(
      (part) => part.meanCelsius,
      (part) => part.observedHours,
    ),
    meanKineticCelsius: kinetic.celsius(),
    dailySwing: mean(
      (part) => part.dailySwing,
      (part) => part.days,
    ),
    swingsCounted: total((part) => part.swingsCounted),
    minCelsius: edge((part) => part.minCelsius, Math.min),
    maxCelsius: edge((part) => part.maxCelsius, Math.max),
    meanHumidity: mean(
      (part) => part.meanHumidity,
      (part) => part.humid,
    ),
  };
}
