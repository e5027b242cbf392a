import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { cellOf } from '#shared/cure/grid';
import { cureDaysByHand } from './test-cure-by-hand.js';
import { DAY, HOUR, NOON, TestFloor } from './test-floor.js';

/** A room's day with some weather in it; the same for every run. */
const weather =
  (mean: number, swing: number) =>
  (cell: number): number =>
    mean +
    swing * Math.sin((2 * Math.PI * cell) / 144) +
    0.7 * Math.sin(cell / 61.7) +
    0.2 * Math.sin(cell * 1.3);

describe('estimates on a real database', () => {
  let floor: TestFloor;
  beforeAll(async () => {
    floor = await TestFloor.open();
  });
  afterAll(() => floor.close());

  it('gives the cure age that an independent sum over the recording gives, through silences and a move', async () => {
    const warm = await floor.addRoom();
    const cold = await floor.addRoom();
    const [warmSensor, coldSensor] = [await floor.addSensor(warm, 0.4), await floor.addSensor(cold, -0.25)];
    const begin = cellOf(NOON - 40 * DAY);
    const now = cellOf(NOON);
    // Two hours and eleven hours of silence while the batch stands in the warm room, the latter too long for a line.
    const shortSilence = cellOf(NOON - 15 * DAY);
    const longSilence = cellOf(NOON - 13 * DAY);
    const silent = (cell: number) =>
      (cell >= shortSilence && cell < shortSilence + 12) || (cell >= longSilence && cell < longSilence + 66);
    const warmCourse = weather(22.5, 2);
    const coldCourse = weather(17, 1);
    await floor.record(warmSensor, begin, now, (cell) => (silent(cell) ? null : warmCourse(cell)));
    await floor.record(coldSensor, begin, now, coldCourse);
    const design = await floor.addDesign('soy-container');
    const [pouredAt, movedAt] = [NOON - 18 * DAY - 7 * 60_000, NOON - 6 * DAY + 3 * 60_000];
    const id = await floor.addBatch(design.id, pouredAt, [
      { room: warm, from: pouredAt, to: movedAt },
      { room: cold, from: movedAt, to: null },
    ]);
    await floor.restart();

    const rounded = (course: (cell: number) => number, offset: number) => (cell: number) =>
      (Math.round((course(cell) - 0.1) * 1e6) + Math.round((course(cell) + 0.1) * 1e6)) / 2e6 + offset;
    const inWarm = rounded(warmCourse, 0.4);
    const expected =
      cureDaysByHand(
        (cell) => (silent(cell) ? null : inWarm(cell)),
        { begin, from: cellOf(pouredAt), to: cellOf(movedAt) },
        50,
        27,
      ) + cureDaysByHand(rounded(coldCourse, -0.25), { begin, from: cellOf(movedAt), to: now }, 50, 27);

    const page = await floor.estimates.page(floor.studioId, id, null, false);
    expect(page?.estimate?.gaps.map((gap) => gap.fill)).toEqual(['line', 'hour-of-day']);
    expect(page?.estimate?.cureAgeHardeningDays).toBeCloseTo(expected, 6);
    expect(Math.abs((page?.card.cureAgeDays ?? 0) - expected)).toBeLessThan(1e-9);
    const [card] = floor.estimates.cards([id], false);
    expect(card?.cureAgeDays).toBe(page?.card.cureAgeDays);
  });

  it('moves the date when the batch moves to a colder room, and says so in the ledger', async () => {
    const [warm, cold] = [await floor.addRoom(), await floor.addRoom()];
    const [a, b] = [await floor.addSensor(warm), await floor.addSensor(cold)];
    const [begin, now] = [cellOf(NOON - 20 * DAY), cellOf(NOON)];
    await floor.record(a, begin, now, () => 21);
    await floor.record(b, begin, now, () => 16);
    const { id: designId } = await floor.addDesign('soy-container');
    const pouredAt = NOON - 6 * DAY;
    const stays = await floor.addBatch(designId, pouredAt, [{ room: warm, from: pouredAt, to: null }]);
    const moved = await floor.addBatch(designId, pouredAt, [
      { room: warm, from: pouredAt, to: NOON - 2 * DAY },
      { room: cold, from: NOON - 2 * DAY, to: null },
    ]);
    await floor.restart();
    const [stayed, went] = floor.estimates.cards([stays, moved], false);
    expect(stayed?.cureAgeDays).toBeCloseTo(6, 9);
    expect(Date.parse(stayed?.wickTest.t50 ?? '')).toBe(pouredAt + 14 * DAY);
    expect(Date.parse(went?.wickTest.t50 ?? '')).toBeGreaterThan(pouredAt + 15 * DAY);
    const page = await floor.estimates.page(floor.studioId, moved, null, false);
    expect(page?.shifts.map((shift) => [shift.because, shift.roomId])).toEqual([
      ['at-reference', warm.id],
      ['colder', cold.id],
    ]);
    const hours = page?.shifts.reduce((sum, shift) => sum + shift.hours, 0) ?? 0;
    expect(hours).toBeCloseTo(6 * 24 - 24 * (went?.cureAgeDays ?? 0), 6);
  });

  it('lets a late reading, a new offset and the passing of time through, and equals a fresh start afterwards', async () => {
    const room = await floor.addRoom();
    const sensor = await floor.addSensor(room);
    const [begin, now] = [cellOf(NOON - 10 * DAY), cellOf(floor.clock.at)];
    const course = weather(20, 1.5);
    const late = cellOf(NOON - 3 * DAY);
    await floor.record(sensor, begin, now, (cell) =>
      cell >= late && cell < late + 50 ? null : course(cell),
    );
    const { id: designId } = await floor.addDesign('rapeseed');
    const pouredAt = NOON - 5 * DAY;
    const id = await floor.addBatch(designId, pouredAt, [{ room, from: pouredAt, to: null }]);
    await floor.estimates.batchesTouched(floor.studioId, [id]);
    const age = () => floor.estimates.cards([id], false)[0]?.cureAgeDays ?? Number.NaN;
    const filled = age();

    const announced: string[] = [];
    const stop = floor.batchesChanged.listen(({ batchIds }) => announced.push(...batchIds));
    await floor.record(sensor, late, late + 50, () => 26);
    expect(announced).toContain(id);
    const repaired = age();
    expect(repaired).toBeGreaterThan(filled + 0.02);

    announced.length = 0;
    await floor.sql('UPDATE sensor SET offset_celsius = 1 WHERE no = ?', [sensor.no]);
    floor.layoutChanged.announce({ studioId: floor.studioId, roomId: room.id });
    await floor.settled();
    expect(announced).toContain(id);
    const warmer = age();
    expect(warmer).toBeGreaterThan(repaired + 0.2);

    await floor.pass(HOUR);
    const withoutReadings = floor.estimates.cards([id], false)[0];
    await floor.record(sensor, now, now + 6, () => 24);
    stop();
    expect(age()).toBeGreaterThan(withoutReadings?.cureAgeDays ?? Infinity);

    const running = floor.estimates.cardsOfStudio(floor.studioId, false);
    await floor.restart();
    const fresh = floor.estimates.cardsOfStudio(floor.studioId, false);
    expect(running.length).toBeGreaterThan(3);
    expect(fresh).toEqual(running);
  });

  it('forgets the swings of a sensor that is no longer trusted', async () => {
    const room = await floor.addRoom();
    const [calm, wild] = [await floor.addSensor(room), await floor.addSensor(room)];
    const [begin, now] = [cellOf(NOON - 10 * DAY), cellOf(floor.clock.at)];
    await floor.record(calm, begin, now, () => 22);
    await floor.record(wild, begin, now, (cell) => 22 + 6 * Math.sin(cell / 9));
    const { id: designId } = await floor.addDesign('soy-container');
    const id = await floor.addBatch(designId, NOON - 4 * DAY, [{ room, from: NOON - 4 * DAY, to: null }]);
    await floor.estimates.batchesTouched(floor.studioId, [id]);
    const index = () => floor.estimates.cards([id], false)[0]?.frosting?.index ?? Number.NaN;
    expect(index()).toBeGreaterThan(30);
    await floor.sql('UPDATE sensor SET trusted = 0 WHERE no = ?', [wild.no]);
    floor.layoutChanged.announce({ studioId: floor.studioId, roomId: room.id });
    await floor.settled();
    expect(index()).toBe(0);
  });

  it('answers as of an earlier instant with the stays and tests of then', async () => {
    const [first, second] = [await floor.addRoom(), await floor.addRoom()];
    const [a, b] = [await floor.addSensor(first), await floor.addSensor(second)];
    const [begin, now] = [cellOf(NOON - 20 * DAY), cellOf(floor.clock.at)];
    await floor.record(a, begin, now, () => 21);
    await floor.record(b, begin, now, () => 25.5);
    const { id: designId } = await floor.addDesign('paraffin-container', {}, false);
    const pouredAt = NOON - 5 * DAY;
    const id = await floor.addBatch(designId, pouredAt, [
      { room: first, from: pouredAt, to: NOON - DAY },
      { room: second, from: NOON - DAY, to: null },
    ]);
    await floor.restart();
    const then = await floor.estimates.page(floor.studioId, id, pouredAt + DAY, false);
    expect(then?.card.cureAgeDays).toBeCloseTo(1, 9);
    expect(then?.card.roomId).toBe(first.id);
    expect(then?.facts.stays).toHaveLength(1);
    expect(then?.card.wickTest.state).toBe('expected');
    const today = await floor.estimates.page(floor.studioId, id, null, false);
    expect(today?.card.wickTest.state).toBe('reached');
    expect(Date.parse(today?.card.wickTest.reachedAt ?? '')).toBe(pouredAt + 1.5 * DAY);
    expect(today?.card.ship).toMatchObject({ state: 'blocked', blockedBy: ['no-passing-test'] });
    const before = await floor.estimates.page(floor.studioId, id, pouredAt - DAY, false);
    expect(before?.card.cureAgeDays).toBe(0);
  });

  it('knows nothing of a batch whose rooms were never measured, and says why', async () => {
    const room = await floor.addRoom();
    const { id: designId } = await floor.addDesign('palm');
    const id = await floor.addBatch(designId, NOON - DAY, [{ room, from: NOON - DAY, to: null }]);
    await floor.estimates.batchesTouched(floor.studioId, [id]);
    const [card] = floor.estimates.cards([id], false);
    expect(card).toMatchObject({ hardening: null, cureAgeDays: null });
    expect(card?.wickTest).toMatchObject({ state: 'unknown', blockedBy: ['no-readings'] });
    expect(await floor.estimates.curve(floor.studioId, id)).toEqual([]);
  });

  it('shows a viewer when, but neither recipe nor tests, and another studio nothing', async () => {
    const room = await floor.addRoom();
    const sensor = await floor.addSensor(room);
    await floor.record(sensor, cellOf(NOON - 3 * DAY), cellOf(floor.clock.at), () => 22);
    const { id: designId } = await floor.addDesign('beeswax');
    const id = await floor.addBatch(designId, NOON - 2 * DAY, [{ room, from: NOON - 2 * DAY, to: null }]);
    await floor.estimates.batchesTouched(floor.studioId, [id]);
    const [card] = floor.estimates.cards([id], true);
    expect(card).toMatchObject({ designName: null, waxFamily: null });
    expect(card?.cureAgeDays).toBeGreaterThan(1.9);
    const foreign = await floor.addStudio('Larkrise North', 'America/Halifax');
    expect(await floor.estimates.page(foreign, id, null, false)).toBeNull();
    expect(await floor.estimates.curve(foreign, id)).toBeNull();
  });
});
