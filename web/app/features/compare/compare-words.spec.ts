import { describe, expect, it } from 'vitest';
import type { PairComparison } from '#shared/contract/compare';
import { csvCell, pairSentence, tooFewSentence } from './compare-words';

const pair = (change: Partial<PairComparison>): PairComparison => ({
  ...{ waxFamily: 'soy-container', studioA: 'a', studioB: 'b', verdict: 'different' },
  ...{ difference: -1.516, low: -2.3034, high: -0.73, pAdjusted: 0.0014 },
  ...change,
});
const nameOf = (id: string) => (id === 'a' ? 'Quay Street' : 'High Barn');

describe('what may be said of two studios', () => {
  it('tells the difference with its interval', () => {
    expect(pairSentence(pair({}), nameOf, 'soy')).toBe(
      'soy: batches take 1.52 days shorter in Quay Street than in High Barn (95 %: −2.30 to −0.73 days, adjusted p 0.001).',
    );
  });

  it('claims nothing where nothing is clear, or with too few batches', () => {
    expect(pairSentence(pair({ verdict: 'no-clear-difference' }), nameOf, 'soy')).toMatch(
      /no clear difference/,
    );
    expect(tooFewSentence(3)).toMatch(/^For 3 pairs .* too few batches/);
  });
});

describe('CSV cells', () => {
  it.each([
    ['=1+1', "'=1+1"],
    ['-x', "'-x"],
    ['a,b', '"a,b"'],
    ['say "hi"', '"say ""hi"""'],
  ])('%s is written %s', (value, written) => {
    expect(csvCell(value)).toBe(written);
  });

  it('keeps numbers, also negative ones', () => {
    expect(csvCell(-1.5)).toBe('-1.5');
    expect(csvCell(null)).toBe('');
  });
});
