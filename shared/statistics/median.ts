/** Median: the middle value, or the mean of the two middle ones. @throws RangeError for an empty list */
export function median(values: readonly number[]): number {
  // Typed arrays sort by number without asking a function for every pair.
  return medianOfSorted(Float64Array.from(values).sort());
}

function medianOfSorted(sorted: Float64Array): number {
  const middle = sorted.length >> 1;
  const upper = sorted[middle];
  if (upper === undefined) throw new RangeError('The median of no values does not exist.');
  if (sorted.length % 2 === 1) return upper;
  return ((sorted[middle - 1] ?? upper) + upper) / 2;
}

/** Median absolute deviation from the median, unscaled. Multiply by 1.4826 for the sd of a normal sample. */
export function medianAbsoluteDeviation(values: readonly number[]): number {
  const centre = median(values);
  return median(values.map((value) => Math.abs(value - centre)));
}
