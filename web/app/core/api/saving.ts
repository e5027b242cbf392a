import { signal } from '@angular/core';
import type { AbstractControl } from '@angular/forms';
import { sentenceOf, showFieldErrors } from './api-error';

/** Sending what somebody filled in: one at a time, what is wrong shown beside its field or as a sentence. */
export class Saving {
  private readonly writableBusy = signal(false);
  private readonly writableFault = signal<string | null>(null);

  readonly busy = this.writableBusy.asReadonly();
  /** The sentence for what belongs to no field, or null. */
  readonly fault = this.writableFault.asReadonly();

  /** Forgets an earlier fault. */
  clear(): void {
    this.writableFault.set(null);
  }

  /** Sends a form that is valid. @returns whether it was taken */
  async form(form: AbstractControl, send: () => Promise<unknown>): Promise<boolean> {
    form.markAllAsTouched();
    if (form.invalid) return false;
    return this.run(send, (error) => showFieldErrors(error, form));
  }

  /** Does something without a form. @returns whether it was done */
  act(send: () => Promise<unknown>): Promise<boolean> {
    return this.run(send, sentenceOf);
  }

  private async run(
    send: () => Promise<unknown>,
    sentence: (error: unknown) => string | null,
  ): Promise<boolean> {
    if (this.writableBusy()) return false;
    this.writableBusy.set(true);
    this.writableFault.set(null);
    try {
      await send();
      return true;
    } catch (error) {
      this.writableFault.set(sentence(error));
      return false;
    } finally {
      this.writableBusy.set(false);
    }
  }
}
