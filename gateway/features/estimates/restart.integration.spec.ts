import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { cellOf } from '#shared/cure/grid';
import { DAY, HOUR, NOON, TestFloor, type TestRoom, type TestSensor } from './test-floor.js';

/** Lehmer's generator: the same numbers in every run. */
function numbers(seed: number): (below: number) => number {
  let state = seed;
  return (below) => {
    state = (state * 48_271) % 2_147_483_647;
    return state % below;
  };
}

describe('a gateway that has been running for long, and one started afresh', () => {
  let floor: TestFloor;
  beforeAll(async () => {
    floor = await TestFloor.open();
  });
  afterAll(() => floor.close());

  it('say the same of every batch, after late readings, moves, new offsets and distrusted sensors in any order', async () => {
    const next = numbers(20_260_504);
    const rooms: TestRoom[] = [await floor.addRoom(), await floor.addRoom(), await floor.addRoom()];
    const sensors: TestSensor[] = [];
    for (const room of rooms) sensors.push(await floor.addSensor(room), await floor.addSensor(room, 0.2));
    for (const sensor of sensors) {
      const begin = cellOf(NOON) - 2000 - next(900);
      const silence = begin + 300 + next(1200);
      const mean = 16 + next(10);
      await floor.record(sensor, begin, cellOf(NOON), (cell) =>
        cell > silence && cell < silence + 40 ? null : mean + 3 * Math.sin(cell / (15 + mean)),
      );
    }
    const batches: { id: string; pouredAt: number }[] = [];
    for (const family of ['soy-container', 'parasoy', 'paraffin-pillar', 'coconut'] as const) {
      const { id: designId } = await floor.addDesign(family);
      for (let index = 0; index < 3; index++) {
        const pouredAt = NOON - (1 + next(12)) * DAY - next(900) * 60_000;
        const room = rooms[next(3)];
        if (!room) throw new Error('There are three rooms.');
        batches.push({
          pouredAt,
          id: await floor.addBatch(designId, pouredAt, [{ room, from: pouredAt, to: null }]),
        });
      }
    }
    await floor.restart();

    for (let step = 1; step <= 60; step++) {
      const sensor = sensors[next(sensors.length)];
      const batch = batches[next(batches.length)];
      const room = rooms[next(3)];
      if (!sensor || !batch || !room) throw new Error('Nothing to choose from.');
      floor.estimates.cardsOfStudio(floor.studioId, false);
      switch (next(5)) {
        case 0: {
          const from = cellOf(floor.clock.at) - 1 - next(1500);
          await floor.record(sensor, from, from + 1 + next(30), () => 15 + next(180) / 10);
          break;
        }
        case 1:
          await floor.pass((1 + next(4)) * HOUR);
          break;
        case 2: {
          const [last] = await floor.sql<{ id: string; from_at: Date }[]>(
            'SELECT id, from_at FROM stay WHERE batch_id = ? AND to_at IS NULL',
            [batch.id],
          );
          const since = last?.from_at.getTime() ?? batch.pouredAt;
          const at = since + next(Math.max(1, Math.floor((floor.clock.at - since) / 60_000))) * 60_000;
          await floor.sql('UPDATE stay SET to_at = ? WHERE id = ?', [new Date(at), last?.id]);
          await floor.sql(
            'INSERT INTO stay (id, batch_id, shelf_id, room_id, from_at) VALUES (UUID(), ?, ?, ?, ?)',
            [batch.id, room.shelfIds[step % 3], room.id, new Date(at)],
          );
          await floor.estimates.batchesTouched(floor.studioId, [batch.id]);
          break;
        }
        case 3:
          await floor.sql('UPDATE sensor SET offset_celsius = ? WHERE no = ?', [
            next(20) / 10 - 1,
            sensor.no,
          ]);
          floor.layoutChanged.announce({ studioId: floor.studioId, roomId: sensor.room.id });
          await floor.settled();
          break;
        default:
          await floor.sql('UPDATE sensor SET trusted = 1 - trusted WHERE no = ?', [sensor.no]);
          floor.layoutChanged.announce({ studioId: floor.studioId, roomId: sensor.room.id });
          await floor.settled();
      }
      if (step % 6 !== 0) continue;
      const running = floor.estimates.cardsOfStudio(floor.studioId, false);
      const fresh = await floor.freshCards();
      expect(fresh).toHaveLength(12);
      expect(rounded(running)).toEqual(rounded(fresh));
    }
  });
});

/** Sums begun at different cells differ in their last bits; a date may then fall into the next cell, an age not by 1e-9 days. */
function rounded(cards: ReturnType<TestFloor['estimates']['cardsOfStudio']>): unknown {
  return JSON.parse(
    JSON.stringify(cards, (_key, value: unknown) =>
      typeof value === 'number' ? Number(value.toPrecision(9)) : value,
    ),
  );
}
