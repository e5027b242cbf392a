import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { overviewRoutes } from '#shared/contract/overview';
import type { Studio } from '#shared/contract/studios';
import { cellOf } from '#shared/cure/grid';
import type { CommittedReading } from '../../announcements.js';
import { Feed } from '../../feed.js';
import { RoomCellsRepository } from '../../history/room-cells-repository.js';
import type { HistoriesChanged } from '../../history/room-histories.js';
import { Standing } from '../estimates/standing.js';
import { DAY, HOUR, NOON, TestFloor, type TestRoom, type TestSensor } from '../estimates/test-floor.js';
import { Racks } from '../racks/racks.js';
import { RacksRepository } from '../racks/racks-repository.js';
import { Rooms } from '../rooms/rooms.js';
import { RoomsRepository } from '../rooms/rooms-repository.js';
import { LatestReadings } from './latest-readings.js';
import { LatestReadingsRepository } from './latest-readings-repository.js';
import { Overview } from './overview.js';
import { RoomsNow } from './rooms-now.js';

const MINUTE = 60_000;

describe('overview on a real database', () => {
  let floor: TestFloor;
  let roomsNow: RoomsNow;
  let overview: Overview;
  let role: Studio['role'] = 'lead';
  let room: TestRoom;
  let sensor: TestSensor;
  let soyBatch: string;
  const readings = new Feed<readonly CommittedReading[]>((error) => {
    throw error;
  });

  const read = (from: TestSensor, celsius: number, change: Partial<CommittedReading> = {}) => {
    const { id: sensorId, no: sensorNo } = from;
    const { id: roomId, studioId } = from.room;
    const at = floor.clock.at;
    const plain = { sensorId, sensorNo, roomId, studioId, at, humidity: 50, battery: null, future: false };
    readings.announce([{ ...plain, celsius, ...change }]);
  };
  const now = (of = room) => roomsNow.of([of.id])[0];

  async function open(): Promise<void> {
    const { dataSource } = floor.database;
    const historiesChanged = new Feed<HistoriesChanged>();
    await roomsNow?.stop();
    await floor.restart(historiesChanged);
    const repository = new LatestReadingsRepository(dataSource);
    roomsNow = new RoomsNow({
      repository,
      latest: new LatestReadings(repository),
      cells: new RoomCellsRepository(dataSource),
      histories: floor.histories,
      estimates: floor.estimates,
      standing: new Standing(floor.estimates, floor.histories),
      clock: floor.clock,
      failed: (error) => {
        throw error;
      },
    });
    await roomsNow.start(readings, historiesChanged, floor.layoutChanged);
    const rooms = new Rooms(new RoomsRepository(dataSource), floor.clock, () => undefined);
    const racks = new Racks(new RacksRepository(dataSource), rooms, floor.clock, () => undefined);
    const studio = (): Studio => ({
      ...{ id: floor.studioId, name: 'Larkrise West', timeZone: 'Europe/Lisbon', unit: 'C', address: '' },
      ...{ pressureHpa: 1013.25, quietFrom: null, quietTo: null, recipients: [], escalateAfterMinutes: 30 },
      ...{ version: 1, role },
    });
    overview = new Overview({
      studios: { list: async () => [studio()] },
      rooms,
      racks,
      alerts: { openIn: async () => [] },
      estimates: floor.estimates,
      roomsNow,
      clock: floor.clock,
    });
  }

  beforeAll(async () => {
    floor = await TestFloor.open();
    room = await floor.addRoom();
    sensor = await floor.addSensor(room, 0.5);
    await floor.record(sensor, cellOf(NOON - 20 * DAY), cellOf(NOON), () => 20.5);
    const { id: soy } = await floor.addDesign('soy-container');
    soyBatch = await floor.addBatch(soy, NOON - 6 * DAY, [{ room, from: NOON - 6 * DAY, to: null }]);
    await open();
  });
  afterAll(async () => {
    await roomsNow.stop();
    await floor.close();
  });

  it('knows a room that never sent a reading from one that is silent', async () => {
    expect(now()).toMatchObject({ condition: 'never-heard', celsius: null, stale: true, since: null });
    read(sensor, 20.5, { at: NOON - 40 * MINUTE });
    expect(now()).toMatchObject({ condition: 'silent', stale: true, celsius: 21 });
    expect(now()?.since).toBe(new Date(NOON - 40 * MINUTE).toISOString());
  });

  it('turns too warm with the reading above the limit of the wax standing there, and puts that batch at risk', () => {
    const announced: string[] = [];
    const stop = floor.batchesChanged.listen(({ batchIds }) => announced.push(...batchIds));
    read(sensor, 20.5);
    expect(now()).toMatchObject({
      condition: 'fine',
      stale: false,
      celsius: 21,
      heatLimit: 25,
      battery: null,
    });
    expect(announced).toEqual([]);
    floor.clock.at += MINUTE;
    read(sensor, 24.7, { battery: 71 });
    expect(now()).toMatchObject({ condition: 'heat', battery: 71, peakToday: 25.2 });
    expect(now()?.celsius).toBeCloseTo(25.2, 9);
    expect(now()?.since).toBe(new Date(floor.clock.at).toISOString());
    expect(announced).toEqual([soyBatch]);
    expect(floor.estimates.cards([soyBatch], false)[0]?.atRisk).toBe(true);
    floor.clock.at += MINUTE;
    read(sensor, 24.6);
    expect(now()?.since).toBe(new Date(floor.clock.at - MINUTE).toISOString());
    floor.clock.at += MINUTE;
    read(sensor, 21);
    expect(now()).toMatchObject({ condition: 'fine', peakToday: 25.2 });
    expect(floor.estimates.cards([soyBatch], false)[0]?.atRisk).toBe(false);
    stop();
  });

  it('never takes a reading from the future, or an older one, as the latest', () => {
    read(sensor, 35, { future: true, at: floor.clock.at + DAY });
    read(sensor, 5, { at: floor.clock.at - HOUR });
    expect(now()?.celsius).toBeCloseTo(21.5, 9);
    expect(now()?.peakToday).toBeCloseTo(25.2, 9);
  });

  it('averages the sensors that are heard and leaves out one that fell silent', async () => {
    const own = await floor.addRoom();
    const [a, b] = [await floor.addSensor(own), await floor.addSensor(own)];
    floor.layoutChanged.announce({ studioId: own.studioId, roomId: own.id });
    await roomsNow.settled();
    read(a, 20);
    read(b, 22, { humidity: null });
    expect(now(own)).toMatchObject({ celsius: 21, humidity: 50 });
    floor.clock.at += 16 * MINUTE;
    read(a, 20);
    expect(now(own)?.celsius).toBe(20);
    floor.clock.at += 16 * MINUTE;
    expect(now(own)).toMatchObject({ stale: true, celsius: 20, condition: 'silent' });
    await floor.sql('UPDATE sensor SET offset_celsius = 2 WHERE no = ?', [a.no]);
    floor.layoutChanged.announce({ studioId: own.studioId, roomId: own.id });
    await roomsNow.settled();
    expect(now(own)?.celsius).toBe(22);
  });

  it('begins the peak anew at the studio’s local midnight', () => {
    // Lisbon is an hour ahead of UTC in May: its day ends at 23:00Z.
    floor.clock.at = NOON + 10 * HOUR + 59 * MINUTE;
    read(sensor, 22);
    expect(now()?.peakToday).toBeCloseTo(25.2, 9);
    floor.clock.at = NOON + 11 * HOUR + MINUTE;
    expect(now()?.peakToday).toBeNull();
    read(sensor, 20);
    expect(now()?.peakToday).toBe(20.5);
    floor.clock.at = NOON;
  });

  it('answers with walls, ribbons, cards and the hours that dates slipped; after a restart alike', async () => {
    const cold = await floor.addRoom();
    const coldSensor = await floor.addSensor(cold);
    await floor.record(coldSensor, cellOf(NOON - 16 * DAY), cellOf(NOON) - 3, () => 16);
    const { id: palm } = await floor.addDesign('palm');
    await floor.addBatch(palm, NOON - 4 * DAY, [{ room: cold, from: NOON - 4 * DAY, to: null }]);
    await floor.sql(
      'INSERT INTO reading (sensor_no, at, received_at, t_micro, rh_micro, flags) VALUES (?,?,?,?,?,0), (?,?,?,?,?,1)',
      [
        ...[coldSensor.no, new Date(NOON - MINUTE), new Date(NOON), 16_000_000, 70_000_000],
        ...[coldSensor.no, new Date(NOON + DAY), new Date(NOON), 30_000_000, 70_000_000],
      ],
    );
    await open();
    const person = {
      id: randomUUID(),
      name: 'Ines',
      email: 'i@example.org',
      sessionId: '',
      owner: false,
      memberships: [],
    };
    const reply = await overview.walls(person);
    expect(overviewRoutes.walls.reply.parse(reply)).toEqual(reply);
    const wall = reply.studios[0]?.rooms.find(({ id }) => id === cold.id);
    expect(wall?.racks[0]?.shelves).toHaveLength(3);
    expect(wall?.now).toMatchObject({ celsius: 16, condition: 'cold', stale: false });
    // The ten-minute means have been cold as far back as they reach without a break: the last three cells are silent.
    expect(wall?.now.since).toBe(new Date(NOON - MINUTE).toISOString());
    expect(wall?.ribbon.celsius).toHaveLength(144);
    expect(wall?.ribbon.celsius.slice(-4)).toEqual([16, null, null, null]);
    const end = cellOf(NOON);
    expect(roomsNow.ribbonsFrom(new Map([[cold.id, end - 4]]))).toEqual([
      {
        roomId: cold.id,
        ribbon: { from: new Date(NOON - 40 * MINUTE).toISOString(), celsius: [16, null, null, null] },
      },
    ]);
    expect(roomsNow.ribbonsFrom(new Map([[cold.id, end]]))).toEqual([]);
    // exp(−(45000/R)(1/289.15 − 1/294.15)), computed from the stated formula by an independent script.
    expect(wall?.now.slippedHours).toBeCloseTo(24 * (1 - 0.727480675626866), 9);
    const soy = reply.studios[0]?.batches.find(({ id }) => id === soyBatch);
    expect(soy).toMatchObject({ waxFamily: 'soy-container' });
    role = 'viewer';
    const seen = await overview.walls(person);
    role = 'lead';
    expect(
      seen.studios[0]?.batches.every(
        ({ waxFamily, designName }) => waxFamily === null && designName === null,
      ),
    ).toBe(true);
    expect(seen.studios[0]?.alerts).toEqual([]);
  });
});
