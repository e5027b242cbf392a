import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../http/actor.js';
import type { ProblemError } from '../../http/problem-error.js';
import { DAY, NOON, TestFloor, type TestRoom } from '../estimates/test-floor.js';
import { Rooms } from '../rooms/rooms.js';
import { RoomsRepository } from '../rooms/rooms-repository.js';
import { Racks } from './racks.js';
import { RacksRepository } from './racks-repository.js';

const codeOf = (attempt: Promise<unknown>) =>
  attempt.then(
    () => 'done',
    (error: ProblemError) => error.code,
  );

describe('racks on a real database', () => {
  let floor: TestFloor;
  let racks: Racks;
  let lead: Actor;
  let room: TestRoom;
  const told: string[] = [];

  beforeAll(async () => {
    floor = await TestFloor.open();
    const { dataSource } = floor.database;
    const rooms = new Rooms(new RoomsRepository(dataSource), floor.clock, () => undefined);
    racks = new Racks(new RacksRepository(dataSource), rooms, floor.clock, (_studio, roomId) =>
      told.push(roomId),
    );
    lead = await floor.actor();
    room = await floor.addRoom();
  });
  afterAll(() => floor.close());

  it('keeps shelves in their order from the top, through adding, reordering and taking away', async () => {
    const fields = { name: 'Window side', position: 2, shelves: [{ capacity: 24 }, { capacity: 30 }] };
    const rack = await racks.create(floor.studioId, room.id, fields, lead);
    expect(rack.shelves.map(({ position, capacity }) => [position, capacity])).toEqual([
      [1, 24],
      [2, 30],
    ]);
    expect(told).toEqual([room.id]);
    const [top, bottom] = rack.shelves;
    const changed = await racks.change(
      floor.studioId,
      rack.id,
      {
        version: 1,
        name: 'Door side',
        position: 0,
        shelves: [{ id: bottom?.id, capacity: 30 }, { capacity: 10 }, { id: top?.id, capacity: 25 }],
      },
      lead,
    );
    expect(changed.shelves.map(({ id }) => id).indexOf(bottom?.id ?? '')).toBe(0);
    expect(changed.shelves.map(({ capacity }) => capacity)).toEqual([30, 10, 25]);
    expect(changed.version).toBe(2);
    const fewer = await racks.change(
      floor.studioId,
      rack.id,
      { ...fields, version: 2, shelves: [{ id: top?.id, capacity: 25 }] },
      lead,
    );
    expect(fewer.shelves).toEqual([{ id: top?.id, position: 1, capacity: 25 }]);
    expect(await codeOf(racks.change(floor.studioId, rack.id, { ...fields, version: 2 }, lead))).toBe(
      'changed-meanwhile',
    );
    const gone = { ...fields, version: 3, shelves: [{ id: bottom?.id, capacity: 1 }] };
    expect(await codeOf(racks.change(floor.studioId, rack.id, gone, lead))).toBe('bad-input');
    await racks.remove(floor.studioId, rack.id, lead);
    expect((await racks.list(floor.studioId)).map(({ id }) => id)).not.toContain(rack.id);
  });

  it('keeps a shelf while a batch stands on it, and its past after it was taken away', async () => {
    const { id: designId } = await floor.addDesign('soy-container');
    const [rack] = (await racks.list(floor.studioId)).filter(({ roomId }) => roomId === room.id);
    if (!rack) throw new Error('The room has a rack.');
    const [first, second, third] = rack.shelves;
    const batchId = await floor.addBatch(designId, NOON - 3 * DAY, [
      { room, from: NOON - 3 * DAY, to: NOON - DAY, shelf: 1 },
      { room, from: NOON - DAY, to: null, shelf: 2 },
    ]);
    const only = (shelves: ({ id: string; capacity: number } | undefined)[]) => ({
      version: rack.version,
      name: rack.name,
      position: rack.position,
      shelves: shelves.flatMap((shelf) => (shelf ? [{ id: shelf.id, capacity: shelf.capacity }] : [])),
    });
    const taken = await racks
      .change(floor.studioId, rack.id, only([first, second]), lead)
      .catch((e: ProblemError) => e);
    expect(taken).toMatchObject({ code: 'conflict' });
    expect((taken as ProblemError).detail).toContain('shelf 3');
    const changed = await racks.change(floor.studioId, rack.id, only([first, third]), lead);
    expect(changed.shelves.map(({ id }) => id)).toEqual([first?.id, third?.id]);
    await floor.restart();
    const page = await floor.estimates.page(floor.studioId, batchId, null, false);
    expect(page?.facts.stays.map(({ shelfId }) => shelfId)).toEqual([second?.id, third?.id]);
    expect(await codeOf(racks.remove(floor.studioId, rack.id, lead))).toBe('conflict');
  });

  it('shows nothing to another studio', async () => {
    const foreign = await floor.addStudio('Other', 'America/Halifax');
    const fields = { name: 'X', position: 0, shelves: [{ capacity: 5 }] };
    expect(await codeOf(racks.create(foreign, room.id, fields, lead))).toBe('not-found');
    const [rack] = await racks.list(floor.studioId);
    expect(await codeOf(racks.change(foreign, rack?.id ?? '', { ...fields, version: 1 }, lead))).toBe(
      'not-found',
    );
    expect(await codeOf(racks.remove(foreign, rack?.id ?? '', lead))).toBe('not-found');
    expect(await racks.list(foreign)).toEqual([]);
  });
});
