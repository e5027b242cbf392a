import { randomUUID } from 'node:crypto';
import type { Me, Session, SignedIn } from '#shared/contract/session';
import type { PersonChanged } from '../../announcements.js';
import type { Clock } from '../../clock.js';
import type { SignedInPerson } from '../../http/actor.js';
import { ProblemError } from '../../http/problem-error.js';
import type { AccessTokens } from './access-tokens.js';
import type { PasswordHashes } from './password-hashes.js';
import { IDLE_MS, type RefreshTokens } from './refresh-tokens.js';
import type { SessionHolder, SessionsRepository } from './sessions-repository.js';
import type { SlowDown } from './slow-down.js';

export interface SignInParts {
  readonly repository: SessionsRepository;
  readonly hashes: PasswordHashes;
  readonly accessTokens: AccessTokens;
  readonly refreshTokens: RefreshTokens;
  readonly slowDown: SlowDown;
  /** The system's time, not the demo's. */
  readonly clock: Clock;
  /** Resolves after so many milliseconds. */
  readonly wait: (ms: number) => Promise<void>;
  readonly company: string;
  readonly demo: { readonly deskUrl: string } | null;
  /** Told after a session was ended. */
  readonly changed: (change: PersonChanged) => void;
  /** Told when a refresh token was shown a second time, for the log. */
  readonly stolen: (session: { personId: string; sessionId: string }) => void;
}

/** Where a request comes from. */
export interface Visitor {
  readonly address: string;
  /** What counts as one address for the slow-down (a whole /64 of IPv6). */
  readonly network: string;
  readonly userAgent: string;
}

/** A refresh token for the cookie. */
export interface Kept {
  readonly refreshToken: string;
  readonly until: Date;
}

/** Who a token belongs to, and until when. */
export interface Bearer {
  readonly person: SignedInPerson;
  /** Epoch ms of the system's time. */
  readonly expiresAt: number;
}

/** Signing in and out, exchanging tokens, and finding out who sends a request. */
export class SignIn {
  constructor(private readonly parts: SignInParts) {}

  /** @throws ProblemError wrong-credentials (the same for unknown, disabled and not yet accepted people), too-many-tries */
  async signIn(email: string, password: string, visitor: Visitor): Promise<SignedIn & Kept> {
    const { repository, hashes, slowDown, refreshTokens } = this.parts;
    const account = normalEmail(email);
    const pace = slowDown.begin(account, visitor.network);
    if (pace.kind === 'wait') throw tooManyTries(pace.seconds);
    const person = await repository.account(account);
    const right = await hashes.verify(password, person?.passwordHash ?? null);
    if (pace.holdMs > 0) await this.parts.wait(pace.holdMs);
    if (!person || !right || person.disabled) {
      throw new ProblemError('wrong-credentials', 'E-mail and password do not belong together. Try again.');
    }
    slowDown.succeeded(account, visitor.network);
    const now = this.now();
    const session = {
      id: randomUUID(),
      personId: person.id,
      userAgent: visitor.userAgent,
      address: visitor.address,
      createdAt: now,
    };
    const refreshToken = refreshTokens.first();
    const until = new Date(now.getTime() + IDLE_MS);
    await repository.open(session, { tokenHash: refreshTokens.hash(refreshToken), expiresAt: until });
    return { ...(await this.signedIn(person.id, session.id)), refreshToken, until };
  }

  /** Exchanges a refresh token. @throws ProblemError session-ended */
  async refresh(refreshToken: string | null, visitor: Visitor): Promise<SignedIn & Kept> {
    if (refreshToken === null) throw new ProblemError('sign-in-needed', 'Sign in first.');
    const { repository, refreshTokens } = this.parts;
    const now = this.now();
    const next = refreshTokens.successor(refreshToken);
    const until = new Date(now.getTime() + IDLE_MS);
    const outcome = await repository.exchange(
      refreshTokens.hash(refreshToken),
      { tokenHash: refreshTokens.hash(next), expiresAt: until },
      now,
      visitor.userAgent,
    );
    if (outcome.kind === 'stolen') {
      const { personId, sessionId } = outcome;
      this.parts.stolen({ personId, sessionId });
      this.parts.changed({ personId, sessionId, reason: 'signed-out' });
    }
    if (outcome.kind === 'stolen' || outcome.kind === 'over') throw sessionEnded();
    return { ...(await this.signedIn(outcome.personId, outcome.sessionId)), refreshToken: next, until };
  }

