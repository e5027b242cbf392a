import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { PersonChanged } from '../../announcements.js';
import { openTestDatabase, type TestDatabase } from '../../database/test-database.js';
import { AccessTokens } from './access-tokens.js';
import { PasswordHashes } from './password-hashes.js';
import { Passwords } from './passwords.js';
import { PasswordsRepository } from './passwords-repository.js';
import { RefreshTokens } from './refresh-tokens.js';
import { SessionsRepository } from './sessions-repository.js';
import { SignIn } from './sign-in.js';
import { SlowDown } from './slow-down.js';

const SECRET = 'a-secret-for-specs-with-enough-characters';
const PASSWORD = 'copper kettle by noon';
const STUDIO = randomUUID();
const desk = { address: '198.51.100.7', network: '198.51.100.7', userAgent: 'Firefox at the desk' };
const phone = { address: '198.51.100.8', network: '198.51.100.8', userAgent: 'Phone' };

describe('signing in', () => {
  let database: TestDatabase;
  let now: number;
  let monotonic = 0;
  let changes: PersonChanged[];
  let stolen: number;
  let signIn: SignIn;
  let passwords: Passwords;
  let passwordHash: string;
  const clock = { now: () => now, speed: () => 1 };
  const auditClock = { now: () => Date.parse('2026-06-01T00:00:00Z'), speed: () => 60 };
  const hashes = new PasswordHashes(6);

  beforeAll(async () => {
    database = await openTestDatabase(new Date('2026-05-04T12:00:00Z'));
    passwordHash = await hashes.hash(PASSWORD);
    await database.dataSource.query(
      `INSERT INTO studio (id, name, time_zone, unit, address, pressure_hpa, recipients, escalate_after_minutes) VALUES (?, 'Harbour', 'Europe/Lisbon', 'C', '', 1013, '[]', 30)`,
      [STUDIO],
    );
  });
  afterAll(async () => {
    await hashes.stop();
    await database.close();
  });

  beforeEach(() => {
    now = Date.parse('2026-05-04T12:00:00Z');
    changes = [];
    stolen = 0;
    const repository = new SessionsRepository(database.dataSource);
    const slowDown = new SlowDown(() => monotonic);
    signIn = new SignIn({
      repository,
      hashes,
      accessTokens: new AccessTokens(SECRET, clock),
      refreshTokens: new RefreshTokens(SECRET),
      slowDown,
      clock,
      wait: async () => undefined,
      company: 'Larkrise Candleworks',
      demo: null,
      changed: (change) => changes.push(change),
      stolen: () => stolen++,
    });
    passwords = new Passwords({
      repository: new PasswordsRepository(database.dataSource),
      accounts: repository,
      hashes,
      slowDown,
      clock,
      auditClock,
      company: 'Larkrise Candleworks',
      publicUrl: 'https://stillroom.larkrise.example',
      changed: (change) => changes.push(change),
      failed: (error) => {
        throw error;
      },
    });
  });

  async function person(values: { disabled?: boolean; invited?: boolean; owner?: boolean } = {}) {
    const id = randomUUID();
    const email = `p-${id.slice(0, 8)}@larkrise.example`;
    await database.dataSource.query(
      'INSERT INTO person (id, email, name, password_hash, owner, disabled, created_at) VALUES (?,?,?,?,?,?,?)',
      [
        id,
        email,
        'Ines Marlow',
        values.invited ? null : passwordHash,
        values.owner ? 1 : 0,
        values.disabled ? 1 : 0,
        new Date(now),
      ],
    );
    await database.dataSource.query('INSERT INTO membership (person_id, studio_id, role) VALUES (?,?,?)', [
      id,
      STUDIO,
      'maker',
    ]);
    return { id, email };
  }

  const bearer = async (token: string) => (await signIn.authenticate(token)).person;
  const outcome = (work: Promise<unknown>) =>
    work.then(
      () => 'fine',
      (error: { code?: string }) => error.code ?? 'no code',
    );

  it('signs in with the e-mail in any case and reads the roles from the database each time', async () => {
    const { id, email } = await person();
    const { accessToken, me, expiresAt } = await signIn.signIn(email.toUpperCase(), PASSWORD, desk);
    expect(me).toMatchObject({ id, email, owner: false, memberships: [{ studioId: STUDIO, role: 'maker' }] });
    expect(expiresAt).toBe('2026-05-04T12:10:00.000Z');
    await database.dataSource.query(`UPDATE membership SET role = 'viewer' WHERE person_id = ?`, [id]);
    expect((await bearer(accessToken)).memberships).toEqual([{ studioId: STUDIO, role: 'viewer' }]);
    const [row] = await database.dataSource.query<{ last_seen_at: Date }[]>(
      'SELECT last_seen_at FROM person WHERE id = ?',
      [id],
    );
    expect(row?.last_seen_at).toEqual(new Date(now));
  });

  it('answers alike for a wrong password, an unknown address, a disabled and an invited person', async () => {
    const known = await person();
    const disabled = await person({ disabled: true });
    const invited = await person({ invited: true });
    const answers = await Promise.all(
      [
        signIn.signIn(known.email, 'copper kettle by moon', desk),
        signIn.signIn('nobody@larkrise.example', PASSWORD, desk),
        signIn.signIn(disabled.email, PASSWORD, desk),
        signIn.signIn(invited.email, PASSWORD, desk),
      ].map((work) => work.catch((error: Error) => error.message)),
    );
    expect(new Set(answers)).toEqual(new Set(['E-mail and password do not belong together. Try again.']));
  });

  it('pauses after five wrong tries at one address, not at another, and not for the person next door', async () => {
    const { email } = await person();
    for (let i = 0; i < 5; i++)
      expect(await outcome(signIn.signIn(email, 'wrong password', desk))).toBe('wrong-credentials');
    expect(await outcome(signIn.signIn(email, PASSWORD, desk))).toBe('too-many-tries');
    expect(await outcome(signIn.signIn(email, PASSWORD, phone))).toBe('fine');
    expect(await outcome(signIn.signIn((await person()).email, PASSWORD, desk))).toBe('fine');
    monotonic += 1001;
    expect(await outcome(signIn.signIn(email, PASSWORD, desk))).toBe('fine');
  });

  it('keeps no token in the database, only hashes', async () => {
    const { id, email } = await person();
    const { refreshToken } = await signIn.signIn(email, PASSWORD, desk);
    const rows = await database.dataSource.query<{ token_hash: string }[]>(
      'SELECT t.token_hash FROM refresh_token t JOIN session s ON s.id = t.session_id WHERE s.person_id = ?',
      [id],
    );
    expect(rows).toHaveLength(1);
    expect(rows[0]?.token_hash).toMatch(/^[0-9a-f]{64}$/);
    expect(rows[0]?.token_hash).not.toContain(refreshToken);
  });

  it('exchanges refresh tokens in a row and slides the end of the session along', async () => {
    const { email } = await person();
    let { refreshToken } = await signIn.signIn(email, PASSWORD, desk);
    for (let week = 0; week < 8; week++) {
      now += 7 * 86_400_000;
      const next = await signIn.refresh(refreshToken, desk);
      expect(next.refreshToken).not.toBe(refreshToken);
      expect(await bearer(next.accessToken)).toMatchObject({ email });
      refreshToken = next.refreshToken;
    }
    now += 7 * 86_400_000;
    expect(await outcome(signIn.refresh(refreshToken, desk))).toBe('session-ended');
  });

  it('ends a session that was not used for two weeks', async () => {
    const { email } = await person();
    const { refreshToken } = await signIn.signIn(email, PASSWORD, desk);
    now += 14 * 86_400_000;
    expect(await outcome(signIn.refresh(refreshToken, desk))).toBe('session-ended');
  });

  it('signs nobody out when the clock of the machine jumps by an hour and back', async () => {
    const people = await Promise.all([person(), person(), person()]);
    const sessions = await Promise.all(people.map(({ email }) => signIn.signIn(email, PASSWORD, desk)));
    now += 3_600_000;
    expect(await outcome(signIn.authenticate(sessions[0]!.accessToken))).toBe('sign-in-needed');
    const later = await Promise.all(sessions.map(({ refreshToken }) => signIn.refresh(refreshToken, desk)));
    now -= 2 * 3_600_000;
    for (const { accessToken, refreshToken } of later) {
      expect(await outcome(signIn.authenticate(accessToken))).toBe('fine');
      expect(await outcome(signIn.refresh(refreshToken, desk))).toBe('fine');
    }
    expect(stolen).toBe(0);
  });

  it('gives two tabs that race the same successor', async () => {
    const { email } = await person();
    const { refreshToken } = await signIn.signIn(email, PASSWORD, desk);
    const both = await Promise.all([1, 2, 3, 4].map(() => signIn.refresh(refreshToken, desk)));
    expect(new Set(both.map((one) => one.refreshToken)).size).toBe(1);
    now += 9_000;
    const late = await signIn.refresh(refreshToken, desk);
    expect(late.refreshToken).toBe(both[0]?.refreshToken);
    expect(await outcome(signIn.refresh(late.refreshToken, desk))).toBe('fine');
    expect(stolen).toBe(0);
  });

  it('ends the session when a token is shown again later: one of the two holders stole it', async () => {
    const { id, email } = await person();
    const first = await signIn.signIn(email, PASSWORD, desk);
    const second = await signIn.refresh(first.refreshToken, desk);
    now += 11_000;
    expect(await outcome(signIn.refresh(first.refreshToken, phone))).toBe('session-ended');
    expect(stolen).toBe(1);
    expect(changes).toEqual([{ personId: id, sessionId: (await sessionIds(id))[0], reason: 'signed-out' }]);
    expect(await outcome(signIn.refresh(second.refreshToken, desk))).toBe('session-ended');
    expect(await outcome(signIn.authenticate(second.accessToken))).toBe('session-ended');
  });

  it('lists own sessions and ends one of them, never one of somebody else', async () => {
    const ines = await person();
    const atDesk = await signIn.signIn(ines.email, PASSWORD, desk);
    now += 1000;
    const onPhone = await signIn.signIn(ines.email, PASSWORD, phone);
    const me = await bearer(atDesk.accessToken);
    const listed = await signIn.sessions(me);
    expect(listed.map(({ userAgent, current }) => [userAgent, current])).toEqual([
      ['Phone', false],
      ['Firefox at the desk', true],
    ]);
    const omar = await person();
    const other = await bearer((await signIn.signIn(omar.email, PASSWORD, desk)).accessToken);
    expect(await outcome(signIn.endSession(other, listed[0]!.id))).toBe('not-found');
    await signIn.endSession(me, listed[0]!.id);
    expect(changes).toEqual([{ personId: ines.id, sessionId: listed[0]!.id, reason: 'signed-out' }]);
    expect(await outcome(signIn.authenticate(onPhone.accessToken))).toBe('session-ended');
    expect(await outcome(signIn.authenticate(atDesk.accessToken))).toBe('fine');
    await signIn.signOut(atDesk.refreshToken);
    expect(await outcome(signIn.authenticate(atDesk.accessToken))).toBe('session-ended');
    expect(await outcome(signIn.signOut('unknown-token'))).toBe('fine');
  });

  it('changes the password, ends every other session and tells the person by mail', async () => {
    const { id, email } = await person();
    const atDesk = await signIn.signIn(email, PASSWORD, desk);
    const onPhone = await signIn.signIn(email, PASSWORD, phone);
    const me = await bearer(atDesk.accessToken);
    const change = (current: string, next: string) =>
      outcome(passwords.change(me, { current, next }, desk.address));
    expect(await change('not the password', 'amber shelf at dusk')).toBe('bad-input');
    expect(await change(PASSWORD, 'Larkrise2026')).toBe('bad-input');
    expect(await outcome(signIn.authenticate(onPhone.accessToken))).toBe('fine');
    expect(await change(PASSWORD, 'amber shelf at dusk')).toBe('fine');
    expect(await outcome(signIn.authenticate(onPhone.accessToken))).toBe('session-ended');
    expect(await outcome(signIn.authenticate(atDesk.accessToken))).toBe('fine');
    expect(changes.map(({ sessionId }) => sessionId)).toHaveLength(1);
    expect(await outcome(signIn.signIn(email, PASSWORD, desk))).toBe('wrong-credentials');
    expect(await outcome(signIn.signIn(email, 'amber shelf at dusk', desk))).toBe('fine');
    expect((await mailsTo(email)).map(({ subject }) => subject)).toEqual([
      'Your password for Larkrise Candleworks on Stillroom was changed',
    ]);
    expect(await auditOf(id)).toEqual([['changed the own password', '2026-06-01T00:00:00.000Z']]);
  });

  it('resets a forgotten password once, with the newest link, within the hour', async () => {
    const { id, email } = await person();
    const before = await signIn.signIn(email, PASSWORD, desk);
    const first = await askedLink(email);
    now += 60_000;
    const second = await askedLink(email);
    expect(await outcome(passwords.reset(first, 'amber shelf at dusk', desk.address))).toBe('link-expired');
    expect(await outcome(passwords.reset(second, 'password1', desk.address))).toBe('bad-input');
    expect(await outcome(passwords.reset(second, 'amber shelf at dusk', desk.address))).toBe('fine');
    expect(await outcome(passwords.reset(second, 'copper shelf at dusk', desk.address))).toBe('link-expired');
    expect(await outcome(signIn.authenticate(before.accessToken))).toBe('session-ended');
    expect(changes).toEqual([{ personId: id, sessionId: null, reason: 'signed-out' }]);
    expect(await outcome(signIn.signIn(email, 'amber shelf at dusk', desk))).toBe('fine');
    const third = await askedLink(email);
    now += 60 * 60_000;
    expect(await outcome(passwords.reset(third, 'copper shelf at dusk', desk.address))).toBe('link-expired');
  });

  it('lets only one of two uses of a link through', async () => {
    const { email } = await person();
    const token = await askedLink(email);
    const outcomes = await Promise.all(
      ['amber shelf at dusk', 'copper shelf at dusk'].map((next) =>
        outcome(passwords.reset(token, next, desk.address)),
      ),
    );
    expect(outcomes.sort()).toEqual(['fine', 'link-expired']);
  });

  it('sends no link to unknown, disabled or invited people, and three an hour at most', async () => {
    for (const { email } of [
      await person({ disabled: true }),
      await person({ invited: true }),
      { email: 'nobody@larkrise.example' },
    ]) {
      passwords.forgot(email, desk.address);
      await passwords.settled();
      expect(await mailsTo(email)).toEqual([]);
    }
    const { email } = await person();
    for (let i = 0; i < 5; i++) {
      passwords.forgot(email, desk.address);
      await passwords.settled();
    }
    expect(await mailsTo(email)).toHaveLength(3);
  });

  it('keeps no link in the table of links', async () => {
    const { email } = await person();
    const token = await askedLink(email);
    const [row] = await database.dataSource.query<{ n: string }[]>(
      'SELECT COUNT(*) AS n FROM mailed_link WHERE token_hash = ?',
      [token],
    );
    expect(Number(row?.n)).toBe(0);
  });

  async function sessionIds(personId: string): Promise<string[]> {
    const rows = await database.dataSource.query<{ id: string }[]>(
      'SELECT id FROM session WHERE person_id = ?',
      [personId],
    );
    return rows.map(({ id }) => id);
  }

  async function mailsTo(email: string): Promise<{ subject: string; body: string }[]> {
    return database.dataSource.query('SELECT subject, body FROM outbox WHERE recipient = ? ORDER BY id', [
      email,
    ]);
  }

  async function askedLink(email: string): Promise<string> {
    passwords.forgot(email, desk.address);
    await passwords.settled();
    const link = /https:\/\/stillroom\.larkrise\.example\/reset-password\/([\w-]{43})/.exec(
      (await mailsTo(email)).at(-1)!.body,
    );
    return link![1]!;
  }

  async function auditOf(thingId: string): Promise<unknown[]> {
    const rows = await database.dataSource.query<{ action: string; at: Date }[]>(
      'SELECT action, at FROM audit WHERE thing_id = ?',
      [thingId],
    );
    return rows.map(({ action, at }) => [action, at.toISOString()]);
  }
});
