import { ProblemError, notFound } from '../../http/problem-error.js';
import type { Refusal } from './batches-repository.js';

/** Clocks of people's devices may be this much ahead; what is given as later than now then counts as now. */
const AHEAD_MS = 5 * 60_000;
/** Old recordings may be replayed for what a batch would have become; before this a year is a slip of the pen. */
const OLDEST = Date.UTC(2000, 0, 1);

export function fieldProblem(path: string, message: string): ProblemError {
  return new ProblemError('bad-input', message, [{ path, message }]);
}

/**
 * An instant somebody gave, as epoch ms, not later than now.
 * @throws ProblemError bad-input for a time in the future or before the year 2000
 */
export function checkedInstant(given: string, now: number, path: string): number {
  const at = Date.parse(given);
  if (at > now + AHEAD_MS) throw fieldProblem(path, 'This time lies in the future.');
  if (at < OLDEST) throw fieldProblem(path, 'This lies before the year 2000. Check the year.');
  return Math.min(at, now);
}

/** The refusal of a pour, a move or an end as a sentence that says what to do. */
export function refusalInWords(refusal: Exclude<Refusal, { kind: 'changed-meanwhile' }>): ProblemError {
  switch (refusal.kind) {
    case 'code-taken':
      return new ProblemError(
        'conflict',
        'Another batch of this studio has this code. Choose another, or leave it empty.',
        [{ path: 'code', message: 'Taken by another batch.' }],
      );
    case 'no-such-shelf':
      return notFound('shelf');
    case 'stands-there':
      return new ProblemError('conflict', 'The batch stands on this shelf already.');
    case 'shelf-full':
      return new ProblemError(
        'shelf-full',
        `${refusal.shelf} has room for ${Math.floor(refusal.free + 1e-9)} more vessels of 75 mm; this batch takes ${Math.ceil(refusal.needed - 1e-9)}. Choose another shelf, or put it there all the same.`,
      );
    case 'too-early':
      return fieldProblem(
        'at',
        'The batch was not there yet: choose a time after it came to its present shelf.',
      );
    case 'ended':
      return new ProblemError('conflict', 'This batch was dispatched or scrapped already.');
  }
}
