import { randomUUID } from 'node:crypto';
import { type Socket, io } from 'socket.io-client';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ALL_ROUTES } from '#shared/contract/all-routes';
import {
  type ClientToServer,
  FULL_FRAME_PERMISSIONS,
  LIVE_PERMISSIONS,
  type LiveWelcome,
  type ServerToClient,
} from '#shared/contract/live';
import { type Permission, type Role, PERMISSIONS } from '#shared/contract/roles';
import type { RouteDefinition } from '#shared/contract/route';
import { type Answer, TestGateway, type TestPerson } from '../test-gateway.js';

/** Everybody who may come to the door, with the role held in the studio that is asked for. */
const VISITORS = [
  'nobody',
  'owner',
  'lead',
  'maker',
  'viewer',
  'lead of another studio',
  'without a studio',
] as const;
type Visitor = (typeof VISITORS)[number];

const ROLE: Record<Visitor, Role | null> = {
  nobody: null,
  owner: 'owner',
  lead: 'lead',
  maker: 'maker',
  viewer: 'viewer',
  'lead of another studio': null,
  'without a studio': null,
};
/** Roles held anywhere, for pages of the whole company. */
const ANYWHERE: Record<Visitor, Role | null> = { ...ROLE, 'lead of another studio': 'lead' };

const allows = (permission: Permission, role: Role | null) =>
  role !== null && (PERMISSIONS[permission] as readonly Role[]).includes(role);

/** What the door must say, from the table alone: a status, or that the visitor gets through to the feature. */
function expected(route: RouteDefinition, visitor: Visitor): 401 | 403 | 404 | 'through' {
  if (route.scope === 'public') return 'through';
  if (visitor === 'nobody') return 401;
  if (route.scope === 'self') return 'through';
  if (route.permission === null) throw new Error(`${route.path} names no permission`);
  if (route.scope === 'company') return allows(route.permission, ANYWHERE[visitor]) ? 'through' : 403;
  if (ROLE[visitor] === null) return 404;
  return allows(route.permission, ROLE[visitor]) ? 'through' : 403;
}

/** What the door said; a refusal of the feature behind it counts as through. */
function observed({ status, body }: Answer, route: RouteDefinition): number | 'through' {
  if (status === 401 && (route.scope !== 'public' || body.code === 'sign-in-needed'))
    return route.scope === 'public' ? 'through' : 401;
  if (status === 403 && body.code === 'forbidden' && body.detail.startsWith('Your role does not allow this'))
    return 403;
  if (status === 404 && body.detail.startsWith('This studio does not exist')) return 404;
  if (status === 404 && body.detail.startsWith('There is no such address')) throw new Error('not mounted');
  if (status >= 500) throw new Error(`status ${status}`);
  return 'through';
}

