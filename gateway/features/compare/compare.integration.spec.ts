import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { compareRoutes } from '#shared/contract/compare';
import type { Studio } from '#shared/contract/studios';
import { cellOf } from '#shared/cure/grid';
import { RoomCellsRepository } from '../../history/room-cells-repository.js';
import { DAY, HOUR, NOON, TestFloor } from '../estimates/test-floor.js';
import { Compare } from './compare.js';
import { CompareRepository } from './compare-repository.js';

const person = {
  id: randomUUID(),
  name: 'Ines',
  email: 'i@example.org',
  sessionId: '',
  owner: false,
  memberships: [],
};
const period = { from: new Date(NOON - 20 * DAY).toISOString(), to: new Date(NOON).toISOString() };

describe('comparison of studios on a real database', () => {
  let floor: TestFloor;
  let warm: string;
  let cold: string;
  let roles: Record<string, Studio['role']>;

  const compare = () => {
    const studio = ([id, role]: [string, Studio['role']]): Studio => ({
      ...{ id, role, name: `Studio ${id.slice(0, 4)}`, timeZone: 'Europe/Lisbon', unit: 'C', address: '' },
      ...{
        pressureHpa: 1013.25,
        quietFrom: null,
        quietTo: null,
        recipients: [],
        escalateAfterMinutes: 30,
        version: 1,
      },
    });
    const { dataSource } = floor.database;
    return new Compare({
      repository: new CompareRepository(dataSource),
      studios: { list: async () => Object.entries(roles).map(studio) },
      cells: new RoomCellsRepository(dataSource),
      estimates: floor.estimates,
      clock: floor.clock,
    }).compare(person, period);
  };

  beforeAll(async () => {
    floor = await TestFloor.open();
    [warm, cold] = [floor.studioId, await floor.addStudio('Larkrise North', 'America/Halifax')];
    roles = { [warm]: 'lead', [cold]: 'owner' };
    const { id: designId } = await floor.addDesign('paraffin-container');
    for (const [studioId, celsius] of [
      [warm, 21],
      [cold, 16],
    ] as const) {
      const room = await floor.addRoom(studioId);
      const sensor = await floor.addSensor(room);
      await floor.record(
        sensor,
        cellOf(NOON - 40 * DAY),
        cellOf(NOON),
        (cell) => celsius + 0.3 * Math.sin(cell),
      );
      for (let index = 0; index < 9; index++) {
        const pouredAt = NOON - (19 - index) * DAY - index * 3 * HOUR;
        await floor.addBatch(designId, pouredAt, [{ room, from: pouredAt, to: null }], studioId);
      }
      await floor.sql(
        `INSERT INTO alert (id, studio_id, room_id, kind, severity, state, facts, raised_at, acknowledged_at) VALUES
         (?,?,?,'too-cold','warning','cleared','{}',?,?), (?,?,?,'too-cold','warning','open','{}',?,NULL), (?,?,?,'too-cold','warning','open','{}',?,NULL)`,
        [
          ...[
            randomUUID(),
            studioId,
            room.id,
            new Date(NOON - 3 * DAY),
            new Date(NOON - 3 * DAY + 12 * 60_000),
          ],
          ...[randomUUID(), studioId, room.id, new Date(NOON - 2 * DAY)],
          ...[randomUUID(), studioId, room.id, new Date(NOON - 30 * DAY)],
        ],
      );
    }
    await floor.restart();
  });
  afterAll(() => floor.close());

  it('gives what rooms did, how alerts were answered and how long batches took', async () => {
    const reply = await compare();
    expect(compareRoutes.compare.reply.parse(reply)).toEqual(reply);
    const [a, b] = [warm, cold].map((id) => reply.studios.find(({ studioId }) => studioId === id));
    expect(a?.inBand).toBe(1);
    expect(b?.inBand).toBe(0);
    expect(a?.roomDays).toBeCloseTo(20, 6);
    expect(a?.alertsPerRoomDay).toBeCloseTo(0.1, 6);
    expect(a?.minutesToAnswer).toBe(12);
    expect(a?.daysOverNominal[0]).toMatchObject({ waxFamily: 'paraffin-container', n: 9 });
    expect(Math.abs(a?.daysOverNominal[0]?.mean ?? 1)).toBeLessThan(0.02);
    // Paraffin's scent clock (50 kJ/mol) decides at 16 °C: 1.5/0.70221 − 1.5 days, computed from the stated formula by an
    // independent script; a date is told to the cell (0.007 d), and the room wavers by 0.3 K.
    expect(Math.abs((b?.daysOverNominal[0]?.mean ?? 0) - 0.6361)).toBeLessThan(0.015);
    expect(reply.pairs).toHaveLength(1);
    expect(reply.pairs[0]).toMatchObject({ verdict: 'different', studioA: warm, studioB: cold });
    expect(reply.pairs[0]?.difference).toBeLessThan(-0.5);
  });

  it('leaves out studios in which the person may not compare', async () => {
    roles = { [warm]: 'lead', [cold]: 'maker' };
    const reply = await compare();
    expect(reply.studios.map(({ studioId }) => studioId)).toEqual([warm]);
    expect(reply.pairs).toEqual([]);
    roles = { [warm]: 'lead', [cold]: 'owner' };
  });
});
