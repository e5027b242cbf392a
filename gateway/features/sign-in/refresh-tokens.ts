import { createHmac, hkdfSync, randomBytes } from 'node:crypto';
import { hashToken } from './token-hash.js';

/** A session is over after this long without use … */
export const IDLE_MS = 14 * 86_400_000;
/** … and in any case this long after signing in. */
export const LONGEST_SESSION_MS = 60 * 86_400_000;
/** Two tabs may show the same token within this time: the second gets the same successor as the first. */
export const GRACE_MS = 10_000;

/**
 * Refresh tokens: random, kept only as a hash, good for one exchange. The successor of a token is derived from it with a key of
 * the gateway, so that showing a token again within the grace period gives the very same successor: tabs that race, or an answer
 * that was lost on its way, sign nobody out and never split a session into two lines of tokens.
 */
export class RefreshTokens {
  readonly #key: Buffer;

  constructor(secret: string) {
    this.#key = Buffer.from(hkdfSync('sha256', secret, '', 'stillroom refresh token successor', 32));
  }

  first(): string {
    return randomBytes(32).toString('base64url');
  }

  successor(token: string): string {
    return createHmac('sha256', this.#key).update(token).digest('base64url');
  }

  hash(token: string): string {
    return hashToken(token);
  }
}

/** What is known about a refresh token that was shown. */
export interface ShownToken {
  readonly usedAt: Date | null;
  readonly expiresAt: Date;
  readonly session: {
    readonly createdAt: Date;
    readonly endedAt: Date | null;
    readonly userAgent: string;
  };
  readonly personDisabled: boolean;
}

/**
 * What to do with a shown refresh token: exchange it, answer as a moment ago, end its session because somebody else must have
 * used it, or refuse.
 * @param now epoch ms
 */
export function judge(
  shown: ShownToken,
  now: number,
  userAgent: string,
): 'exchange' | 'same-again' | 'stolen' | 'over' {
  const { session } = shown;
  if (session.endedAt !== null || shown.personDisabled) return 'over';
  if (now >= session.createdAt.getTime() + LONGEST_SESSION_MS) return 'over';
  if (shown.usedAt === null) return now < shown.expiresAt.getTime() ? 'exchange' : 'over';
  const age = now - shown.usedAt.getTime();
  return Math.abs(age) <= GRACE_MS && session.userAgent === userAgent ? 'same-again' : 'stolen';
}
