import { IsNull, type DataSource } from 'typeorm';
import type { StudioRole } from '#shared/contract/roles';
import { PersonEntity } from '../../database/entities/person-entity.js';
import { RefreshTokenEntity } from '../../database/entities/refresh-token-entity.js';
import { SessionEntity } from '../../database/entities/session-entity.js';
import { type ShownToken, judge } from './refresh-tokens.js';

/** What signing in needs of a person. */
export interface Account {
  readonly id: string;
  readonly email: string;
  readonly name: string;
  readonly owner: boolean;
  readonly disabled: boolean;
  readonly passwordHash: string | null;
  readonly tokenVersion: number;
}

/** A session with its person, as access tokens are checked against. */
export interface SessionHolder extends Account {
  readonly sessionId: string;
  readonly endedAt: Date | null;
  readonly memberships: { readonly studioId: string; readonly role: StudioRole }[];
}

export interface NewToken {
  readonly tokenHash: string;
  readonly expiresAt: Date;
}

/** What came of a shown refresh token; see judge. */
export type Exchange =
  | {
      readonly kind: 'exchange' | 'same-again' | 'stolen';
      readonly personId: string;
      readonly sessionId: string;
    }
  | { readonly kind: 'over' };

export interface SessionRow {
  readonly id: string;
  readonly createdAt: Date;
  readonly lastUsedAt: Date;
  readonly userAgent: string;
  readonly address: string;
}

/** Sessions and their refresh tokens. */
export class SessionsRepository {
  constructor(private readonly dataSource: DataSource) {}

  async account(email: string): Promise<Account | null> {
    return this.dataSource.getRepository(PersonEntity).findOneBy({ email });
  }

  async holder(personId: string, sessionId: string): Promise<SessionHolder | null> {
    const rows = await this.dataSource.query<HolderRow[]>(
      `SELECT p.id, p.email, p.name, p.owner, p.disabled, p.password_hash, p.token_version, s.ended_at, m.studio_id, m.role
       FROM session s JOIN person p ON p.id = s.person_id LEFT JOIN membership m ON m.person_id = p.id WHERE s.id = ? AND p.id = ?`,
      [sessionId, personId],
    );
    const [first] = rows;
    if (!first) return null;
    return {
      id: first.id,
      email: first.email,
      name: first.name,
      owner: first.owner === 1,
      disabled: first.disabled === 1,
      passwordHash: first.password_hash,
      tokenVersion: first.token_version,
      sessionId,
      endedAt: first.ended_at,
      memberships: rows.flatMap(({ studio_id: studioId, role }) =>
        studioId !== null && role !== null ? [{ studioId, role }] : [],
      ),
    };
  }

  async open(
    session: Omit<SessionRow, 'lastUsedAt'> & { readonly personId: string },
    token: NewToken,
  ): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      const { createdAt } = session;
      // Everywhere the person first, then the session: transactions that meet then wait instead of ending in a deadlock.
      await manager.update(PersonEntity, { id: session.personId }, { lastSeenAt: createdAt });
      await manager.insert(SessionEntity, {
        ...session,
        lastUsedAt: createdAt,
        endedAt: null,
        endedBecause: null,
      });
      await manager.insert(RefreshTokenEntity, {
        ...token,
        sessionId: session.id,
        createdAt,
        usedAt: null,
      });
    });
  }

  /**
   * Judges a shown refresh token and, if it is due, writes its successor; a token shown after its time of grace ends its session.
   * One at a time per token: of two that show the same, the second sees what the first did.
   */
  exchange(shownHash: string, successor: NewToken, now: Date, userAgent: string): Promise<Exchange> {
    return this.dataSource.transaction(async (manager) => {
      const [token] = await manager.query<TokenRow[]>(
        'SELECT session_id, used_at, expires_at FROM refresh_token WHERE token_hash = ? FOR UPDATE',
        [shownHash],
      );
      if (!token) return { kind: 'over' };
      const [session] = await manager.query<SessionOfToken[]>(
        'SELECT s.created_at, s.ended_at, s.user_agent, s.person_id, p.disabled FROM session s JOIN person p ON p.id = s.person_id WHERE s.id = ?',
        [token.session_id],
      );
      if (!session) return { kind: 'over' };
      const kind = judge(toShown(token, session), now.getTime(), userAgent);
      if (kind === 'over') return { kind };
      const { session_id: sessionId } = token;
      const { person_id: personId } = session;
      if (kind === 'stolen') {
        await manager.update(
          SessionEntity,
          { id: sessionId, endedAt: IsNull() },
          { endedAt: now, endedBecause: 'refresh token shown twice' },
        );
      }
      if (kind === 'exchange') {
        await manager.update(RefreshTokenEntity, { tokenHash: shownHash }, { usedAt: now });
        await manager.update(PersonEntity, { id: personId }, { lastSeenAt: now });
        await manager.update(SessionEntity, { id: sessionId }, { lastUsedAt: now });
        await manager.insert(RefreshTokenEntity, { ...successor, sessionId, createdAt: now, usedAt: null });
        await manager.query('DELETE FROM refresh_token WHERE session_id = ? AND expires_at < ?', [
          sessionId,
          now,
        ]);
      }
      return { kind, personId, sessionId };
    });
  }

  /** The session and person a refresh token belongs to, used or not; null for an unknown one. */
  async sessionOf(tokenHash: string): Promise<{ sessionId: string; personId: string } | null> {
    const [row] = await this.dataSource.query<{ session_id: string; person_id: string }[]>(
      'SELECT t.session_id, s.person_id FROM refresh_token t JOIN session s ON s.id = t.session_id WHERE t.token_hash = ?',
      [tokenHash],
    );
    return row ? { sessionId: row.session_id, personId: row.person_id } : null;
  }

  /** Sessions of a person that have not ended and were used since. */
  list(personId: string, usedSince: Date): Promise<SessionRow[]> {
    return this.dataSource.query<SessionRow[]>(
      `SELECT id, created_at AS createdAt, last_used_at AS lastUsedAt, user_agent AS userAgent, address FROM session
       WHERE person_id = ? AND ended_at IS NULL AND last_used_at > ? ORDER BY last_used_at DESC`,
      [personId, usedSince],
    );
  }

  /** False when the person has no such open session. */
  async end(personId: string, sessionId: string, because: string, now: Date): Promise<boolean> {
    const result = await this.dataSource
      .getRepository(SessionEntity)
      .update({ id: sessionId, personId, endedAt: IsNull() }, { endedAt: now, endedBecause: because });
    return result.affected === 1;
  }
}

interface HolderRow {
  id: string;
  email: string;
  name: string;
  owner: number;
  disabled: number;
  password_hash: string | null;
  token_version: number;
  ended_at: Date | null;
  studio_id: string | null;
  role: StudioRole | null;
}

interface TokenRow {
  session_id: string;
  used_at: Date | null;
  expires_at: Date;
}

interface SessionOfToken {
  created_at: Date;
  ended_at: Date | null;
  user_agent: string;
  person_id: string;
  disabled: number;
}

function toShown(token: TokenRow, session: SessionOfToken): ShownToken {
  return {
    usedAt: token.used_at,
    expiresAt: token.expires_at,
    session: { createdAt: session.created_at, endedAt: session.ended_at, userAgent: session.user_agent },
    personDisabled: session.disabled === 1,
  };
}
