import type { ProblemCode } from '#shared/contract/problem';

const STATUS: Record<ProblemCode, number> = {
  'bad-input': 400,
  'sign-in-needed': 401,
  'wrong-credentials': 401,
  'session-ended': 401,
  'too-many-tries': 429,
  forbidden: 403,
  'not-found': 404,
  'link-expired': 410,
  conflict: 409,
  'changed-meanwhile': 409,
  'shelf-full': 409,
  'not-ready': 409,
  'foreign-origin': 403,
  'too-large': 413,
  busy: 503,
  internal: 500,
};

/** An expected refusal of a use case; the error handler turns it into problem details (RFC 9457). */
export class ProblemError extends Error {
  override readonly name = 'ProblemError';
  readonly status: number;

  constructor(
    readonly code: ProblemCode,
    /** A sentence that says what to do. */
    readonly detail: string,
    readonly fields?: readonly { path: string; message: string }[],
    /** For too-many-tries: when another try makes sense. */
    readonly retryAfterSeconds?: number,
  ) {
    super(detail);
    this.status = STATUS[code];
  }
}

/** The answer for a thing that does not exist or belongs to a studio the person has no role in. */
export function notFound(what: string): ProblemError {
  return new ProblemError('not-found', `This ${what} does not exist, or you have no role in its studio.`);
}

/** The answer when somebody else changed the thing since the person loaded it. */
export function changedMeanwhile(what: string): ProblemError {
  return new ProblemError(
    'changed-meanwhile',
    `Somebody else changed this ${what} meanwhile. Load it again, then decide.`,
  );
}
