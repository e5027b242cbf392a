import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { median, medianAbsoluteDeviation, medianInPlace } from '#shared/statistics/median';

const numbers = fc.array(
  fc.oneof(fc.double({ min: -50, max: 50, noNaN: true }), fc.constantFrom(0, 1, 1, 21.5)),
  { minLength: 1, maxLength: 120 },
);

/** By sorting everything, as the definition says. */
function bySorting(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  const upper = sorted[middle] ?? Number.NaN;
  return sorted.length % 2 === 1 ? upper : ((sorted[middle - 1] ?? Number.NaN) + upper) / 2;
}

describe('median by selection', () => {
  it('equals the median by sorting, ties and all, and leaves the list alone', () => {
    fc.assert(
      fc.property(numbers, (values) => {
        const before = [...values];
        expect(median(values) + 0).toBe(bySorting(values) + 0);
        expect(values).toEqual(before);
        const deviations = values.map((value) => Math.abs(value - bySorting(values)));
        expect(medianAbsoluteDeviation(values)).toBe(bySorting(deviations));
      }),
      { numRuns: 500 },
    );
  });

  it('of nothing does not exist', () => {
    expect(() => median([])).toThrow(RangeError);
    expect(() => medianInPlace(new Float64Array(0))).toThrow(RangeError);
  });

  it('handles a long list that is sorted, or all alike', () => {
    expect(medianInPlace(Float64Array.from({ length: 2016 }, (_, index) => index))).toBe(1007.5);
    expect(medianInPlace(new Float64Array(2016).fill(21))).toBe(21);
  });
});
