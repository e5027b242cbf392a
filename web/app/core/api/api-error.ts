import type { AbstractControl } from '@angular/forms';
import type { Problem, ProblemCode } from '#shared/contract/problem';

/** A request that did not succeed; `message` is a sentence a person can act on. */
export class ApiError extends Error {
  override readonly name = 'ApiError';

  constructor(
    /** HTTP status; 0 when the gateway was not reached. */
    readonly status: number,
    readonly problem: Problem | null,
  ) {
    super(sentenceFor(status, problem));
  }

  /** Stable code of the problem, or null when there was no answer. */
  get code(): ProblemCode | null {
    return this.problem?.code ?? null;
  }
}

/** The sentence to show for anything that was thrown. */
export function sentenceOf(error: unknown): string {
  return error instanceof ApiError
    ? error.message
    : 'Something went wrong on this page. Load it again; if it stays, tell your lead.';
}

/**
 * Puts the problems named field by field beside their form controls (error key `server`).
 * @returns the sentence for the form as a whole: what is left, or null when every problem found its field
 */
export function showFieldErrors(error: unknown, form: AbstractControl): string | null {
  const fields = error instanceof ApiError ? (error.problem?.fields ?? []) : [];
  if (fields.length === 0) return sentenceOf(error);
  const homeless: string[] = [];
  for (const { path, message } of fields) {
    const control = form.get(path);
    if (!control) {
      homeless.push(message);
      continue;
    }
    control.setErrors({ server: message });
    control.markAsTouched();
  }
  return homeless.length > 0 ? homeless.join(' ') : null;
}

/** The problem details of an answer's body, or null if it holds none. */
export function problemOf(body: unknown): Problem | null {
  const value = typeof body === 'string' ? parsed(body) : body;
  const looksRight = typeof value === 'object' && value !== null && 'code' in value && 'detail' in value;
  return looksRight ? (value as Problem) : null;
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

function sentenceFor(status: number, problem: Problem | null): string {
  if (problem?.detail) return problem.detail;
  if (status === 0) return 'The gateway cannot be reached. Check the connection and try again.';
  if (status === 404) return 'This is not here any more, or it belongs to a studio that is not yours.';
  if (status === 413) return 'This is too large to be sent.';
  if (status === 429) return 'Too many tries in a short time. Wait a minute and try again.';
  return 'The gateway could not do this just now. Try again in a minute.';
}
