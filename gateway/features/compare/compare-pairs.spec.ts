import { describe, expect, it } from 'vitest';
import { type BatchOverNominal, comparePairs, overNominalByFamily } from './compare-pairs.js';

const batches = (
  studioId: string,
  days: readonly number[],
  family: BatchOverNominal['family'] = 'soy-container',
): BatchOverNominal[] => days.map((daysOver) => ({ studioId, family, daysOver }));

/** Days over nominal of two studios, each with too few batches for a verdict. */
const A6 = [0.2, -0.2, 0.9, 1.1, 0.4, -0.1];
const B7 = [1.6, 2.1, 1, 3.2, 1.8, 2.4, 1.2];

describe('pairs of studios', () => {
  it('are not compared with fewer than eight batches in either', () => {
    const [pair] = comparePairs(['a', 'b'], [...batches('a', A6), ...batches('b', B7)]);
    expect(pair).toEqual({
      waxFamily: 'soy-container',
      studioA: 'a',
      studioB: 'b',
      verdict: 'too-few',
      difference: null,
      low: null,
      high: null,
      pAdjusted: null,
    });
  });

  it('differ clearly, or not, with their difference in days and its interval', () => {
    // Computed by scipy and by @stdlib/stats-ttest2: t −2.855633, df 27.861131, p .0080237.
    const a = [27.5, 21, 19, 23.6, 17, 17.9, 16.9, 20.1, 21.9, 22.6, 23.1, 19.6, 19, 21.7, 21.4];
    const b = [27.1, 22, 20.8, 23.4, 23.4, 23.5, 25.8, 22, 24.8, 20.2, 21.9, 22.1, 22.9, 30.4, 24.4];
    const [pair] = comparePairs(['a', 'b'], [...batches('a', a), ...batches('b', b)]);
    expect(pair?.verdict).toBe('different');
    expect(pair?.pAdjusted).toBeCloseTo(0.0080237, 6);
    expect(pair?.difference).toBeCloseTo(-2.8267, 4);
    expect(pair?.low).toBeLessThan(pair?.difference ?? 0);
    const [same] = comparePairs(['a', 'b'], [...batches('a', a), ...batches('b', [...a].reverse())]);
    expect(same).toMatchObject({ verdict: 'no-clear-difference', difference: 0, pAdjusted: 1 });
  });

  it('are adjusted after Holm over all pairs: what is clear alone may not be clear among many', () => {
    const a = [27.5, 21, 19, 23.6, 17, 17.9, 16.9, 20.1, 21.9, 22.6, 23.1, 19.6, 19, 21.7, 21.4];
    const b = [27.1, 22, 20.8, 23.4, 23.4, 23.5, 25.8, 22, 24.8, 20.2, 21.9, 22.1, 22.9, 30.4, 24.4];
    const others = ['c', 'd', 'e', 'f'].flatMap((studio) => batches(studio, a));
    const pairs = comparePairs(
      ['a', 'b', 'c', 'd', 'e', 'f'],
      [...batches('a', a), ...batches('b', b), ...others],
    );
    expect(pairs).toHaveLength(15);
    const ab = pairs.find(({ studioA, studioB }) => studioA === 'a' && studioB === 'b');
    expect(ab?.pAdjusted).toBeCloseTo(15 * 0.0080237, 4);
    expect(ab?.verdict).toBe('no-clear-difference');
  });

  it('match the wax family and leave out studios that did not cure it', () => {
    const pairs = comparePairs(
      ['a', 'b', 'c'],
      [...batches('a', A6), ...batches('b', B7, 'palm'), ...batches('c', A6)],
    );
    expect(pairs.map(({ waxFamily, studioA, studioB }) => [waxFamily, studioA, studioB])).toEqual([
      ['soy-container', 'a', 'c'],
    ]);
  });
});

describe('days over nominal', () => {
  it('come as mean with its 95 % interval, a single batch without', () => {
    const [soy] = overNominalByFamily(batches('a', [1, 2, 3]));
    // t(0.975, 2) = 4.302653 (table value from memory), sd 1, n 3.
    expect(soy).toMatchObject({ waxFamily: 'soy-container', n: 3, mean: 2 });
    expect(soy?.high).toBeCloseTo(2 + 4.302653 / Math.sqrt(3), 5);
    expect(overNominalByFamily(batches('a', [1.5]))).toEqual([
      { waxFamily: 'soy-container', n: 1, mean: 1.5, low: null, high: null },
    ]);
    expect(overNominalByFamily([])).toEqual([]);
  });
});
