/** How far it is, on one line of a terminal or now and then in a log. */
export class Progress {
  #done = 0;
  #shown = 0;

  constructor(private readonly total: number) {}

  add(count: number): void {
    this.#done += count;
    const now = performance.now();
    if (now - this.#shown < (process.stdout.isTTY ? 200 : 5000)) return;
    this.#shown = now;
    process.stdout.write(
      `${process.stdout.isTTY ? '\r' : ''}${this.#words()}${process.stdout.isTTY ? '' : '\n'}`,
    );
  }

  end(): void {
    process.stdout.write(`${process.stdout.isTTY ? '\r' : ''}${this.#words()}\n`);
  }

  #words(): string {
    return `${this.#done} of ${this.total} readings acknowledged (${Math.floor((100 * this.#done) / this.total)} %)`;
  }
}
