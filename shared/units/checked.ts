/** Thrown when a quantity lies outside the range an equation is valid in, or is not a number. */
export class QuantityError extends RangeError {
  override readonly name = 'QuantityError';
}

/**
 * Returns a quantity that lies within its valid range.
 * @throws QuantityError otherwise; the comparison is written so that NaN fails
 */
export function within(value: number, lowest: number, highest: number, what: string): number {
  if (!(value >= lowest && value <= highest)) {
    throw new QuantityError(`${what} must lie between ${lowest} and ${highest}; got ${value}.`);
  }
  return value;
}
