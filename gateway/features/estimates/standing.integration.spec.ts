import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { cellOf } from '#shared/cure/grid';
import { Standing } from './standing.js';
import { DAY, NOON, TestFloor } from './test-floor.js';

describe('what stands in a room, on a real database', () => {
  let floor: TestFloor;
  const standing = () => new Standing(floor.estimates, floor.histories);

  beforeAll(async () => {
    floor = await TestFloor.open();
  });
  afterAll(() => floor.close());

  it('sets the heat limit by the most delicate wax present, not by one that left', async () => {
    const [room, other] = [await floor.addRoom(), await floor.addRoom()];
    const [soy, pillar, palm] = [
      await floor.addDesign('soy-container'),
      await floor.addDesign('soy-pillar'),
      await floor.addDesign('palm'),
    ];
    await floor.addBatch(palm.id, NOON - DAY, [{ room, from: NOON - DAY, to: null }]);
    await floor.restart();
    expect(standing().heatLimit(room.id, null)).toBeNull();
    expect(standing().heatLimit(room.id, 26)).toBe(26);
    await floor.addBatch(pillar.id, NOON - DAY, [{ room, from: NOON - DAY, to: null, shelf: 1 }]);
    await floor.addBatch(soy.id, NOON - 2 * DAY, [
      { room, from: NOON - 2 * DAY, to: NOON - DAY },
      { room: other, from: NOON - DAY, to: null },
    ]);
    await floor.restart();
    expect(standing().heatLimit(room.id, null)).toBe(27);
    expect(standing().heatLimit(other.id, null)).toBe(25);
    const [first, second] = standing().inRoom(room.id);
    expect([first?.frostingFrom, second?.frostingFrom].sort()).toEqual([27, null]);
    expect([first?.shelf, second?.shelf].every((shelf) => /^Rack \d+, shelf [12]$/.test(shelf ?? ''))).toBe(
      true,
    );
  });

  it('tells how far the next gate slips by cold, as expected and should the room stay as it is', async () => {
    const room = await floor.addRoom();
    const sensor = await floor.addSensor(room);
    await floor.record(sensor, cellOf(NOON - 30 * DAY), cellOf(NOON), () => 18);
    const { id } = await floor.addDesign('soy-container', { scentEnergy: 50 });
    await floor.addBatch(id, NOON - 4 * DAY, [{ room, from: NOON - 4 * DAY, to: null }]);
    const { id: paraffin } = await floor.addDesign('paraffin-container', {}, false);
    const done = await floor.addBatch(paraffin, NOON - 20 * DAY, [
      { room, from: NOON - 20 * DAY, to: null, shelf: 1 },
    ]);
    await floor.restart();
    const batches = standing().inRoom(room.id, 18);
    const soy = batches.find(({ id: batchId }) => batchId !== done);
    // At 18 °C the 14 days take 17.283 (constant-temperature readiness, E 50), told to the cell of 0.007 d.
    expect(Math.abs((soy?.slipDays ?? 0) - 3.283)).toBeLessThan(0.01);
    // Four days there gave 4/17.283 of the fourteen; the rest takes 13.283 days instead of 10.760.
    expect(soy?.slipIfItStaysDays).toBeCloseTo(13.283 - 10.76, 2);
    expect(
      standing()
        .inRoom(room.id, 21)
        .find(({ id: batchId }) => batchId !== done)?.slipIfItStaysDays,
    ).toBeCloseTo(0, 9);
    expect(batches.find(({ id: batchId }) => batchId === done)?.slipDays).toBeNull();
    // Both batches lose 24·(1 − rate at 18 °C) hours a day: rates .810054 (E 50) and .844911 (E 40), computed from
    // the stated formula by an independent script.
    expect(standing().slippedHours(room.id)).toBeCloseTo((24 * (1 - 0.810054 + 1 - 0.844911)) / 2, 4);
    expect(standing().slippedHours((await floor.addRoom()).id)).toBe(0);
  });
});
