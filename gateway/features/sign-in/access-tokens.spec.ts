import { createHmac } from 'node:crypto';
import jwt from 'jsonwebtoken';
import { describe, expect, it } from 'vitest';
import { AccessTokens } from './access-tokens.js';

const SECRET = 'a-secret-for-specs-with-enough-characters';
const claims = { personId: 'p1', sessionId: 's1', tokenVersion: 3 };
let now = Date.parse('2026-05-04T12:00:00.400Z');
const tokens = new AccessTokens(SECRET, { now: () => now, speed: () => 1 });

describe('AccessTokens', () => {
  it('gives back what it was given, for ten minutes', () => {
    const { token, expiresAt } = tokens.issue(claims);
    expect(expiresAt.toISOString()).toBe('2026-05-04T12:10:00.000Z');
    expect(tokens.verify(token)).toEqual({ ...claims, expiresAt: expiresAt.getTime() });
    now += 599_000;
    expect(tokens.verify(token)).not.toBeNull();
    now += 1000;
    expect(tokens.verify(token)).toBeNull();
  });

  it('takes no token of another kind, audience, algorithm or secret', () => {
    const body = { sub: 'p1', sid: 's1', ver: 3, iat: Math.floor(now / 1000), aud: 'stillroom' };
    const sign = (payload: object, options: jwt.SignOptions, secret = SECRET) =>
      jwt.sign(payload, secret, { expiresIn: 600, ...options });
    const good = { header: { alg: 'HS256', typ: 'at+jwt' } } as const;
    expect(tokens.verify(sign(body, good))).not.toBeNull();
    expect(tokens.verify(sign(body, { header: { alg: 'HS256', typ: 'JWT' } }))).toBeNull();
    expect(tokens.verify(sign({ ...body, aud: 'elsewhere' }, good))).toBeNull();
    expect(
      tokens.verify(sign(body, { header: { alg: 'HS512', typ: 'at+jwt' }, algorithm: 'HS512' })),
    ).toBeNull();
    expect(tokens.verify(sign(body, good, 'another-secret-for-specs-long-enough'))).toBeNull();
    expect(tokens.verify(sign({ ...body, sid: 7 }, good))).toBeNull();
    expect(tokens.verify('nonsense')).toBeNull();
  });

  it('takes no unsigned token and none with changed content', () => {
    const part = (value: object) => Buffer.from(JSON.stringify(value)).toString('base64url');
    const payload = part({ sub: 'p1', sid: 's1', ver: 3, aud: 'stillroom', exp: now / 1000 + 600 });
    expect(tokens.verify(`${part({ alg: 'none', typ: 'at+jwt' })}.${payload}.`)).toBeNull();
    const { token } = tokens.issue(claims);
    const [header, , signature] = token.split('.');
    expect(tokens.verify(`${header}.${payload}.${signature}`)).toBeNull();
    const own = createHmac('sha256', SECRET).update(`${header}.${payload}`).digest('base64url');
    expect(tokens.verify(`${header}.${payload}.${own}`)).not.toBeNull();
  });
});
