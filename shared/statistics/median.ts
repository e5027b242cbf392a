/** Median: the middle value, or the mean of the two middle ones. @throws RangeError for an empty list */
export function median(values: readonly number[]): number {
  return medianInPlace(new Float64Array(values));
}

/** The same of a buffer that may be put into another order: quick for many long lists. @throws RangeError for an empty one */
export function medianInPlace(values: Float64Array): number {
  const n = values.length;
  if (n === 0) throw new RangeError('The median of no values does not exist.');
  const middle = n >> 1;
  const upper = select(values, middle);
  if (n % 2 === 1) return upper;
  // What lies before the middle is not greater than it: the largest of that is its neighbour.
  let lower = -Infinity;
  for (let index = 0; index < middle; index++) lower = Math.max(lower, values[index] ?? -Infinity);
  return (lower + upper) / 2;
}

/** Median absolute deviation from the median, unscaled. Multiply by 1.4826 for the sd of a normal sample. */
export function medianAbsoluteDeviation(values: readonly number[]): number {
  return medianAbsoluteDeviationInPlace(new Float64Array(values));
}

/** The same of a buffer whose contents are lost. @throws RangeError for an empty one */
export function medianAbsoluteDeviationInPlace(values: Float64Array): number {
  const centre = medianInPlace(values);
  for (let index = 0; index < values.length; index++) values[index] = Math.abs((values[index] ?? 0) - centre);
  return medianInPlace(values);
}

/**
 * The value that would stand at `place` if the buffer were sorted; smaller ones are moved before it, greater ones after it
 * (quickselect with the median of three as pivot, Hoare 1961).
 */
function select(values: Float64Array, place: number): number {
  const at = (index: number) => values[index] ?? Number.NaN;
  let [low, high] = [0, values.length - 1];
  while (low < high) {
    const pivot = middleOf(at(low), at((low + high) >> 1), at(high));
    let [left, right] = [low, high];
    while (left <= right) {
      while (at(left) < pivot) left++;
      while (at(right) > pivot) right--;
      if (left > right) break;
      const swapped = at(left);
      values[left] = at(right);
      values[right] = swapped;
      left++;
      right--;
    }
    if (place <= right) high = right;
    else if (place >= left) low = left;
    else break;
  }
  return at(place);
}

function middleOf(a: number, b: number, c: number): number {
  return Math.max(Math.min(a, b), Math.min(Math.max(a, b), c));
}
