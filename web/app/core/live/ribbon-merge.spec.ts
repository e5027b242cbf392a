import { mergedRibbon } from './ribbon-merge';

const at = (minutes: number) => new Date(Date.UTC(2026, 4, 4) + minutes * 60_000).toISOString();

describe('a ribbon that is continued', () => {
  it('appends a cell that follows', () => {
    const merged = mergedRibbon({ from: at(0), celsius: [20, 21] }, { from: at(20), celsius: [22] });
    expect(merged).toEqual({ from: at(0), celsius: [20, 21, 22] });
  });

  it('fills cells that nobody sent with a gap', () => {
    const merged = mergedRibbon({ from: at(0), celsius: [20] }, { from: at(30), celsius: [23] });
    expect(merged.celsius).toEqual([20, null, null, 23]);
  });

  it('replaces cells that are known better now', () => {
    const merged = mergedRibbon({ from: at(0), celsius: [20, null, 22] }, { from: at(10), celsius: [21] });
    expect(merged.celsius).toEqual([20, 21, 22]);
  });

  it('keeps the last 24 hours', () => {
    const day = Array.from({ length: 145 }, (_, index) => index);
    const merged = mergedRibbon({ from: at(0), celsius: day }, { from: at(1450), celsius: [99] });
    expect(merged.celsius).toHaveLength(145);
    expect(merged.from).toBe(at(10));
    expect(merged.celsius.at(-1)).toBe(99);
  });

  it('takes one that began earlier, or long after, as it comes', () => {
    const before = { from: at(0), celsius: [20] };
    expect(mergedRibbon(before, { from: at(-60), celsius: [18, 19] }).celsius).toEqual([18, 19]);
    expect(mergedRibbon(before, { from: at(60 * 24 * 30), celsius: [17] }).celsius).toEqual([17]);
  });
});
