import type { Express } from 'express';
import { type Options, rateLimit } from 'express-rate-limit';
import { ProblemError } from './problem-error.js';

const WINDOW_MS = 10 * 60_000;

/** How many requests of one address (a /64 of IPv6) ten minutes may hold. A studio's people share one address. */
const LIMITS: readonly {
  readonly paths: readonly string[];
  readonly most: number;
  readonly onlyFailed: boolean;
}[] = [
  { paths: ['/api/sign-in'], most: 60, onlyFailed: true },
  { paths: ['/api/session/refresh'], most: 120, onlyFailed: true },
  { paths: ['/api/password/reset', '/api/invitations'], most: 60, onlyFailed: true },
  { paths: ['/api/password/forgot'], most: 20, onlyFailed: false },
];

/** Slows guessing and mail floods down by address, before anything is looked up. */
export function limitAddresses(app: Express): void {
  const common: Partial<Options> = {
    windowMs: WINDOW_MS,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    handler: (_request, _response, next) => {
      next(
        new ProblemError(
          'too-many-tries',
          'Too many tries from this address. Wait ten minutes, then try again.',
          undefined,
          WINDOW_MS / 1000,
        ),
      );
    },
  };
  for (const { paths, most, onlyFailed } of LIMITS) {
    app.use([...paths], rateLimit({ ...common, limit: most, skipSuccessfulRequests: onlyFailed }));
  }
}
