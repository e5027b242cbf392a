import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { batchPage, batchRoutes } from '#shared/contract/batches';
import { cellOf } from '#shared/cure/grid';
import type { Actor } from '../../http/actor.js';
import { ProblemError } from '../../http/problem-error.js';
import { DAY, HOUR, NOON, TestFloor, type TestRoom } from '../estimates/test-floor.js';
import { BatchListRepository } from './batch-list-repository.js';
import { Batches } from './batches.js';
import { BatchesRepository } from './batches-repository.js';

const iso = (at: number) => new Date(at).toISOString();

async function refusal(attempt: Promise<unknown>): Promise<ProblemError> {
  const error = await attempt.then(
    () => null,
    (reason: unknown) => reason,
  );
  expect(error).toBeInstanceOf(ProblemError);
  return error as ProblemError;
}

describe('batches on a real database', () => {
  let floor: TestFloor;
  let batches: Batches;
  let lead: Actor;
  let room: TestRoom;
  let cold: TestRoom;
  let soy: string;

  const pour = (change: Partial<Parameters<Batches['pour']>[1]> = {}) =>
    batches.pour(
      floor.studioId,
      {
        designId: soy,
        vessels: 12,
        pouredAt: iso(floor.clock.at),
        pourCelsius: 60,
        shelfId: null,
        overfill: false,
        notes: 'no draught',
        ...change,
      },
      lead,
    );

  beforeAll(async () => {
    floor = await TestFloor.open();
    batches = new Batches({
      repository: new BatchesRepository(floor.database.dataSource),
      lists: new BatchListRepository(floor.database.dataSource),
      get estimates() {
        return floor.estimates;
      },
      clock: floor.clock,
    });
    lead = await floor.actor();
    [room, cold] = [await floor.addRoom(), await floor.addRoom()];
    const [a, b] = [await floor.addSensor(room), await floor.addSensor(cold)];
    await floor.record(a, cellOf(NOON - 30 * DAY), cellOf(NOON), () => 21);
    await floor.record(b, cellOf(NOON - 30 * DAY), cellOf(NOON), () => 15);
    soy = (await floor.addDesign('soy-container')).id;
  });
  afterAll(() => floor.close());

  it('pours with grams from fill and load, a code of the studio, and an audit line', async () => {
    const page = await pour({ shelfId: room.shelfIds[0] ?? null });
    expect(batchPage.parse(page)).toEqual(page);
    // 12 × 220 g at 8 % of the wax: 2640/1.08 g of wax.
    expect(page.recipe?.waxGrams).toBeCloseTo(2444.444, 3);
    expect(page.recipe?.fragranceGrams).toBeCloseTo(195.556, 3);
    expect(page.recipe?.loadPercentOfMix).toBeCloseTo(7.4074, 4);
    expect(page.recipe?.pouredBy).toBe('Ines Sampaio');
    expect(page.card.code).toMatch(/^L-\d+$/);
    expect(page.card.shelfId).toBe(room.shelfIds[0]);
    expect(page.card.hardening).toBe(0);
    const second = await pour();
    expect(Number(second.card.code.slice(2))).toBe(Number(page.card.code.slice(2)) + 1);
    const lines = await floor.sql<{ action: string; who: string }[]>(
      'SELECT action, who FROM audit WHERE thing_id = ?',
      [page.card.id],
    );
    expect(lines).toEqual([{ action: 'poured', who: 'Ines Sampaio' }]);
  });

  it('refuses a code that is taken, a pour in the future and an unknown design', async () => {
    const page = await pour({ code: 'SPECIAL-1' });
    expect(page.card.code).toBe('SPECIAL-1');
    expect((await refusal(pour({ code: 'special-1' }))).code).toBe('conflict');
    expect((await refusal(pour({ pouredAt: iso(floor.clock.at + HOUR) }))).code).toBe('bad-input');
    expect((await refusal(pour({ designId: randomUUID() }))).code).toBe('bad-input');
  });

  it('gives codes to pours that come at the same moment without a clash', async () => {
    const pages = await Promise.all([pour(), pour(), pour(), pour()]);
    expect(new Set(pages.map((page) => page.card.code)).size).toBe(4);
  });

  it('says how much room a full shelf has, takes an overfill on purpose, and never both of two last places', async () => {
    const small = await floor.addRoom(floor.studioId, 2, 30);
    const [first, second] = small.shelfIds;
    await pour({ vessels: 12, shelfId: first ?? null });
    const full = await refusal(pour({ vessels: 19, shelfId: first ?? null }));
    expect(full.code).toBe('shelf-full');
    expect(full.detail).toContain('room for 18 more vessels');
    const waiting = await pour({ vessels: 19 });
    const move = { version: waiting.card.version, shelfId: first ?? '', overfill: false };
    expect((await refusal(batches.move(floor.studioId, waiting.card.id, move, lead))).code).toBe(
      'shelf-full',
    );
    const placed = await batches.move(floor.studioId, waiting.card.id, { ...move, overfill: true }, lead);
    expect(placed.card.shelfId).toBe(first);

    const rivals = await Promise.all([pour({ vessels: 20 }), pour({ vessels: 20 })]);
    const outcomes = await Promise.allSettled(
      rivals.map(({ card }) =>
        batches.move(
          floor.studioId,
          card.id,
          { version: card.version, shelfId: second ?? '', overfill: false },
          lead,
        ),
      ),
    );
    expect(outcomes.map((outcome) => outcome.status).sort()).toEqual(['fulfilled', 'rejected']);
  });

  it('moves back to when the batch came to its shelf, never further, never into the future, never with an old version', async () => {
    const page = await pour({ pouredAt: iso(NOON - 10 * DAY), shelfId: room.shelfIds[1] ?? null });
    const { id, version } = page.card;
    const to = (change: object) =>
      batches.move(
        floor.studioId,
        id,
        { version, shelfId: cold.shelfIds[0] ?? '', overfill: true, ...change },
        lead,
      );
    expect((await refusal(to({ at: iso(NOON - 10 * DAY - HOUR) }))).code).toBe('bad-input');
    expect((await refusal(to({ at: iso(NOON + HOUR) }))).code).toBe('bad-input');
    const moved = await to({ at: iso(NOON - 4 * DAY) });
    expect(moved.stays.map((stay) => stay.roomId)).toEqual([room.id, cold.id]);
    expect(moved.stays[0]?.to).toBe(iso(NOON - 4 * DAY));
    expect(moved.card.version).toBe(version + 1);
    expect(Date.parse(moved.card.wickTest.t50 ?? '')).toBeGreaterThan(
      Date.parse(page.card.wickTest.t50 ?? '') + DAY,
    );
    expect(moved.shifts.at(-1)).toMatchObject({ because: 'colder', roomId: cold.id });
    expect((await refusal(to({}))).code).toBe('changed-meanwhile');

    const back = await batches.move(
      floor.studioId,
      id,
      { version: version + 1, shelfId: room.shelfIds[0] ?? '', overfill: true, at: iso(NOON - 4 * DAY) },
      lead,
    );
    expect(back.stays).toHaveLength(2);
    expect(back.card.cureAgeDays).toBeCloseTo(10, 9);
  });

  it('lets only one of two people who edit at once through', async () => {
    const { card } = await pour();
    const attempts = await Promise.allSettled(
      [room.shelfIds[0], room.shelfIds[1]].map((shelfId) =>
        batches.move(
          floor.studioId,
          card.id,
          { version: card.version, shelfId: shelfId ?? '', overfill: true },
          lead,
        ),
      ),
    );
    const lost = attempts.filter((attempt) => attempt.status === 'rejected');
    expect(lost).toHaveLength(1);
    expect((lost[0]?.reason as ProblemError).code).toBe('changed-meanwhile');
  });

  it('dispatches before the ship gate only with a reason, and keeps what was known at the end', async () => {
    const early = await pour({
      pouredAt: iso(NOON - 3 * DAY),
      shelfId: room.shelfIds[2] ?? null,
      overfill: true,
    });
    const { id, version } = early.card;
    const end = { version, as: 'dispatched' as const };
    const refused = await refusal(batches.end(floor.studioId, id, end, lead));
    expect(refused.code).toBe('not-ready');
    const ended = await batches.end(
      floor.studioId,
      id,
      { ...end, at: iso(NOON - DAY), reason: 'sample for the stockist' },
      lead,
    );
    expect(ended.card).toMatchObject({ status: 'dispatched', shelfId: null });
    expect(ended.card.cureAgeDays).toBeCloseTo(2, 9);
    expect(ended.stays.at(-1)?.to).toBe(iso(NOON - DAY));
    const [line] = await floor.sql<{ became: string }[]>(
      `SELECT became FROM audit WHERE thing_id = ? AND action = 'dispatched'`,
      [id],
    );
    expect(JSON.parse(line?.became ?? '{}')).toMatchObject({ reason: 'sample for the stockist' });
    const again = { version: version + 1, as: 'scrapped' as const };
    expect((await refusal(batches.end(floor.studioId, id, again, lead))).code).toBe('conflict');

    const ready = await pour({
      pouredAt: iso(NOON - 15 * DAY),
      shelfId: room.shelfIds[2] ?? null,
      overfill: true,
    });
    expect(ready.card.ship.state).toBe('reached');
    const gone = await batches.end(floor.studioId, ready.card.id, { version: 1, as: 'dispatched' }, lead);
    expect(gone.card.status).toBe('dispatched');
  });

  it('stores hardening and cure age with a test, opens the ship gate of the design, and dates the re-check', async () => {
    const design = await floor.addDesign('soy-container', {}, false);
    const stays = { pouredAt: iso(NOON - 20 * DAY), shelfId: room.shelfIds[0] ?? null, overfill: true };
    const page = await pour({ designId: design.id, ...stays });
    const other = await pour({ designId: design.id, ...stays });
    expect(page.card.ship).toMatchObject({ state: 'blocked', blockedBy: ['no-passing-test'] });
    const test = { at: iso(NOON - 6 * DAY), passed: true, note: 'full pool after three hours' };
    const tested = await batches.recordTest(floor.studioId, page.card.id, test, lead);
    expect(tested.verdicts[0]).toMatchObject({ signedBy: 'Ines Sampaio', passed: true });
    expect(tested.verdicts[0]?.cureAgeDays).toBeCloseTo(14, 9);
    expect(tested.verdicts[0]?.hardeningAtTest).toBeCloseTo(0.9, 9);
    expect(tested.card.ship.state).toBe('reached');
    // Soy tested at 14 days at 21 °C has hardened by a further 0.05 after 23.70 days.
    const due = (Date.parse(tested.estimate?.recheck.at ?? '') - (NOON - 20 * DAY)) / DAY;
    expect(due).toBeCloseTo(23.7, 2);
    const [card] = floor.estimates.cards([other.card.id], false);
    expect(card?.ship.state).toBe('reached');
    const before = await batches.get(floor.studioId, page.card.id, iso(NOON - 7 * DAY), 'lead');
    expect(before.verdicts).toEqual([]);
    expect(before.card.ship.state).not.toBe('reached');
    const tooEarly = { ...test, at: iso(NOON - 21 * DAY) };
    expect((await refusal(batches.recordTest(floor.studioId, page.card.id, tooEarly, lead))).code).toBe(
      'bad-input',
    );
  });

  it('gives a viewer neither recipe nor tests nor notes, and another studio nothing at all', async () => {
    const page = await pour({ shelfId: room.shelfIds[0] ?? null, overfill: true });
    const seen = await batches.get(floor.studioId, page.card.id, undefined, 'viewer');
    expect(seen.recipe).toBeNull();
    expect(seen.notes).toBe('');
    expect(seen.verdicts).toEqual([]);
    expect(seen.card).toMatchObject({ designName: null, waxFamily: null });
    expect(page.estimate?.numbers).toHaveProperty('testDays');
    expect(seen.estimate).toMatchObject({ asOf: page.estimate?.asOf, numbers: null });
    const foreign = await floor.addStudio('Other', 'America/Halifax');
    expect((await refusal(batches.get(foreign, page.card.id, undefined, 'owner'))).code).toBe('not-found');
    expect((await refusal(batches.curve(foreign, page.card.id))).code).toBe('not-found');
    const theirs = await floor.addRoom(foreign);
    const toTheirs = { version: 1, shelfId: theirs.shelfIds[0] ?? '', overfill: true };
    expect((await refusal(batches.move(floor.studioId, page.card.id, toTheirs, lead))).code).toBe(
      'not-found',
    );
    const ours = { version: 1, shelfId: room.shelfIds[1] ?? '', overfill: true };
    expect((await refusal(batches.move(foreign, page.card.id, ours, lead))).code).toBe('not-found');
  });

  it('draws the curve from the pour over now into the forecast', async () => {
    const page = await pour({
      pouredAt: iso(NOON - 5 * DAY),
      shelfId: room.shelfIds[0] ?? null,
      overfill: true,
    });
    const curve = await batches.curve(floor.studioId, page.card.id);
    expect(batchRoutes.curve.reply.parse(curve)).toEqual(curve);
    const ages = curve.points.map((point) => point.cureAgeDays);
    expect(ages).toEqual([...ages].sort((a, b) => a - b));
    expect(curve.points.some((point) => point.forecast && point.highDays > point.lowDays)).toBe(true);
    expect(curve.points[0]?.cureAgeDays).toBe(0);
  });

  it('finds, counts and pages', async () => {
    const list = (change: object) =>
      batches.list(
        floor.studioId,
        { status: 'all', offset: 0, limit: 100, search: undefined, ...change },
        'lead',
      );
    const all = await list({});
    expect(batchRoutes.list.reply.parse(all)).toEqual(all);
    expect(all.batches).toHaveLength(all.total);
    const times = all.batches.map((card) => Date.parse(card.pouredAt));
    expect(times).toEqual([...times].sort((a, b) => b - a));
    const page = await list({ offset: 2, limit: 3 });
    expect(page.batches.map((card) => card.id)).toEqual(all.batches.slice(2, 5).map((card) => card.id));
    const ended = await list({ status: 'ended' });
    expect(ended.batches.length).toBeGreaterThan(0);
    expect(ended.batches.every((card) => card.status !== 'curing')).toBe(true);
    expect((await list({ search: 'special' })).batches.map((card) => card.code)).toEqual(['SPECIAL-1']);
    expect((await list({ search: '100%' })).total).toBe(0);
    const byDesign = all.batches[0]?.designName ?? '';
    expect((await list({ search: byDesign })).total).toBeGreaterThan(0);
    const viewer = await batches.list(
      floor.studioId,
      { status: 'all', offset: 0, limit: 5, search: byDesign },
      'viewer',
    );
    expect(viewer.total).toBe(0);
  });
});
