/** Prefix sums over a sequence that grows at its end and is now and then rebuilt from some place on. */
export class GrowingSum {
  #sums = new Float64Array(1024);
  #known = 0;

  /** @param term the value at an index; must be defined for every index asked for */
  constructor(private readonly term: (index: number) => number) {}

  /** Σ of the terms in [from, to). */
  between(from: number, to: number): number {
    this.#grow(Math.max(from, to));
    return (this.#sums[to] ?? NaN) - (this.#sums[from] ?? NaN);
  }

  /** Forgets the sums that contain the term at `index` or a later one. */
  forgetFrom(index: number): void {
    this.#known = Math.min(this.#known, index);
  }

  #grow(to: number): void {
    if (to >= this.#sums.length) {
      const grown = new Float64Array(Math.max(to + 1, this.#sums.length * 2));
      grown.set(this.#sums);
      this.#sums = grown;
    }
    for (let index = this.#known; index < to; index++) {
      this.#sums[index + 1] = (this.#sums[index] ?? 0) + this.term(index);
    }
    this.#known = Math.max(this.#known, to);
  }
}
