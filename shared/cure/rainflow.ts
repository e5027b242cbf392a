/** One counted range: 1 for a closed cycle, ½ for an open one. */
export interface CountedRange {
  readonly range: number;
  readonly count: 0.5 | 1;
}

/**
 * Rainflow counting after ASTM E1049-85(2017) §5.4.4, fed one value at a time; plateaus are collapsed.
 * The stack is carried from value to value, so a year of readings costs no more per reading than a day.
 */
export class RainflowCounter {
  readonly #reversals: number[] = [];
  #last: number | null = null;
  #direction = 0;
  readonly #closed: CountedRange[] = [];

  constructor(private readonly onCounted: ((range: CountedRange) => void) | null = null) {}

  /** Takes the next value of the history. */
  push(value: number): void {
    if (this.#last === null) {
      this.#reversals.push(value);
      this.#last = value;
      return;
    }
    const direction = Math.sign(value - this.#last);
    if (direction === 0) return;
    if (this.#direction !== 0 && direction !== this.#direction) {
      this.#reversals.push(this.#last);
      this.#close(this.#reversals);
    }
    this.#direction = direction;
    this.#last = value;
  }

  /** Ranges closed so far (only when no listener was given). */
  get closed(): readonly CountedRange[] {
    return this.#closed;
  }

  /**
   * What remains if the history ended now: the open end is closed as far as it goes, then every remaining range counts ½.
   * Does not change the counter.
   */
  residual(): CountedRange[] {
    const stack = [...this.#reversals];
    const counted: CountedRange[] = [];
    if (this.#last !== null && this.#direction !== 0) {
      stack.push(this.#last);
      closeRanges(stack, (range) => counted.push(range));
    }
    for (let index = 1; index < stack.length; index++) {
      counted.push({ range: Math.abs((stack[index] ?? 0) - (stack[index - 1] ?? 0)), count: 0.5 });
    }
    return counted;
  }

  #close(stack: number[]): void {
    closeRanges(stack, (range) => {
      if (this.onCounted) this.onCounted(range);
      else this.#closed.push(range);
    });
  }
}

/** Applies the three-point rule until it asks for more data: X the newest range, Y the one before. */
function closeRanges(stack: number[], counted: (range: CountedRange) => void): void {
  while (stack.length >= 3) {
    const top = stack.length - 1;
    const x = Math.abs((stack[top] ?? 0) - (stack[top - 1] ?? 0));
    const y = Math.abs((stack[top - 1] ?? 0) - (stack[top - 2] ?? 0));
    if (x < y) return;
    if (stack.length === 3) {
      counted({ range: y, count: 0.5 });
      stack.shift();
    } else {
      counted({ range: y, count: 1 });
      stack.splice(top - 2, 2);
    }
  }
}

/** All ranges of a whole history. Worked value: 0, 2, 1, 3, 0 → 1 (once), 3 (once, as two halves). */
export function rainflow(history: Iterable<number>): CountedRange[] {
  const counter = new RainflowCounter();
  for (const value of history) counter.push(value);
  return [...counter.closed, ...counter.residual()];
}
