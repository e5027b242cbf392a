import { randomUUID } from 'node:crypto';
import express from 'express';
import { pino } from 'pino';
import request from 'supertest';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { BatchPage } from '#shared/contract/batches';
import type { StudioWall } from '#shared/contract/overview';
import type { Studio } from '#shared/contract/studios';
import { cellOf } from '#shared/cure/grid';
import type { BatchesChanged, CellsChanged, CommittedReading, LayoutChanged } from './announcements.js';
import { assembleFloor, type Floor } from './assemble-floor.js';
import { cureDaysByHand } from './features/estimates/test-cure-by-hand.js';
import { DAY, NOON, TestFloor, type TestRoom, type TestSensor } from './features/estimates/test-floor.js';
import { Feed } from './feed.js';
import { RollupWorker } from './history/rollup-worker.js';
import { mountAll } from './http/mount.js';
import { ProblemError } from './http/problem-error.js';

const failed = (error: unknown) => {
  throw error;
};

describe('the cure floor over HTTP, from committed readings to pages', () => {
  let ground: TestFloor;
  let floor: Floor;
  let worker: RollupWorker;
  let room: TestRoom;
  let sensor: TestSensor;
  let designId: string;
  const committed = new Feed<readonly CommittedReading[]>(failed);
  const cells = new Feed<CellsChanged>(failed);
  const layout = new Feed<LayoutChanged>(failed);
  const batches = new Feed<BatchesChanged>(failed);
  const app = express();
  app.use(express.json());

  /** Readings every five minutes, stored, marked and announced as the intake does it. */
  async function store(from: number, to: number, celsius: (at: number) => number): Promise<void> {
    const rows: unknown[][] = [];
    for (let at = from; at < to; at += 300_000)
      rows.push([sensor.no, new Date(at), new Date(at), Math.round(celsius(at) * 1e6), 48_000_000, 0]);
    const marks = new Set(rows.map((row) => Math.floor((row[1] as Date).getTime() / 300_000) * 300_000));
    await ground.sql('INSERT INTO reading (sensor_no, at, received_at, t_micro, rh_micro, flags) VALUES ?', [
      rows,
    ]);
    await ground.sql('INSERT INTO dirty_mark (sensor_no, bucket) VALUES ?', [
      [...marks].map((mark) => [sensor.no, new Date(mark)]),
    ]);
    const { id: sensorId, no: sensorNo } = sensor;
    const { id: roomId, studioId } = room;
    committed.announce(
      rows.map(([, at, , micro]) => ({
        ...{ sensorId, sensorNo, roomId, studioId, at: (at as Date).getTime() },
        ...{ celsius: (micro as number) / 1e6, humidity: 48, battery: 90, future: false },
      })),
    );
    await worker.drain();
    await floor.histories.settled();
  }

  beforeAll(async () => {
    ground = await TestFloor.open();
    const { dataSource } = ground.database;
    room = await ground.addRoom();
    sensor = await ground.addSensor(room, 0.3);
    designId = (await ground.addDesign('soy-container')).id;
    const studio: Studio = {
      ...{ id: ground.studioId, name: 'Larkrise West', timeZone: 'Europe/Lisbon', unit: 'C', address: '' },
      ...{ pressureHpa: 1013.25, quietFrom: null, quietTo: null, recipients: [], escalateAfterMinutes: 30 },
      ...{ version: 1, role: 'maker' },
    };
    floor = assembleFloor({
      ...{ dataSource, clock: ground.clock, committed, cells, layout, batches, failed },
      studios: { list: async () => [studio] },
      alerts: { openIn: async () => [] },
    });
    worker = new RollupWorker({ dataSource, committed, cells, log: pino({ level: 'silent' }) });
    await floor.start();
    const maker = await ground.actor('maker');
    mountAll(app, floor.mounted, {
      authenticate: async (bearer) =>
        bearer === null
          ? null
          : {
              ...{ id: maker.personId, name: maker.name, email: 'm@example.org', sessionId: randomUUID() },
              ...{ owner: false, memberships: [{ studioId: ground.studioId, role: 'maker' as const }] },
            },
      studioExists: async () => true,
    });
    app.use(
      (
        error: unknown,
        _request: express.Request,
        response: express.Response,
        _next: express.NextFunction,
      ) => {
        if (!(error instanceof ProblemError)) throw error;
        response.status(error.status).json({ code: error.code, detail: error.detail });
      },
    );
  });
  afterAll(async () => {
    await floor.stop();
    await ground.close();
  });

  const get = (path: string) => request(app).get(path).set('Authorization', 'Bearer x');
  const post = (path: string, body: object) =>
    request(app).post(path).set('Authorization', 'Bearer x').send(body);

  it('carries readings through rollups into the cure age of a poured batch, equal to an independent sum', async () => {
    const celsius = (at: number) => 21 + 3 * Math.sin(at / 7_000_000) + Math.sin(at / 900_000);
    await store(NOON - 20 * DAY, NOON, celsius);
    const pouredAt = NOON - 9 * DAY + 4 * 60_000;
    const poured = await post(`/api/studios/${ground.studioId}/batches`, {
      designId,
      vessels: 20,
      pouredAt: new Date(pouredAt).toISOString(),
      shelfId: room.shelfIds[1],
    });
    expect(poured.status).toBe(200);
    const page = poured.body as BatchPage;
    // Both readings of a cell count alike, with the sensor's offset of 0.3 K.
    const byHand = cureDaysByHand(
      (cell) => {
        const micro = [0, 300_000].map((offset) => Math.round(celsius(cell * 600_000 + offset) * 1e6));
        return ((micro[0] ?? 0) + (micro[1] ?? 0)) / 2e6 + 0.3;
      },
      { begin: cellOf(NOON - 20 * DAY), from: cellOf(pouredAt), to: cellOf(NOON) },
      50,
      27,
    );
    expect(Math.abs((page.card.cureAgeDays ?? 0) - byHand)).toBeLessThan(1e-6);
    expect(page.estimate?.gaps).toEqual([]);

    ground.clock.at += 20 * 60_000;
    await store(NOON, NOON + 20 * 60_000, () => 26);
    const told: string[] = [];
    const stop = batches.listen(({ batchIds }) => told.push(...batchIds));
    await floor.histories.tick();
    stop();
    expect(told).toContain(page.card.id);
    const later = (await get(`/api/studios/${ground.studioId}/batches/${page.card.id}`)).body as BatchPage;
    expect(later.card.cureAgeDays ?? 0).toBeGreaterThan(byHand + (1.3 * 20) / 1440);
    const wall = (await get('/api/overview')).body as { studios: StudioWall[] };
    const shown = wall.studios[0]?.rooms.find(({ id }) => id === room.id);
    expect(shown?.now).toMatchObject({ condition: 'heat', heatLimit: 25, battery: 90 });
    expect(shown?.ribbon.celsius.at(-1)).toBeCloseTo(26.3, 6);
    expect(wall.studios[0]?.batches.find(({ id }) => id === page.card.id)?.atRisk).toBe(true);
  });

  it('refuses in words and with the right status', async () => {
    const list = await get(`/api/studios/${ground.studioId}/batches`);
    const { batches: cards } = list.body as { batches: { id: string; version: number }[] };
    const [card] = cards;
    const path = `/api/studios/${ground.studioId}/batches/${card?.id ?? ''}/move`;
    const body = { version: (card?.version ?? 0) + 1, shelfId: room.shelfIds[0], overfill: false };
    expect((await post(path, body)).status).toBe(409);
    expect((await get(`/api/studios/${randomUUID()}/batches`)).status).toBe(404);
    expect((await post('/api/waxes', { name: 'X', family: 'soy-container' })).status).toBe(403);
    expect((await request(app).get('/api/overview')).status).toBe(401);
    expect((await get(`/api/studios/${ground.studioId}/batches?limit=1000`)).status).toBe(400);
  });
});
