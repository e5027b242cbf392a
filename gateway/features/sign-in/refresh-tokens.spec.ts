import { describe, expect, it } from 'vitest';
import { IDLE_MS, LONGEST_SESSION_MS, RefreshTokens, type ShownToken, judge } from './refresh-tokens.js';

const signedInAt = Date.parse('2026-05-04T12:00:00Z');
const shown = (
  changes: Partial<ShownToken> = {},
  session: Partial<ShownToken['session']> = {},
): ShownToken => ({
  usedAt: null,
  expiresAt: new Date(signedInAt + IDLE_MS),
  personDisabled: false,
  ...changes,
  session: { createdAt: new Date(signedInAt), endedAt: null, userAgent: 'Firefox', ...session },
});

describe('judge', () => {
  it('exchanges a fresh token until it has run out', () => {
    expect(judge(shown(), signedInAt + 1000, 'Firefox')).toBe('exchange');
    expect(judge(shown(), signedInAt + IDLE_MS - 1, 'Firefox after its update')).toBe('exchange');
    expect(judge(shown(), signedInAt + IDLE_MS, 'Firefox')).toBe('over');
  });

  it('answers the same again within ten seconds to the same browser, and takes anything else for theft', () => {
    const usedAt = new Date(signedInAt + 600_000);
    const at = (ms: number) => usedAt.getTime() + ms;
    expect(judge(shown({ usedAt }), at(9_999), 'Firefox')).toBe('same-again');
    expect(judge(shown({ usedAt }), at(10_001), 'Firefox')).toBe('stolen');
    expect(judge(shown({ usedAt }), at(1000), 'curl')).toBe('stolen');
  });

  it('refuses when the session or its person is over, or it has lasted sixty days', () => {
    expect(judge(shown({}, { endedAt: new Date(signedInAt) }), signedInAt + 1, 'Firefox')).toBe('over');
    expect(judge(shown({ personDisabled: true }), signedInAt + 1, 'Firefox')).toBe('over');
    const late = signedInAt + LONGEST_SESSION_MS;
    expect(judge(shown({ expiresAt: new Date(late + 1000) }), late, 'Firefox')).toBe('over');
  });
});

describe('RefreshTokens', () => {
  it('derives one successor from a token, which only the holder of the key can know', () => {
    const tokens = new RefreshTokens('a-secret-for-specs-with-enough-characters');
    const others = new RefreshTokens('another-secret-for-specs-long-enough-too');
    const first = tokens.first();
    expect(first).toMatch(/^[\w-]{43}$/);
    expect(tokens.first()).not.toBe(first);
    expect(tokens.successor(first)).toBe(tokens.successor(first));
    expect(tokens.successor(first)).not.toBe(others.successor(first));
    expect(tokens.hash(first)).toMatch(/^[0-9a-f]{64}$/);
  });
});
