import type { BatchCard, GateView } from '#shared/contract/batches';
import type { RoomNow } from '#shared/contract/overview';
import type { Rack } from '#shared/contract/racks';
import type { RoomLimits } from '#shared/contract/rooms';

/** Things on a cure floor for tests; no two fields of one thing are equal. */

const id = (kind: number, number: number) =>
  `0000000${kind}-0000-4000-8000-${String(number).padStart(12, '0')}`;

export const STUDIO_ID = id(1, 1);
export const ROOM_ID = id(2, 1);

export function aGate(over: Partial<GateView> = {}): GateView {
  return {
    state: 'expected',
    reachedAt: null,
    t10: '2026-05-06T08:00:00.000Z',
    t50: '2026-05-08T09:00:00.000Z',
    t90: '2026-05-11T10:00:00.000Z',
    chanceNow: 0.12,
    blockedBy: [],
    ...over,
  };
}

export const REACHED: Partial<GateView> = {
  state: 'reached',
  reachedAt: '2026-05-03T07:40:00.000Z',
  t10: null,
  t50: null,
  t90: null,
};

export function aBatch(number: number, over: Partial<BatchCard> = {}): BatchCard {
  return {
    id: id(3, number),
    studioId: STUDIO_ID,
    code: `L-${100 + number}`,
    designName: 'Fig Leaf',
    waxFamily: 'soy-container',
    vessels: 24,
    pouredAt: '2026-04-24T11:00:00.000Z',
    status: 'curing',
    shelfId: id(5, 1),
    rackId: id(4, 1),
    roomId: ROOM_ID,
    hardening: 0.61,
    scent: 0.47,
    cureAgeDays: 9.3,
    wickTest: aGate(),
    ship: aGate({
      t10: '2026-05-10T08:00:00.000Z',
      t50: '2026-05-13T09:00:00.000Z',
      t90: '2026-05-17T10:00:00.000Z',
    }),
    recheckDue: false,
    frosting: { index: 14, level: 'low' },
    atRisk: false,
    resoftened: false,
    version: 2,
    ...over,
  };
}

/** A rack of the test room; its shelves hold 36, 48, … vessels from the top. */
export function aRack(number: number, shelves = 2, over: Partial<Rack> = {}): Rack {
  return {
    id: id(4, number),
    roomId: ROOM_ID,
    name: `Rack ${number}`,
    position: number,
    shelves: Array.from({ length: shelves }, (_, index) => ({
      id: id(5, (number - 1) * 10 + index + 1),
      position: index + 1,
      capacity: 36 + 12 * index,
    })),
    version: 3,
    ...over,
  };
}

export function someLimits(over: Partial<RoomLimits> = {}): RoomLimits {
  return {
    bandLow: 18,
    bandHigh: 24,
    heatLimit: null,
    humidityHigh: 65,
    swingLimit: 4,
    slipDays: 1.5,
    ...over,
  };
}

export function aRoomNow(over: Partial<RoomNow> = {}): RoomNow {
  return {
    roomId: ROOM_ID,
    celsius: 20.4,
    humidity: 55,
    dewPoint: 11.1,
    at: '2026-05-04T14:41:58.000Z',
    stale: false,
    condition: 'fine',
    since: '2026-04-25T13:00:00.000Z',
    heatLimit: 25,
    peakToday: 21.2,
    slippedHours: 0,
    battery: 81,
    ...over,
  };
}
