import jwt from 'jsonwebtoken';
import type { Clock } from '../../clock.js';

/** What an access token says. Roles are not in it: they are read from the database for every request. */
export interface AccessClaims {
  readonly personId: string;
  readonly sessionId: string;
  /** Tokens of an older version than the person's are no longer good. */
  readonly tokenVersion: number;
  /** Epoch ms, whole seconds. */
  readonly expiresAt: number;
}

const LIFETIME_S = 10 * 60;
const AUDIENCE = 'stillroom';
/** RFC 9068, section 2.1: says in the header that this is an access token, so that no other token passes for one. */
const TYPE = 'at+jwt';

/** Signed access tokens (JWT, HS256 and nothing else), good for ten minutes. */
export class AccessTokens {
  constructor(
    private readonly secret: string,
    private readonly clock: Clock,
  ) {}

  issue(claims: Omit<AccessClaims, 'expiresAt'>): { token: string; expiresAt: Date } {
    const issuedAt = Math.floor(this.clock.now() / 1000);
    const token = jwt.sign(
      { sub: claims.personId, sid: claims.sessionId, ver: claims.tokenVersion, iat: issuedAt },
      this.secret,
      {
        algorithm: 'HS256',
        audience: AUDIENCE,
        expiresIn: LIFETIME_S,
        header: { alg: 'HS256', typ: TYPE },
      },
    );
    return { token, expiresAt: new Date((issuedAt + LIFETIME_S) * 1000) };
  }

  /** The claims of a token that is genuine and not over, else null. */
  verify(token: string): AccessClaims | null {
    let decoded: jwt.Jwt;
    try {
      decoded = jwt.verify(token, this.secret, {
        algorithms: ['HS256'],
        audience: AUDIENCE,
        clockTimestamp: Math.floor(this.clock.now() / 1000),
        complete: true,
      });
    } catch {
      return null;
    }
    const { header, payload } = decoded;
    if (header.typ !== TYPE || typeof payload === 'string') return null;
    const { sub, exp } = payload;
    const { sid, ver } = payload as { sid?: unknown; ver?: unknown };
    if (typeof sub !== 'string' || typeof sid !== 'string' || typeof ver !== 'number' || exp === undefined)
      return null;
    return { personId: sub, sessionId: sid, tokenVersion: ver, expiresAt: exp * 1000 };
  }
}