  /** Ends the session of a refresh token; an unknown one is fine too. */
  async signOut(refreshToken: string | null): Promise<void> {
    if (refreshToken === null) return;
    const { repository, refreshTokens } = this.parts;
    const session = await repository.sessionOf(refreshTokens.hash(refreshToken));
    if (session) await this.end(session.personId, session.sessionId, 'signed out');
  }

  /** Who sends a bearer token; roles come from the database each time. @throws ProblemError sign-in-needed, session-ended */
  async authenticate(token: string): Promise<Bearer> {
    const claims = this.parts.accessTokens.verify(token);
    if (!claims) throw new ProblemError('sign-in-needed', 'Your sign-in has run out. Sign in again.');
    const holder = await this.parts.repository.holder(claims.personId, claims.sessionId);
    if (!holder || holder.tokenVersion !== claims.tokenVersion || isOver(holder)) throw sessionEnded();
    const { id, name, email, owner, memberships, sessionId } = holder;
    return { person: { id, name, email, owner, memberships, sessionId }, expiresAt: claims.expiresAt };
  }

  me(person: SignedInPerson): Me {
    const { id, name, email, owner, memberships } = person;
    const { company, demo } = this.parts;
    return { id, name, email, owner, memberships: [...memberships], company, demo };
  }

  async sessions(person: SignedInPerson): Promise<Session[]> {
    const rows = await this.parts.repository.list(person.id, new Date(this.now().getTime() - IDLE_MS));
    return rows.map((row) => ({
      ...row,
      createdAt: row.createdAt.toISOString(),
      lastUsedAt: row.lastUsedAt.toISOString(),
      current: row.id === person.sessionId,
    }));
  }

  /** @throws ProblemError not-found for a session of somebody else or one that is over */
  async endSession(person: SignedInPerson, sessionId: string): Promise<void> {
    if (!(await this.end(person.id, sessionId, 'ended by its person')))
      throw new ProblemError('not-found', 'This session is over already, or it is not yours.');
  }

  private async end(personId: string, sessionId: string, because: string): Promise<boolean> {
    const ended = await this.parts.repository.end(personId, sessionId, because, this.now());
    if (ended) this.parts.changed({ personId, sessionId, reason: 'signed-out' });
    return ended;
  }

  private async signedIn(personId: string, sessionId: string): Promise<SignedIn> {
    const holder = await this.parts.repository.holder(personId, sessionId);
    if (!holder || isOver(holder)) throw sessionEnded();
    const { token, expiresAt } = this.parts.accessTokens.issue({
      personId,
      sessionId,
      tokenVersion: holder.tokenVersion,
    });
    return { accessToken: token, expiresAt: expiresAt.toISOString(), me: this.me(holder) };
  }

  private now(): Date {
    return new Date(this.parts.clock.now());
  }
}

/** E-mail addresses are kept in small letters. */
export function normalEmail(email: string): string {
  return email.trim().toLowerCase();
}

export function tooManyTries(seconds: number): ProblemError {
  return new ProblemError(
    'too-many-tries',
    `Too many tries. Wait ${seconds === 1 ? 'a second' : `${seconds} seconds`}, then try again.`,
    undefined,
    seconds,
  );
}

function isOver(holder: SessionHolder): boolean {
  return holder.endedAt !== null || holder.disabled;
}

function sessionEnded(): ProblemError {
  return new ProblemError('session-ended', 'This session has ended. Sign in again.');
}
