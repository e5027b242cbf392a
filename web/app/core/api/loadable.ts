import { computed, signal } from '@angular/core';
import { sentenceOf } from './api-error';

/** Something that is loaded: its latest value, whether more is on its way, and what went wrong. */
export class Loadable<T> {
  private readonly writableValue = signal<T | null>(null);
  private readonly writableFault = signal<string | null>(null);
  private readonly pending = signal(0);
  private latest = 0;

  /** The latest value; stays while a newer one is loaded. */
  readonly value = this.writableValue.asReadonly();
  /** The sentence to show, or null. */
  readonly fault = this.writableFault.asReadonly();
  readonly loading = computed(() => this.pending() > 0);

  /** Loads anew. Answers that a later load has overtaken are dropped. Never throws. */
  async load(ask: () => Promise<T>): Promise<void> {
    const turn = ++this.latest;
    this.pending.update((count) => count + 1);
    try {
      const value = await ask();
      if (turn !== this.latest) return;
      this.writableValue.set(value);
      this.writableFault.set(null);
    } catch (error) {
      if (turn === this.latest) this.writableFault.set(sentenceOf(error));
    } finally {
      this.pending.update((count) => count - 1);
    }
  }

  /** Takes a value that came another way, e.g. as the answer to a change. */
  set(value: T): void {
    this.latest++;
    this.writableValue.set(value);
    this.writableFault.set(null);
  }

  /** Forgets the value. */
  clear(): void {
    this.latest++;
    this.writableValue.set(null);
    this.writableFault.set(null);
  }
}
