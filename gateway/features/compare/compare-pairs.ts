import type { z } from 'zod';
import type { StudioComparison, pairComparison } from '#shared/contract/compare';
import type { WaxFamilyName } from '#shared/cure/wax-families';
import { holm } from '#shared/statistics/holm';
import { meanInterval, summarise, welch } from '#shared/statistics/welch';

export type PairComparison = z.infer<typeof pairComparison>;

/** Days over nominal of one batch. */
export interface BatchOverNominal {
  readonly studioId: string;
  readonly family: WaxFamilyName;
  readonly daysOver: number;
}

/** Fewer batches than this in either studio are not compared. */
export const ENOUGH_BATCHES = 8;
const CLEAR = 0.05;

/** Mean of each wax family with its 95 % interval; a single batch has no interval. */
export function overNominalByFamily(
  batches: readonly BatchOverNominal[],
): StudioComparison['daysOverNominal'] {
  return [...byFamily(batches)].map(([waxFamily, values]) => {
    if (values.length < 2)
      return { waxFamily, n: values.length, mean: values[0] ?? null, low: null, high: null };
    const summary = summarise(values);
    return { waxFamily, n: summary.n, mean: summary.mean, ...meanInterval(summary) };
  });
}

/**
 * Every two studios that both cured a wax family, by Welch's test on their batches' days over nominal; p adjusted after Holm over
 * all pairs that have enough batches. The difference is that of studio A less studio B, in days.
 */
export function comparePairs(
  studioIds: readonly string[],
  batches: readonly BatchOverNominal[],
): PairComparison[] {
  const pairs: {
    head: Pick<PairComparison, 'waxFamily' | 'studioA' | 'studioB'>;
    a: number[];
    b: number[];
  }[] = [];
  for (const waxFamily of byFamily(batches).keys()) {
    const of = (studioId: string) =>
      batches
        .filter((batch) => batch.studioId === studioId && batch.family === waxFamily)
        .map((batch) => batch.daysOver);
    for (const [index, studioA] of studioIds.entries())
      for (const studioB of studioIds.slice(index + 1)) {
        const [a, b] = [of(studioA), of(studioB)];
        if (a.length > 0 && b.length > 0) pairs.push({ head: { waxFamily, studioA, studioB }, a, b });
      }
  }
  const tested = pairs
    .filter(({ a, b }) => a.length >= ENOUGH_BATCHES && b.length >= ENOUGH_BATCHES)
    .map((pair) => ({ pair, result: welch(summarise(pair.a), summarise(pair.b)) }));
  const adjusted = holm(tested.map(({ result }) => result.p));
  return pairs.map((pair) => {
    const index = tested.findIndex((test) => test.pair === pair);
    const result = tested[index]?.result;
    if (!result) {
      const nothing = { difference: null, low: null, high: null, pAdjusted: null };
      return { ...pair.head, verdict: 'too-few', ...nothing };
    }
    const pAdjusted = adjusted[index] ?? 1;
    const { difference, low, high } = result;
    const verdict = pAdjusted < CLEAR ? 'different' : 'no-clear-difference';
    return { ...pair.head, verdict, difference, low, high, pAdjusted };
  });
}

function byFamily(batches: readonly BatchOverNominal[]): Map<WaxFamilyName, number[]> {
  const families = new Map<WaxFamilyName, number[]>();
  for (const { family, daysOver } of batches) {
    const values = families.get(family);
    if (values) values.push(daysOver);
    else families.set(family, [daysOver]);
  }
  return families;
}
