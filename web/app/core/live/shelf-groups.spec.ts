import { describe, expect, it } from 'vitest';
import type { RoomWall } from '#shared/contract/overview';
import { aBatch, aRack, aRoomNow, someLimits, STUDIO_ID } from '#shared/words/test-floor';
import { studioFormats } from '../time/studio-formats';
import { shelfDoubts, shelfGroups } from './shelf-groups';
import { StudioLive } from './studio-live';

const formats = studioFormats('Europe/Lisbon', 'C');
const roomId = (number: number) => `room-${number}`;
const room = (number: number, name: string, celsius: number): RoomWall => ({
  ...{ id: roomId(number), name, position: number, limits: someLimits() },
  now: aRoomNow({ roomId: roomId(number), celsius }),
  ribbon: { from: '2026-05-03T14:40:00.000Z', celsius: [] },
  racks: [{ ...aRack(number), roomId: roomId(number) }],
});
const shelfOf = (rack: number, position: number) => aRack(rack).shelves[position - 1]!.id;
const studio = new StudioLive({
  studio: {
    ...{ id: STUDIO_ID, name: 'Quay Street', timeZone: 'Europe/Lisbon', unit: 'C', address: 'Pier 4' },
    ...{ pressureHpa: 1009, quietFrom: null, quietTo: 420, recipients: [], escalateAfterMinutes: 30 },
    ...{ version: 5, role: 'lead' },
  },
  rooms: [room(1, 'Loft', 25.5), room(2, 'Attic', 23.6), room(3, 'Cellar', 19)],
  batches: [aBatch(1, { roomId: roomId(3), rackId: aRack(3).id, shelfId: shelfOf(3, 2), vessels: 30 })],
  alerts: [],
});
const suggested = (vessels: number, limit: number | null) => {
  const best = shelfGroups(studio, vessels, limit, formats).suggestion;
  return best && `${best.roomName}, ${best.name}`;
};

describe('where to put a batch', () => {
  it('is the tightest shelf with room for all of it, in a room well below the wax’s limit', () => {
    expect(suggested(18, 25)).toBe('Cellar, Rack 3, shelf 2');
    expect(suggested(20, 25)).toBe('Cellar, Rack 3, shelf 1');
    // The Cellar has no shelf for so many; the Attic is close to the limit but below it.
    expect(suggested(40, 25)).toBe('Attic, Rack 2, shelf 2');
    expect(suggested(60, 25)).toBeNull();
  });

  it('may be a warm room where the wax does not frost', () => {
    expect(suggested(40, null)).toBe('Loft, Rack 1, shelf 2');
  });

  it('tells what speaks against a shelf', () => {
    const { groups } = shelfGroups(studio, 20, 25, formats);
    expect(groups.at(-1)).toMatchObject({ roomName: 'Loft', tooWarm: true });
    expect(shelfDoubts(groups, shelfOf(1, 1), 20)).toEqual({
      tooWarm: 'Loft is above the frosting limit of this wax now: it may cure sooner and frost.',
      full: '',
    });
    expect(shelfDoubts(groups, shelfOf(3, 2), 20)).toEqual({
      tooWarm: '',
      full: 'This shelf has room for 18 more vessels of 75 mm; this batch takes 20.',
    });
    expect(shelfDoubts(groups, '', 20)).toEqual({ tooWarm: '', full: '' });
  });
});
