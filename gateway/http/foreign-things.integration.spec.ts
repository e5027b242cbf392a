import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ALL_ROUTES } from '#shared/contract/all-routes';
import type { RouteDefinition } from '#shared/contract/route';
import { TestGateway, type TestPerson } from '../test-gateway.js';

/** A studio with one of everything that has an id. */
interface Place {
  readonly studioId: string;
  readonly lead: TestPerson;
  readonly ids: Readonly<Record<'roomId' | 'rackId' | 'sensorId' | 'batchId' | 'alertId', string>>;
  readonly shelfId: string;
}

const LIMITS = { bandLow: 18, bandHigh: 24, heatLimit: null, humidityHigh: 60, swingLimit: 3, slipDays: 2 };
const PERIOD = '?from=2026-05-01T00:00:00.000Z&to=2026-05-02T00:00:00.000Z';
const NOW = new Date(Date.now() - 60_000).toISOString();

/** A valid request for every route about a single thing of a studio, so that only its id can be what is refused. */
const VALID: Record<string, { query?: string; body?: (place: Place) => object | [] }> = {
  'rooms.change': { body: () => ({ name: 'Loft', limits: LIMITS, version: 1 }) },
  'rooms.remove': {},
  'rooms.series': { query: PERIOD },
  'rooms.measures': { query: PERIOD },
  'racks.create': { body: () => ({ name: 'Wall side', shelves: [{ capacity: 12 }] }) },
  'racks.change': {
    body: ({ shelfId }) => ({ name: 'Door side', shelves: [{ id: shelfId, capacity: 40 }], version: 1 }),
  },
  'racks.remove': {},
  'sensors.change': { body: () => ({ name: 'Upper shelf', version: 1 }) },
  'sensors.newSecret': {},
  'sensors.retire': {},
  'batches.get': {},
  'batches.curve': {},
  'batches.move': { body: ({ shelfId }) => ({ version: 1, shelfId, at: NOW }) },
  'batches.end': { body: () => ({ version: 1, as: 'scrapped', reason: 'dropped' }) },
  'batches.recordTest': { body: () => ({ at: NOW, passed: true }) },
  'alerts.get': {},
  'alerts.acknowledge': { body: () => ({ note: 'on my way' }) },
  'alerts.shelve': { body: () => ({ hours: 1, reason: 'door was open' }) },
  'alerts.unshelve': {},
  'alerts.handOver': { body: ({ lead }) => ({ personId: lead.id }) },
  'alerts.rules': {},
  'alerts.setRules': { body: () => [] },
};

const ABOUT_ONE_THING = ALL_ROUTES.filter(
  ({ route }) => route.scope === 'studio' && /:(?!studioId)\w+/.test(route.path),
).map(({ name, route }) => [name, route] as const);

