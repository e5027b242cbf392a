import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { roomRoutes } from '#shared/contract/rooms';
import { cellOf, cellStart } from '#shared/cure/grid';
import { RoomCellsRepository } from '../../history/room-cells-repository.js';
import type { ProblemError } from '../../http/problem-error.js';
import { Standing } from '../estimates/standing.js';
import { DAY, HOUR, NOON, TestFloor, type TestRoom } from '../estimates/test-floor.js';
import { RoomSeries } from './room-series.js';
import { RoomSeriesRepository } from './room-series-repository.js';
import { Rooms } from './rooms.js';
import { RoomsRepository } from './rooms-repository.js';

const iso = (at: number) => new Date(at).toISOString();

describe("a room's chart and measures on a real database", () => {
  let floor: TestFloor;
  let series: RoomSeries;
  let room: TestRoom;

  const chart = (from: number, to: number, role: 'lead' | 'viewer' = 'lead') =>
    series.series(room.studioId, room.id, { from: iso(from), to: iso(to) }, role);

  beforeAll(async () => {
    floor = await TestFloor.open();
    const { dataSource } = floor.database;
    series = new RoomSeries({
      repository: new RoomSeriesRepository(dataSource),
      cells: new RoomCellsRepository(dataSource),
      rooms: new Rooms(new RoomsRepository(dataSource), floor.clock, () => undefined),
      standing: { inRoom: (id) => new Standing(floor.estimates, floor.histories).inRoom(id) },
      clock: floor.clock,
    });
    room = await floor.addRoom();
  });
  afterAll(() => floor.close());

  it('pools trusted sensors with their offsets, keeps extremes, and shows silence as silence', async () => {
    const own = await floor.addRoom();
    const [a, b] = [await floor.addSensor(own, 0.5), await floor.addSensor(own, -0.5)];
    const untrusted = await floor.addSensor(own, 0, false);
    const [begin, now] = [cellOf(NOON - DAY), cellOf(NOON)];
    const silent = (cell: number) => cell >= begin + 30 && cell < begin + 36;
    await floor.record(a, begin, now, (cell) => (silent(cell) ? null : 20), 50);
    await floor.record(b, begin, now, (cell) => (silent(cell) ? null : 23), 60);
    await floor.record(untrusted, begin, now, () => 40);
    const reply = await series.series(own.studioId, own.id, { from: iso(NOON - DAY), to: iso(NOON) }, 'lead');
    expect(roomRoutes.series.reply.parse(reply)).toEqual(reply);
    expect(reply.stepMinutes).toBe(5);
    expect(reply.points).toHaveLength(288);
    const [first] = reply.points;
    // Means 20 ∓ 0.1 + 0.5 and 23 ∓ 0.1 − 0.5; extremes lie 0.05 K around each five-minute mean.
    expect(first?.t).toBeCloseTo(21.4, 6);
    expect(first?.tMin).toBeCloseTo(20.35, 6);
    expect(first?.tMax).toBeCloseTo(22.45, 6);
    expect(first?.rh).toBeCloseTo(55, 6);
    expect(first?.dewPoint).toBeCloseTo(12.0, 0);
    expect(reply.points.filter((point) => point.t === null)).toHaveLength(12);
    expect(reply.points[60]).toMatchObject({ t: null, dewPoint: null });
  });

  it('chooses a step that gives at most 2,000 points, whatever the span', async () => {
    const steps: [number, number][] = [
      [6 * HOUR, 5],
      [DAY, 5],
      [7 * DAY, 10],
      [30 * DAY, 30],
      [90 * DAY, 180],
      [366 * DAY, 360],
      [4 * 366 * DAY, 1440],
    ];
    for (const [span, minutes] of steps) {
      const reply = await chart(NOON - span + 7 * 60_000, NOON + 7 * 60_000);
      expect([span / DAY, reply.stepMinutes]).toEqual([span / DAY, minutes]);
      expect(reply.points.length).toBeLessThanOrEqual(2000);
      expect(reply.points.every((point) => Date.parse(point.at) < NOON)).toBe(true);
    }
  });

  it('draws years by the studio’s local days, 23 and 25 hours long on the nights when clocks change', async () => {
    const sensor = await floor.addSensor(room);
    // Lisbon changes its clocks on 29 March 2026: that local day begins at 00:00Z, the next one at 23:00Z.
    const starts = ['2026-03-28T00:00Z', '2026-03-29T00:00Z', '2026-03-29T23:00Z', '2026-03-30T23:00Z'];
    for (const [index, start] of starts.entries())
      await floor.sql(
        'INSERT INTO rollup (sensor_no, level, bucket, n, t_sum, t_min, t_max, rh_n, rh_sum) VALUES (?, 1440, ?, 2, ?, ?, ?, 0, 0)',
        [sensor.no, new Date(start), 2e6 * (10 + index), 1e6 * (8 + index), 1e6 * (15 + index)],
      );
    const reply = await chart(NOON - 4 * 366 * DAY, NOON);
    const points = reply.points.filter((point) => point.t !== null);
    expect(points.map((point) => [point.at, point.t, point.tMin, point.tMax, point.rh])).toEqual(
      starts.map((start, index) => [iso(Date.parse(start)), 10 + index, 8 + index, 15 + index, null]),
    );
  });

  it('measures swings by local days: an hour after local midnight belongs to the next day', async () => {
    const own = await floor.addRoom();
    const sensor = await floor.addSensor(own);
    const midnight = Date.parse('2026-03-29T23:00:00Z');
    const warm = (cell: number) =>
      cellStart(cell) >= midnight && cellStart(cell) < midnight + HOUR ? 27 : 20;
    await floor.record(sensor, cellOf(midnight - 23 * HOUR), cellOf(midnight + 24 * HOUR), warm);
    const measures = await series.measures(own.studioId, own.id, {
      from: iso(midnight - 23 * HOUR),
      to: iso(midnight + 25 * HOUR),
    });
    expect(roomRoutes.measures.reply.parse(measures)).toEqual(measures);
    expect(measures.observedHours).toBeCloseTo(47, 9);
    expect(measures.gapHours).toBeCloseTo(1, 9);
    // The 23-hour day has no swing, the next one of 7 K.
    expect(measures.dailySwing).toBeCloseTo(3.5, 6);
    expect(measures.inBand).toBeCloseTo(46 / 47, 9);
    expect(measures.meanCelsius).toBeCloseTo(20 + 7 / 47, 6);
    expect(measures.meanHumidity).toBeCloseTo(52, 6);
    expect(measures.swingsCounted).toBe(1);
  });

  it('marks pours, moves and alerts, and what is standing there with its frosting limit', async () => {
    const [own, next] = [await floor.addRoom(), await floor.addRoom()];
    const { id: soy } = await floor.addDesign('soy-container');
    const { id: paraffin } = await floor.addDesign('paraffin-container');
    await floor.addBatch(soy, NOON - 5 * DAY, [
      { room: own, from: NOON - 5 * DAY, to: NOON - 2 * DAY },
      { room: next, from: NOON - 2 * DAY, to: NOON - DAY },
      { room: own, from: NOON - DAY, to: NOON - HOUR },
      { room: own, from: NOON - HOUR, to: null, shelf: 1 },
    ]);
    await floor.addBatch(paraffin, NOON - 3 * DAY, [{ room: own, from: NOON - 2 * DAY, to: null }]);
    await floor.sql(
      `INSERT INTO alert (id, studio_id, room_id, kind, severity, state, facts, raised_at, cleared_at) VALUES (?,?,?,'too-warm','warning','cleared','{}',?,?)`,
      [randomUUID(), own.studioId, own.id, new Date(NOON - 4 * DAY), new Date(NOON - 4 * DAY + HOUR)],
    );
    await floor.restart();
    const period = { from: iso(NOON - 7 * DAY), to: iso(NOON) };
    const reply = await series.series(own.studioId, own.id, period, 'lead');
    expect(reply.marks.map((mark) => mark.kind)).toEqual(['pour', 'alert', 'move-out', 'move-in', 'move-in']);
    expect(reply.frostingLimits).toEqual([
      { celsius: 25, waxFamilies: ['soy-container'], batches: [expect.stringMatching(/^T-/)] },
    ]);
    const viewer = await series.series(own.studioId, own.id, period, 'viewer');
    expect(viewer.marks.some((mark) => mark.kind === 'alert')).toBe(false);
    expect(viewer.frostingLimits[0]?.waxFamilies).toEqual([]);
  });

  it('refuses another studio and a period that makes no sense', async () => {
    const foreign = await floor.addStudio('Other', 'America/Halifax');
    const period = { from: iso(NOON - DAY), to: iso(NOON) };
    const codeOf = (attempt: Promise<unknown>) =>
      attempt.then(
        () => 'done',
        (error: ProblemError) => error.code,
      );
    expect(await codeOf(series.series(foreign, room.id, period, 'owner'))).toBe('not-found');
    expect(await codeOf(series.measures(foreign, room.id, period))).toBe('not-found');
    expect(await codeOf(chart(NOON, NOON - HOUR))).toBe('bad-input');
    expect(await codeOf(chart(NOON - 3000 * DAY, NOON))).toBe('bad-input');
  });
});
