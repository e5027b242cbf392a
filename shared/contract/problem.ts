import { z } from 'zod';

/** Stable codes of an error answer (RFC 9457 problem details, member `code`). */
export const PROBLEM_CODES = [
  'bad-input',
  'sign-in-needed',
  'wrong-credentials',
  'session-ended',
  'too-many-tries',
  'forbidden',
  'not-found',
  'link-expired',
  'conflict',
  'changed-meanwhile',
  'shelf-full',
  'not-ready',
  'foreign-origin',
  'too-large',
  'busy',
  'internal',
] as const;
export type ProblemCode = (typeof PROBLEM_CODES)[number];

export const problem = z.object({
  type: z.literal('about:blank'),
  title: z.string(),
  status: z.number().int(),
  code: z.enum(PROBLEM_CODES),
  /** A sentence that says what to do. */
  detail: z.string(),
  /** For bad input: what is wrong, field by field. */
  fields: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
  requestId: z.string().optional(),
});
export type Problem = z.infer<typeof problem>;
