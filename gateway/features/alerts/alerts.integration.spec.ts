import { randomUUID } from 'node:crypto';
import { pino } from 'pino';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Alert } from '#shared/contract/alerts';
import type { RoomNow } from '#shared/contract/overview';
import { openTestDatabase, type TestDatabase } from '../../database/test-database.js';
import { createFeeds, type Feeds } from '../../feeds.js';
import type { Actor } from '../../http/actor.js';
import { enrolTestFloor, type TestFloor } from '../../intake/test-floor.js';
import type { StandingBatch } from '../estimates/standing.js';
import { AlertWatcher } from './alert-watcher.js';
import { Alerts } from './alerts.js';
import { AlertsRepository } from './alerts-repository.js';
import { Deliveries } from './deliveries.js';
import { WatchedRepository } from './watched-repository.js';

const MINUTE = 60_000;
const START = Date.parse('2026-05-04T12:00:00Z');
const soy: StandingBatch = {
  ...{ id: randomUUID(), code: 'L-118', waxFamily: 'soy-container', frosting: 'yes', frostingFrom: 25 },
  ...{ shelf: 'Rack 1, shelf 2', slipDays: 0, slipIfItStaysDays: 0 },
};

/** The watcher on a real database, over a room whose air the spec decides. */
describe('alerts', () => {
  let database: TestDatabase;
  let floor: TestFloor;
  let feeds: Feeds;
  let alerts: Alerts;
  let watcher: AlertWatcher;
  let now = START;
  let air: Partial<RoomNow> = {};
  const people = { lead: '', owner: '', viewer: '' };

  beforeAll(async () => {
    database = await openTestDatabase(new Date(START));
  });
  afterAll(() => database.close());

  const person = async (name: string, owner: boolean) => {
    const id = randomUUID();
    await database.dataSource.query(
      'INSERT INTO person (id, email, name, password_hash, owner, created_at) VALUES (?, ?, ?, ?, ?, ?)',
      [id, `${name}-${id}@example.org`, name, 'x', owner ? 1 : 0, new Date(START)],
    );
    return id;
  };

  beforeEach(async () => {
    await database.dataSource.query('DELETE FROM membership');
    await database.dataSource.query('DELETE FROM person');
    for (const table of [
      'rule_state',
      'alert',
      'alert_step',
      'outbox',
      'notice',
      'sensor',
      'room',
      'studio',
    ]) {
      await database.dataSource.query(`DELETE FROM ${table}`);
    }
    floor = await enrolTestFloor(database.dataSource, 1);
    people.lead = await person('Ines', false);
    people.owner = await person('Marit', true);
    people.viewer = await person('Nia', false);
    await database.dataSource.query('INSERT INTO membership (person_id, studio_id, role) VALUES ?', [
      [
        [people.lead, floor.studioId, 'lead'],
        [people.viewer, floor.studioId, 'viewer'],
      ],
    ]);
    now = START;
    await startWatcher();
  });

  async function startWatcher(): Promise<void> {
    feeds = createFeeds((error) => {
      throw error;
    });
    const repository = new AlertsRepository(database.dataSource);
    const watched = new WatchedRepository(database.dataSource);
    const clock = { now: () => now, speed: () => 1 };
    alerts = new Alerts({
      ...{ repository, watched, clock, changed: feeds.alerts },
      touched: (studioId, roomId) => feeds.rules.announce({ studioId, roomId }),
    });
    watcher = new AlertWatcher({
      ...{ repository, watched, clock, log: pino({ level: 'silent' }) },
      deliveries: new Deliveries({
        publicUrl: 'http://stillroom.test',
        mailsSince: (ids, since) => repository.mailsSince(ids, since),
        systemNow: () => now,
      }),
      roomsNow: { of: (ids) => [...ids].map(roomNow) },
      histories: { peek: () => null, end: 0 },
      standing: { inRoom: () => [soy] },
      stuckSensors: async () => new Map(),
      committed: feeds.readings,
      batches: feeds.batches,
      layout: feeds.layout,
      rules: feeds.rules,
      people: feeds.people,
      changed: feeds.alerts,
      notices: feeds.notices,
    });
    await watcher.start();
    await watcher.stop();
    await watcher.start();
  }

  const roomNow = (roomId: string): RoomNow => ({
    roomId,
    ...{ celsius: 20, humidity: 45, dewPoint: 7.8, at: new Date(now).toISOString(), stale: false },
    ...{ condition: 'fine', since: null, heatLimit: 25, peakToday: null, slippedHours: 0, battery: null },
    ...air,
  });

  /** Lets minutes pass with a reading each. */
  async function minutes(count: number, celsius: number, step = 1): Promise<void> {
    for (let minute = 0; minute < count; minute += step) {
      now += step * MINUTE;
      air = { celsius };
      feeds.readings.announce([
        {
          ...{ sensorNo: floor.devices[0]!.sensorNo, sensorId: 'sensor', studioId: floor.studioId },
          ...{ roomId: floor.roomId, at: now, celsius, humidity: 45, battery: null, future: false },
        },
      ]);
      await watcher.tick();
    }
  }

  const actor = (): Actor => ({ personId: people.lead, name: 'Ines', role: 'lead', address: '' });
  const open = () => alerts.list(floor.studioId, 'open', undefined, 50);
  const mails = () =>
    database.dataSource.query<{ recipient: string; subject: string; body: string }[]>(
      'SELECT recipient, subject, body FROM outbox ORDER BY id',
    );
  const only = async (): Promise<Alert> => {
    const list = await open();
    expect(list).toHaveLength(1);
    return list[0]!;
  };

  it('raises, names room, value, limit, batches and what to do by mail and in the app, and clears', async () => {
    await minutes(17, 26.1);
    const alert = await only();
    expect(alert).toMatchObject({
      state: 'open',
      facts: { kind: 'too-warm', severity: 'warning', value: 26.1, limit: 25, batches: [{ code: 'L-118' }] },
    });
    const [mail, ...more] = await mails();
    expect(more).toEqual([]);
    expect(mail?.recipient).toMatch(/^Ines-/);
    expect(mail?.subject).toBe('Spec studio, Spec room: Too warm for 1 soy batch since 13:01');
    expect(mail?.body).toContain('26.1 °C, limit 25.0 °C');
    expect(mail?.body).toContain('L-118 (Rack 1, shelf 2)');
    expect(mail?.body).toContain('Move L-118, or cool the room by 1.1 °C.');
    expect(mail?.body).toContain(`http://stillroom.test/alerts/${alert.id}?studio=${floor.studioId}`);
    const noticed = await database.dataSource.query<{ person_id: string }[]>('SELECT person_id FROM notice');
    expect(noticed.map(({ person_id }) => person_id).sort()).toEqual([people.lead, people.owner].sort());

    await alerts.acknowledge(floor.studioId, alert.id, 'Opened the skylight.', actor());
    await minutes(18, 24.2);
    expect(await open()).toEqual([]);
    const [past] = await alerts.list(floor.studioId, 'past', undefined, 50);
    expect(past).toMatchObject({
      state: 'cleared',
      acknowledged: { by: 'Ines', note: 'Opened the skylight.' },
    });
    const { steps } = await alerts.get(floor.studioId, alert.id);
    expect(steps.map(({ what }) => what)).toEqual(['raised', 'acknowledged', 'cleared']);
    expect((await mails()).at(-1)).toMatchObject({ subject: 'Over: Spec studio, Spec room' });
  });

  it('what nobody looked at stays in sight when it is over, until somebody does', async () => {
    await minutes(17, 26.1);
    await minutes(18, 24.2);
    const alert = await only();
    expect(alert.state).toBe('returned');
    await alerts.acknowledge(floor.studioId, alert.id, '', actor());
    expect(await open()).toEqual([]);
  });

  it('a restart neither re-fires nor forgets, pending or raised', async () => {
    await minutes(10, 26.1);
    await watcher.stop();
    await startWatcher();
    await minutes(7, 26.1);
    const alert = await only();
    expect(alert.facts.since).toBe(new Date(START + MINUTE).toISOString());
    await watcher.stop();
    await startWatcher();
    await minutes(30, 26.1);
    expect((await only()).id).toBe(alert.id);
    await minutes(18, 24.2);
    expect((await only()).state).toBe('returned');
    const subjects = (await mails()).map(({ subject }) => subject.slice(0, subject.indexOf(':')));
    expect(subjects).toEqual(['Spec studio, Spec room', 'Still open', 'Over', 'Over']);
  });

  it('tells the next one when nobody acknowledges, the owner last', async () => {
    await minutes(17, 26.1);
    await minutes(31, 26.1);
    const told = await mails();
    expect(told.map(({ recipient }) => recipient.split('-')[0])).toEqual(['Ines', 'Marit']);
    expect(told[1]?.subject).toMatch(/^Still open/);
    await minutes(120, 26.1, 5);
    expect(await mails()).toHaveLength(2);
  });

  it('holds quiet hours, also on the night when the clocks change, and lets what is critical pass', async () => {
    await database.dataSource.query('UPDATE studio SET quiet_from = 1320, quiet_to = 420 WHERE id = ?', [
      floor.studioId,
    ]);
    now = Date.parse('2026-03-28T22:30:00Z');
    feeds.layout.announce({ studioId: floor.studioId, roomId: null });
    await minutes(17, 26.1);
    const held = await only();
    expect(await mails()).toEqual([]);
    expect((await alerts.get(floor.studioId, held.id)).steps.map(({ what }) => what)).toEqual([
      'raised',
      'held-quiet',
    ]);
    // 07:00 in Lisbon is 06:00 UTC after the change.
    now = Date.parse('2026-03-29T05:58:00Z');
    await minutes(1, 26.1);
    expect(await mails()).toEqual([]);
    await minutes(2, 26.1);
    expect(await mails()).toHaveLength(1);
    now = Date.parse('2026-03-29T22:30:00Z');
    await minutes(3, 28.6);
    expect((await mails()).at(-1)?.subject).toContain('Too warm');
    expect((await only()).facts.severity).toBe('critical');
  });

  it('shelves for a time that ends, then tells again if it is still so', async () => {
    await minutes(17, 26.1);
    const { id } = await only();
    await alerts.shelve(floor.studioId, id, 2, 'The fitter comes at three.', actor());
    await minutes(60, 26.1, 5);
    expect(await open()).toEqual([]);
    expect(await alerts.list(floor.studioId, 'shelved', undefined, 50)).toMatchObject([
      { shelved: { by: 'Ines', reason: 'The fitter comes at three.' } },
    ]);
    const before = (await mails()).length;
    await minutes(65, 26.1, 5);
    expect((await only()).shelved).toBeNull();
    expect((await mails()).length).toBe(before + 1);
  });

  it('silence does not clear; a rule that is switched off does', async () => {
    await minutes(17, 26.1);
    air = { stale: true, celsius: 26.1 };
    now += 3 * 3_600_000;
    feeds.layout.announce({ studioId: floor.studioId, roomId: floor.roomId });
    await watcher.tick();
    const list = await open();
    expect(list.find(({ facts }) => facts.kind === 'too-warm')?.state).toBe('open');
    const rules = await alerts.rules(floor.studioId, floor.roomId);
    const off = rules.map((rule) => (rule.kind === 'too-warm' ? { ...rule, enabled: false } : rule));
    await alerts.setRules(floor.studioId, floor.roomId, off, actor());
    await minutes(2, 26.1);
    expect((await open()).find(({ facts }) => facts.kind === 'too-warm')?.state).toBe('returned');
  });

  it('hands over to somebody of the studio only, and knows no alert of another studio', async () => {
    await minutes(17, 26.1);
    const { id } = await only();
    expect((await alerts.handOver(floor.studioId, id, people.owner, 'Yours.', actor())).holder?.name).toBe(
      'Marit',
    );
    await expect(alerts.handOver(floor.studioId, id, people.viewer, '', actor())).rejects.toMatchObject({
      code: 'bad-input',
    });
    const other = await enrolTestFloor(database.dataSource, 1);
    await expect(alerts.get(other.studioId, id)).rejects.toMatchObject({ code: 'not-found' });
    await expect(alerts.acknowledge(other.studioId, id, '', actor())).rejects.toMatchObject({
      code: 'not-found',
    });
  });

  it('raises silence once the sensor has said nothing for fifteen minutes', async () => {
    const { sensorNo } = floor.devices[0]!;
    await database.dataSource.query(
      'INSERT INTO reading (sensor_no, at, received_at, t_micro, rh_micro, flags) VALUES (?, ?, ?, 20000000, 45000000, 0)',
      [sensorNo, new Date(START), new Date(START)],
    );
    await watcher.stop();
    await startWatcher();
    now = START + 14 * MINUTE;
    await watcher.stop();
    await startWatcher();
    await watcher.tick();
    expect(await open()).toEqual([]);
    now = START + 16 * MINUTE;
    await watcher.stop();
    await startWatcher();
    await watcher.tick();
    expect(await only()).toMatchObject({ facts: { kind: 'silent', sensorName: 'Sensor 0' } });
  });
});