describe('who may do what', () => {
  let gateway: TestGateway;
  let studio: string;
  let otherStudio: string;
  const people = new Map<Visitor, TestPerson>();

  beforeAll(async () => {
    gateway = await TestGateway.open();
    studio = await gateway.addStudio('Harbour');
    otherStudio = await gateway.addStudio('Hill');
    people.set('owner', await gateway.addPerson('Olive Owner', { owner: true }));
    for (const role of ['lead', 'maker', 'viewer'] as const)
      people.set(role, await gateway.addPerson(`Ash ${role}`, { memberships: { [studio]: role } }));
    people.set(
      'lead of another studio',
      await gateway.addPerson('Farah Foreign', { memberships: { [otherStudio]: 'lead' } }),
    );
    people.set('without a studio', await gateway.addPerson('Wren Without'));
  });
  afterAll(() => gateway.close());

  const mountedRoutes = () => {
    const mounted = new Set(gateway.gateway.mounted.map(({ route }) => route));
    return ALL_ROUTES.filter(({ route }) => mounted.has(route));
  };

  function pathOf(route: RouteDefinition, studioId: string): string {
    return route.path.replace(':studioId', studioId).replaceAll(/:(\w+)/g, () => randomUUID());
  }

  describe.each(VISITORS)('%s', (visitor) => {
    it.each(ALL_ROUTES.map(({ name, route }) => [name, route] as const))('%s', async (_name, route) => {
      const who = people.get(visitor) ?? null;
      const answer = await gateway.call(who, route.method, pathOf(route, studio));
      expect(observed(answer, route)).toBe(expected(route, visitor));
    });
  });

  it('answers a studio that does not exist like a foreign one, the owner too', async () => {
    const foreigner = people.get('lead of another studio')!;
    for (const { name, route } of mountedRoutes().filter(({ route: { scope } }) => scope === 'studio')) {
      const foreign = await gateway.call(foreigner, route.method, pathOf(route, studio));
      const madeUp = await gateway.call(foreigner, route.method, pathOf(route, randomUUID()));
      const byOwner = await gateway.call(people.get('owner')!, route.method, pathOf(route, randomUUID()));
      const { status, body } = foreign;
      for (const answer of [madeUp, byOwner])
        expect([name, answer.status, answer.body.detail]).toEqual([name, status, body.detail]);
    }
  });

  it('takes a new role at the next request and an ended session at once', async () => {
    const person = await gateway.addPerson('Sam Shift', { memberships: { [studio]: 'viewer' } });
    const sensors = `/api/studios/${studio}/sensors`;
    expect((await gateway.call(person, 'GET', sensors)).status).toBe(403);
    await gateway.query(`UPDATE membership SET role = 'maker' WHERE person_id = ?`, [person.id]);
    expect((await gateway.call(person, 'GET', sensors)).status).toBe(200);
    await gateway.query('UPDATE session SET ended_at = ? WHERE id = ?', [new Date(), person.sessionId]);
    expect(await gateway.call(person, 'GET', sensors)).toMatchObject({
      status: 401,
      body: { code: 'session-ended' },
    });
  });

  describe('the live connection', () => {
    type Client = Socket<ServerToClient, ClientToServer>;
    const clients: Client[] = [];
    afterAll(() => clients.forEach((client) => client.disconnect()));

    function open(visitor: Visitor): Promise<{ client: Client; welcome: LiveWelcome }> {
      const token = people.get(visitor)?.token;
      const client: Client = io(gateway.url, {
        transports: ['websocket'],
        reconnection: false,
        forceNew: true,
        auth: token === undefined ? {} : { token },
      });
      clients.push(client);
      return new Promise((resolve, reject) => {
        client.once('welcome', (welcome) => resolve({ client, welcome }));
        client.once('connect_error', reject);
      });
    }

    it('lets nobody in without a token', async () => {
      await expect(open('nobody')).rejects.toMatchObject({ data: { code: 'sign-in-needed' } });
    });

    it.each(VISITORS.filter((visitor) => visitor !== 'nobody'))('%s', async (visitor) => {
      const { client, welcome } = await open(visitor);
      const role = ROLE[visitor];
      const hears = allows(LIVE_PERMISSIONS.frame, role);
      expect(welcome.studios.some(({ studioId }) => studioId === studio)).toBe(hears);
      const resynced = await client.emitWithAck('resync', studio);
      expect(resynced !== null).toBe(allows(LIVE_PERMISSIONS.resync, role));
      expect(await client.emitWithAck('resync', randomUUID())).toBeNull();
      expect(await client.emitWithAck('token', 'nonsense')).toBe(false);
      expect(await client.emitWithAck('token', people.get(visitor)!.token)).toBe(true);
    });

    it('sends layout, frames and alerts to those who may have them', async () => {
      const full = (role: Role | null) =>
        FULL_FRAME_PERMISSIONS.every((permission) => allows(permission, role));
      const heard = new Map<Visitor, string[]>();
      const owner = await open('owner');
      for (const visitor of VISITORS.filter((one) => one !== 'nobody')) {
        const { client } = visitor === 'owner' ? owner : await open(visitor);
        const events: string[] = [];
        heard.set(visitor, events);
        client.on('layout', ({ studioId }) => events.push(`layout ${studioId === studio}`));
        client.on('frame', (frame) => events.push(`frame of ${frame.alerts.length} alerts`));
      }
      const roomId = randomUUID();
      await gateway.query(
        `INSERT INTO room (id, studio_id, name, band_low, band_high, humidity_high, swing_limit, slip_days, notes) VALUES (?,?,'Cellar',18,24,60,3,2,'')`,
        [roomId, studio],
      );
      const laidOut = new Promise((resolve) => owner.client.once('layout', resolve));
      gateway.gateway.feeds.layout.announce({ studioId: studio, roomId });
      await laidOut;
      const framed = new Promise((resolve) => owner.client.once('frame', resolve));
      gateway.gateway.feeds.batches.announce({ studioId: studio, batchIds: [randomUUID()] });
      await framed;
      const other = new Promise((resolve) => owner.client.once('layout', resolve));
      gateway.gateway.feeds.layout.announce({ studioId: otherStudio, roomId: null });
      await other;
      for (const [visitor, events] of heard) {
        const role = ROLE[visitor];
        const hears = allows(LIVE_PERMISSIONS.layout, role);
        const own = new Set(events.filter((event) => event !== 'layout false'));
        expect([visitor, [...own]]).toEqual([visitor, hears ? ['layout true', 'frame of 0 alerts'] : []]);
        const hearsOther = role === 'owner' || visitor === 'lead of another studio';
        await expect.poll(() => events.includes('layout false')).toBe(hearsOther);
        expect(full(role)).toBe(role !== null && role !== 'viewer');
      }
    });

    it('cuts a person whose role the owner changes', async () => {
      const person = await gateway.addPerson('Cleo Cut', { memberships: { [studio]: 'maker' } });
      people.set('without a studio', person);
      const { client } = await open('without a studio');
      const goodbye = new Promise((resolve) => client.once('goodbye', resolve));
      const answer = await gateway.call(people.get('owner')!, 'PATCH', `/api/people/${person.id}`, {
        version: 1,
        memberships: [{ studioId: studio, role: 'viewer' }],
      });
      expect(answer.status).toBe(200);
      expect(await goodbye).toEqual({ reason: 'role-changed' });
      expect((await gateway.call(person, 'GET', '/api/me')).status).toBe(401);
    });
  });
});
