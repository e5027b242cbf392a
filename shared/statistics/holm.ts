/** Holm's step-down adjustment of p values (Holm 1979), in the order given; each at most 1 and never below a smaller one's. */
export function holm(pValues: readonly number[]): number[] {
  const order = pValues.map((p, index) => ({ p, index })).sort((a, b) => a.p - b.p);
  const adjusted = new Array<number>(pValues.length).fill(1);
  let highest = 0;
  for (const [rank, { p, index }] of order.entries()) {
    highest = Math.max(highest, Math.min(1, (pValues.length - rank) * p));
    adjusted[index] = highest;
  }
  return adjusted;
}