describe('things of another studio', () => {
  let gateway: TestGateway;
  let own: Place;
  let foreign: Place;

  beforeAll(async () => {
    gateway = await TestGateway.open();
    own = await furnish('Harbour');
    foreign = await furnish('Hill');
  });
  afterAll(() => gateway.close());

  /** A studio furnished by its lead, through the API as far as it goes. */
  async function furnish(name: string): Promise<Place> {
    const studioId = await gateway.addStudio(name);
    const lead = await gateway.addPerson(`Lead of ${name}`, { memberships: { [studioId]: 'lead' } });
    const add = async (path: string, body: object) => {
      const answer = await gateway.call(lead, 'POST', path, body);
      if (answer.status !== 200) throw new Error(`${path}: ${JSON.stringify(answer.body)}`);
      return answer.body;
    };
    const at = `/api/studios/${studioId}`;
    const room = await add(`${at}/rooms`, { name: 'Cellar', limits: LIMITS });
    const rack = await add(`${at}/rooms/${room.id}/racks`, {
      name: 'Door side',
      shelves: [{ capacity: 60 }],
    });
    const { sensor } = await add(`${at}/sensors`, { roomId: room.id, name: 'Lower shelf' });
    const wax = await add('/api/waxes', { name: `Soy of ${name}`, family: 'soy-container' });
    const design = await add('/api/designs', {
      ...{ name: `Meadow of ${name}`, waxId: wax.id, fragranceId: null, loadPercentOfWax: 0 },
      ...{ wick: 'C 8', vessel: 'Tumbler', vesselDiameterMm: 75, fillGrams: 180 },
    });
    const batch = await add(`${at}/batches`, { designId: design.id, vessels: 6, pouredAt: NOW });
    const alertId = randomUUID();
    const facts = {
      ...{ kind: 'too-warm', severity: 'warning', studioName: name, roomName: 'Cellar', sensorName: null },
      ...{ value: 26, worst: 27, limit: 25, dewPoint: null, since: NOW, lastHeardAt: null, batches: [] },
    };
    await gateway.query(
      `INSERT INTO alert (id, studio_id, room_id, kind, severity, state, facts, raised_at) VALUES (?,?,?,'too-warm','warning','open',?,?)`,
      [alertId, studioId, room.id, JSON.stringify(facts), new Date(NOW)],
    );
    const ids = { roomId: room.id, rackId: rack.id, sensorId: sensor.id, batchId: batch.card.id, alertId };
    return { studioId, lead, ids, shelfId: rack.shelves[0].id };
  }

  /** Asks in one studio for a thing of a place, with an otherwise valid request made for the studio. */
  function ask(who: TestPerson, name: string, route: RouteDefinition, inStudio: Place, thingOf: Place) {
    const path = route.path
      .replace(':studioId', inStudio.studioId)
      .replaceAll(/:(\w+)/g, (_whole, param: keyof Place['ids']) => thingOf.ids[param]);
    const { query = '', body } = VALID[name] ?? {};
    return gateway.call(who, route.method, path + query, body?.(inStudio));
  }

  /** Everything that could have been changed, as the database has it. */
  async function rows(): Promise<unknown> {
    const tables = [
      'room',
      'rack',
      'shelf',
      'sensor',
      'batch',
      'stay',
      'burn_verdict',
      'alert',
      'alert_step',
      'audit',
    ];
    return Promise.all(tables.map((table) => gateway.query(`SELECT * FROM ${table} ORDER BY 1, 2`)));
  }

  it('has a valid request for every route about a thing', () => {
    expect(Object.keys(VALID).sort()).toEqual(ABOUT_ONE_THING.map(([name]) => name).sort());
  });

  it.each(ABOUT_ONE_THING)('%s finds nothing of another studio and changes nothing', async (name, route) => {
    const before = await rows();
    expect(await ask(own.lead, name, route, own, foreign)).toMatchObject({
      status: 404,
      body: { code: 'not-found' },
    });
    expect(await ask(own.lead, name, route, foreign, foreign)).toMatchObject({ status: 404 });
    expect(await rows()).toEqual(before);
  });

  it('takes no shelf, room or person of another studio into the own', async () => {
    const at = `/api/studios/${own.studioId}`;
    const [design] = (await gateway.call(own.lead, 'GET', '/api/designs')).body;
    const before = await rows();
    const attempts = [
      ['POST', `${at}/batches`, { designId: design.id, vessels: 2, pouredAt: NOW, shelfId: foreign.shelfId }],
      ['POST', `${at}/batches/${own.ids.batchId}/move`, { version: 1, shelfId: foreign.shelfId }],
      ['POST', `${at}/sensors`, { roomId: foreign.ids.roomId, name: 'Stray' }],
      ['POST', `${at}/rooms/${foreign.ids.roomId}/racks`, { name: 'Stray', shelves: [{ capacity: 3 }] }],
      [
        'PUT',
        `${at}/racks/${own.ids.rackId}`,
        {
          name: 'Door side',
          version: 1,
          shelves: [
            { id: own.shelfId, capacity: 60 },
            { id: foreign.shelfId, capacity: 60 },
          ],
        },
      ],
      ['POST', `${at}/alerts/${own.ids.alertId}/hand-over`, { personId: foreign.lead.id }],
    ] as const;
    for (const [method, path, body] of attempts) {
      const { status } = await gateway.call(own.lead, method, path, body);
      expect([path, status >= 400 && status < 500]).toEqual([path, true]);
    }
    expect(await rows()).toEqual(before);
  });

  it('lists nothing of another studio', async () => {
    for (const list of ['rooms', 'racks', 'sensors', 'batches', 'alerts', 'quarantine']) {
      const answer = await gateway.call(own.lead, 'GET', `/api/studios/${own.studioId}/${list}`);
      expect(answer.status).toBe(200);
      const text = JSON.stringify(answer.body);
      for (const id of [foreign.studioId, ...Object.values(foreign.ids)]) expect(text).not.toContain(id);
      if (list !== 'quarantine') expect(text).toMatch(new RegExp(Object.values(own.ids).join('|')));
    }
    const walls = JSON.stringify((await gateway.call(own.lead, 'GET', '/api/overview')).body);
    expect(walls).toContain(own.ids.roomId);
    expect(walls).not.toContain(foreign.ids.roomId);
  });

  it.each(ABOUT_ONE_THING.filter(([, route]) => route.method !== 'DELETE'))(
    '%s is found by the lead of its own studio',
    async (name, route) => {
      expect([404, 401, 403, 500]).not.toContain(
        (await ask(foreign.lead, name, route, foreign, foreign)).status,
      );
    },
  );
});
