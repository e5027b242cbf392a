import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { TestGateway, type TestPerson } from '../../test-gateway.js';

describe('people and invitations', () => {
  let gateway: TestGateway;
  let harbour: string;
  let hill: string;
  let owner: TestPerson;
  let lead: TestPerson;

  beforeAll(async () => {
    gateway = await TestGateway.open();
    harbour = await gateway.addStudio('Harbour');
    hill = await gateway.addStudio('Hill');
    owner = await gateway.addPerson('Olive Owner', { owner: true });
    lead = await gateway.addPerson('Lea Lead', { memberships: { [harbour]: 'lead', [hill]: 'maker' } });
  });
  afterAll(() => gateway.close());

  const invite = (who: TestPerson, email: string, roles: object) =>
    gateway.call(who, 'POST', '/api/people/invitations', { email, memberships: [], ...roles });
  const maker = (studioId: string) => ({ memberships: [{ studioId, role: 'maker' }] });
  const address = () => `new-${randomUUID().slice(0, 8)}@larkrise.example`;

  async function linkTo(email: string): Promise<string> {
    const [mail] = await gateway.query<{ body: string }[]>(
      'SELECT body FROM outbox WHERE recipient = ? ORDER BY id DESC LIMIT 1',
      [email],
    );
    return /\/invitation\/([\w-]{43})/.exec(mail!.body)![1]!;
  }
  const accept = (token: string, password = 'amber shelf at dusk') =>
    gateway.call(null, 'POST', `/api/invitations/${token}/accept`, { name: 'Nell Newcomer', password });

  it('invites by mail, and the invited person comes in with name and password', async () => {
    const email = address();
    const invited = await invite(owner, email.toUpperCase(), maker(harbour));
    expect(invited).toMatchObject({
      status: 200,
      body: { email, state: 'invited', owner: false, memberships: [{ studioId: harbour, role: 'maker' }] },
    });
    const token = await linkTo(email);
    expect((await gateway.call(null, 'GET', `/api/invitations/${token}`)).body).toEqual({
      company: 'Larkrise Candleworks',
      email,
      invitedBy: 'Olive Owner',
      owner: false,
      studios: [{ name: 'Harbour', role: 'maker' }],
    });
    expect((await accept(token, 'nellnewcomer1')).body.fields[0].path).toBe('password');
    expect((await accept(token)).status).toBe(204);
    expect((await accept(token)).body.code).toBe('link-expired');
    const signedIn = await gateway.call(null, 'POST', '/api/sign-in', {
      email,
      password: 'amber shelf at dusk',
    });
    expect(signedIn.body.me).toMatchObject({
      name: 'Nell Newcomer',
      memberships: [{ studioId: harbour, role: 'maker' }],
    });
    const cookie = signedIn.headers.get('set-cookie')!;
    expect(cookie).toMatch(
      /^stillroom-refresh=[\w-]{43}; Path=\/api\/session; Expires=.+; HttpOnly; SameSite=Strict$/,
    );
    const refreshed = await gateway.call(null, 'POST', '/api/session/refresh', undefined, {
      Cookie: cookie.split(';')[0]!,
    });
    expect(refreshed.body.me.email).toBe(email);
    expect(refreshed.headers.get('set-cookie')).not.toBe(cookie);
  });

  it('invites again with a new link until the first is used', async () => {
    const email = address();
    await invite(owner, email, maker(harbour));
    const first = await linkTo(email);
    const again = await invite(owner, email, { memberships: [{ studioId: hill, role: 'viewer' }] });
    expect(again.body.memberships).toEqual([{ studioId: hill, role: 'viewer' }]);
    expect((await accept(first)).status).toBe(410);
    expect((await accept(await linkTo(email))).status).toBe(204);
    expect(await invite(owner, email, maker(harbour))).toMatchObject({
      status: 409,
      body: { code: 'conflict' },
    });
  });

  it('lets a lead invite makers and viewers to the own studio and nothing else', async () => {
    expect((await invite(lead, address(), maker(harbour))).status).toBe(200);
    const refused = [
      maker(hill),
      { memberships: [{ studioId: harbour, role: 'lead' }] },
      {
        memberships: [
          { studioId: harbour, role: 'viewer' },
          { studioId: hill, role: 'viewer' },
        ],
      },
      { ...maker(harbour), owner: true },
    ];
    for (const roles of refused) expect((await invite(lead, address(), roles)).status).toBe(403);
    const elsewhere = address();
    await invite(owner, elsewhere, maker(hill));
    expect((await invite(lead, elsewhere, maker(harbour))).status).toBe(409);
    const chief = address();
    await invite(owner, chief, { owner: true });
    expect((await invite(lead, chief, maker(harbour))).status).toBe(409);
    const own = address();
    await invite(lead, own, maker(harbour));
    expect((await invite(lead, own, { memberships: [{ studioId: harbour, role: 'viewer' }] })).status).toBe(
      200,
    );
  });

  it('refuses an invitation to no studio, to one twice, to one that does not exist', async () => {
    const [one] = maker(harbour).memberships;
    for (const memberships of [[], [one, one], [{ studioId: randomUUID(), role: 'maker' }]])
      expect((await invite(owner, address(), { memberships })).status).toBe(400);
  });

  it('shows a lead the owners and the own people, with their roles here only', async () => {
    const both = await gateway.addPerson('Bo Both', { memberships: { [harbour]: 'maker', [hill]: 'lead' } });
    const foreign = await gateway.addPerson('Finn Foreign', { memberships: { [hill]: 'maker' } });
    const seen = (await gateway.call(lead, 'GET', '/api/people')).body as {
      id: string;
      memberships: unknown[];
    }[];
    expect(seen.find(({ id }) => id === both.id)?.memberships).toEqual([
      { studioId: harbour, role: 'maker' },
    ]);
    expect(seen.find(({ id }) => id === lead.id)?.memberships).toEqual([{ studioId: harbour, role: 'lead' }]);
    expect(seen.some(({ id }) => id === foreign.id)).toBe(false);
    expect(seen.some(({ id }) => id === owner.id)).toBe(true);
    const all = (await gateway.call(owner, 'GET', '/api/people')).body as {
      id: string;
      memberships: unknown[];
    }[];
    expect(all.find(({ id }) => id === both.id)?.memberships).toHaveLength(2);
    expect(all.some(({ id }) => id === foreign.id)).toBe(true);
  });

  it('ends the sessions of somebody whose role changes, and tells it', async () => {
    const person = await gateway.addPerson('Pia Promoted', { memberships: { [harbour]: 'maker' } });
    const told: unknown[] = [];
    const stop = gateway.gateway.feeds.people.listen((change) => told.push(change));
    const change = (version: number, body: object) =>
      gateway.call(owner, 'PATCH', `/api/people/${person.id}`, { version, ...body });
    expect((await change(1, { memberships: [{ studioId: harbour, role: 'lead' }] })).body).toMatchObject({
      version: 2,
      memberships: [{ studioId: harbour, role: 'lead' }],
    });
    stop();
    expect(told).toEqual([{ personId: person.id, reason: 'role-changed', sessionId: null }]);
    expect((await gateway.call(person, 'GET', '/api/me')).body.code).toBe('session-ended');
    expect((await change(1, { disabled: true })).body.code).toBe('changed-meanwhile');
    expect((await change(2, { memberships: [] })).status).toBe(400);
    expect((await change(2, { disabled: true })).body.state).toBe('disabled');
    expect((await change(3, { disabled: false })).body.state).toBe('active');
  });

  it('never takes the last owner away, even when two take it from each other at once', async () => {
    const path = (id: string) => `/api/people/${id}`;
    const last = await gateway.call(owner, 'PATCH', path(owner.id), {
      version: 1,
      owner: false,
      ...maker(harbour),
    });
    expect(last).toMatchObject({ status: 409, body: { code: 'conflict' } });
    expect((await gateway.call(owner, 'PATCH', path(owner.id), { version: 1, disabled: true })).status).toBe(
      409,
    );
    const second = await gateway.addPerson('Otto Owner', { owner: true });
    const outcomes = await Promise.all([
      gateway.call(owner, 'PATCH', path(second.id), { version: 1, owner: false, ...maker(hill) }),
      gateway.call(second, 'PATCH', path(owner.id), { version: 1, owner: false, ...maker(hill) }),
    ]);
    expect(outcomes.map(({ status }) => status).filter((status) => status === 200)).toHaveLength(1);
    const [row] = await gateway.query<{ n: string }[]>(
      `SELECT COUNT(*) AS n FROM person WHERE owner = 1 AND disabled = 0 AND password_hash IS NOT NULL`,
    );
    expect(Number(row?.n)).toBe(1);
    await gateway.query('UPDATE person SET owner = 1 WHERE id = ?', [owner.id]);
    owner = { ...owner, ...(await gateway.signIn(owner.id)) };
  });

  it('takes somebody who leaves a studio off the recipients of its alerts', async () => {
    const person = await gateway.addPerson('Rae Recipient', { memberships: { [hill]: 'maker' } });
    const [studio] = (await gateway.call(owner, 'GET', '/api/studios')).body.filter(
      ({ id }: { id: string }) => id === hill,
    );
    const { id: _id, role: _role, ...fields } = studio;
    const reached = await gateway.call(owner, 'PUT', `/api/studios/${hill}`, {
      ...fields,
      recipients: [person.id, lead.id],
    });
    expect(reached.status).toBe(200);
    await gateway.call(owner, 'PATCH', `/api/people/${person.id}`, { version: 1, ...maker(harbour) });
    const after = (await gateway.call(owner, 'GET', '/api/studios')).body.find(
      ({ id }: { id: string }) => id === hill,
    );
    expect(after.recipients).toEqual([lead.id]);
    expect(after.version).toBe(reached.body.version + 1);
  });

  it('writes who changed what into the audit trail, newest first, for owners only', async () => {
    const person = await gateway.addPerson('Ada Audited', { memberships: { [harbour]: 'maker' } });
    await gateway.call(owner, 'PATCH', `/api/people/${person.id}`, { version: 1, disabled: true });
    await gateway.call(owner, 'PATCH', `/api/people/${person.id}`, { version: 2, disabled: false });
    const trail = (await gateway.call(owner, 'GET', `/api/audit?thingId=${person.id}`)).body;
    expect(
      trail.map(({ who, action, to }: { who: string; action: string; to: { disabled: boolean } }) => [
        who,
        action,
        to.disabled,
      ]),
    ).toEqual([
      ['Olive Owner', 'changed', false],
      ['Olive Owner', 'changed', true],
    ]);
    const older = (await gateway.call(owner, 'GET', `/api/audit?thingId=${person.id}&before=${trail[0].id}`))
      .body;
    expect(older).toEqual([trail[1]]);
    expect(trail[1]).toMatchObject({ from: { disabled: false }, address: '127.0.0.1', thing: 'person' });
    expect((await gateway.call(owner, 'GET', '/api/audit?before=x')).status).toBe(400);
    expect((await gateway.call(lead, 'GET', '/api/audit')).status).toBe(403);
  });
});
