/** A typed one-to-many announcement inside the gateway. A listener that throws is reported and does not stop the others. */
export class Feed<T> {
  readonly #listeners = new Set<(value: T) => void>();

  constructor(private readonly failed: (error: unknown) => void = () => undefined) {}

  /** Adds a listener; the returned function takes it off again. */
  listen(listener: (value: T) => void): () => void {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  }

  announce(value: T): void {
    for (const listener of this.#listeners) {
      try {
        listener(value);
      } catch (error) {
        this.failed(error);
      }
    }
  }
}
