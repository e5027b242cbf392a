import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { cellOf, cellStart } from '#shared/cure/grid';
import { DAY, HOUR, NOON, TestFloor } from '../features/estimates/test-floor.js';
import { Feed } from '../feed.js';
import { RoomCellsRepository } from './room-cells-repository.js';
import { type HistoriesChanged, RoomHistories } from './room-histories.js';

const CELLS = 144;
const SOY = { energy: 50, capC: 27, softC: 38 };

describe('room histories on a real database', () => {
  let floor: TestFloor;
  const told: HistoriesChanged[] = [];
  const failures: unknown[] = [];

  const open = () => {
    const changed = new Feed<HistoriesChanged>();
    changed.listen((change) => told.push(change));
    const histories = new RoomHistories({
      cells: new RoomCellsRepository(floor.database.dataSource),
      clock: floor.clock,
      changed,
      failed: (error) => failures.push(error),
    });
    histories.start(floor.cellsChanged, floor.layoutChanged);
    return histories;
  };

  beforeAll(async () => {
    floor = await TestFloor.open();
  });
  afterAll(() => floor.close());

  it('counts a retired sensor for its time and no other, an untrusted one never', async () => {
    const room = await floor.addRoom();
    const [old, fresh, odd] = [
      await floor.addSensor(room, 1),
      await floor.addSensor(room),
      await floor.addSensor(room, 0, false),
    ];
    const now = cellOf(NOON);
    await floor.record(old, now - 20, now, () => 18);
    await floor.record(fresh, now - 15, now, () => 21);
    await floor.record(odd, now - 20, now, () => 60);
    await floor.sql('UPDATE sensor SET retired_at = ? WHERE no = ?', [new Date(cellStart(now - 10)), old.no]);
    const histories = open();
    await histories.need(new Map([[room.id, now - 20]]));
    const history = histories.peek(room.id);
    const observed = [now - 21, now - 20, now - 15, now - 11, now - 10, now - 1].map((cell) =>
      history?.observed(cell),
    );
    expect(observed).toEqual([Number.NaN, 19, 20, 20, 21, 21]);
    await histories.stop();
  });

  it('is right from the needed cell on, whatever the past before it looks like', async () => {
    const room = await floor.addRoom();
    const sensor = await floor.addSensor(room);
    const now = cellOf(NOON);
    const poured = now - 8 * CELLS;
    // Silent from 12 days before the pour to two days after it: filled from the 14 days before the silence, 26 days back.
    const silent = (cell: number) => cell >= poured - 12 * CELLS && cell < poured + 2 * CELLS;
    const course = (cell: number) =>
      20 + 4 * Math.sin((cell * 2 * Math.PI) / CELLS) + 0.01 * ((cell * 7) % 50);
    await floor.record(sensor, now - 50 * CELLS, now, (cell) => (silent(cell) ? null : course(cell)));
    const lazy = open();
    await lazy.need(new Map([[room.id, poured]]));
    const whole = open();
    await whole.need(new Map([[room.id, now - 50 * CELLS]]));
    const [short, long] = [lazy.peek(room.id), whole.peek(room.id)];
    expect(short?.origin).toBe(poured - 26 * CELLS);
    const cells = Array.from({ length: now - poured }, (_, index) => poured + index);
    expect(cells.map((cell) => short?.celsius(cell))).toEqual(cells.map((cell) => long?.celsius(cell)));
    const [a, b] = [short, long].map((history) => history?.sums(SOY, poured, now).days ?? 0);
    expect(a).toBeCloseTo(b ?? Number.NaN, 9);
    await lazy.need(new Map([[room.id, poured - 20 * CELLS]]));
    expect(lazy.peek(room.id)?.observed(poured - 19 * CELLS)).toBe(long?.observed(poured - 19 * CELLS));
    await lazy.stop();
    await whole.stop();
  });

  it('takes a reading from before everything known: it becomes the last known value', async () => {
    const room = await floor.addRoom();
    const sensor = await floor.addSensor(room);
    const now = cellOf(NOON);
    const poured = now - 3 * CELLS;
    await floor.record(sensor, now - 10, now, () => 24);
    const histories = open();
    await histories.need(new Map([[room.id, poured]]));
    expect(histories.peek(room.id)?.celsius(poured)).toBe(24);
    told.length = 0;
    await floor.record(sensor, poured - 40 * CELLS, poured - 40 * CELLS + 1, () => 15);
    await histories.settled();
    expect(histories.peek(room.id)?.celsius(poured)).toBe(15);
    expect(told.at(-1)?.has(room.id)).toBe(true);
    await histories.stop();
  });

  it('reads changes that come together together, and tells from where the silence before them begins', async () => {
    const room = await floor.addRoom();
    const sensor = await floor.addSensor(room);
    const now = cellOf(NOON);
    await floor.record(sensor, now - CELLS, now - 30, () => 20);
    const histories = open();
    await histories.need(new Map([[room.id, now - CELLS]]));
    told.length = 0;
    const { id: roomId, studioId } = room;
    await floor.sql(
      'INSERT INTO rollup (sensor_no, level, bucket, n, t_sum, t_min, t_max, rh_n, rh_sum) VALUES (?,5,?,1,22000000,0,0,0,0), (?,5,?,1,23000000,0,0,0,0)',
      [sensor.no, new Date(cellStart(now - 10)), sensor.no, new Date(cellStart(now - 4))],
    );
    for (const cell of [now - 10, now - 4, now + 3])
      floor.cellsChanged.announce({ roomId, studioId, fromCell: cell, toCell: cell });
    await histories.settled();
    expect(told.map((change) => [...change])).toEqual([[[room.id, now - 30]]]);
    expect(histories.peek(room.id)?.observed(now - 10)).toBe(22);
    expect(histories.peek(room.id)?.end).toBe(now);
    await histories.stop();
  });

  it('goes on with the clock cell by cell, and back when the clock is set back', async () => {
    const room = await floor.addRoom();
    const sensor = await floor.addSensor(room);
    const now = cellOf(NOON);
    await floor.record(sensor, now - CELLS, now + 3, () => 20);
    const histories = open();
    await histories.need(new Map([[room.id, now - CELLS]]));
    expect(histories.peek(room.id)?.end).toBe(now);
    floor.clock.at = NOON + HOUR + 1;
    await histories.tick();
    const history = histories.peek(room.id);
    expect(history?.end).toBe(now + 6);
    expect([now, now + 2, now + 3].map((cell) => history?.observed(cell))).toEqual([20, 20, Number.NaN]);
    await histories.tick();
    expect(told.at(-1)?.get(room.id)).toBe(now);
    floor.clock.at = NOON - DAY;
    await histories.tick();
    expect(histories.peek(room.id)?.end).toBe(now - CELLS);
    floor.clock.at = NOON;
    await histories.tick();
    expect(histories.peek(room.id)?.observed(now - 1)).toBe(20);
    await histories.stop();
    expect(failures).toEqual([]);
  });

  it('tries again what the database would not give', async () => {
    const room = await floor.addRoom();
    const sensor = await floor.addSensor(room);
    const now = cellOf(NOON);
    await floor.record(sensor, now - CELLS, now, () => 20);
    const real = new RoomCellsRepository(floor.database.dataSource);
    let broken = false;
    const histories = new RoomHistories({
      cells: {
        sensors: (ids) => real.sensors(ids),
        lastCell: (id, cell) => real.lastCell(id, cell),
        cells: (ids, from, to) =>
          broken ? Promise.reject(new Error('connection lost')) : real.cells(ids, from, to),
      },
      clock: floor.clock,
      changed: new Feed(),
      failed: (error) => failures.push(error),
    });
    await histories.need(new Map([[room.id, now - CELLS]]));
    broken = true;
    await floor.record(sensor, now - 5, now - 4, () => 23);
    const { id: roomId, studioId } = room;
    histories.cellsChanged({ roomId, studioId, fromCell: now - 5, toCell: now - 5 });
    await histories.settled();
    expect(failures.map(String)).toEqual(['Error: connection lost']);
    broken = false;
    await histories.tick();
    expect(histories.peek(room.id)?.observed(now - 5)).toBe(23);
  });
});
