import { describe, expect, it } from 'vitest';
import { BatchCycles } from '#shared/cure/cycles';
import { RoomHistory } from '#shared/cure/room-history';

const ORIGIN = 3_000_000;
const CELLS = 60;

function calmRoom(): RoomHistory {
  const room = new RoomHistory(ORIGIN);
  for (let cell = ORIGIN; cell < ORIGIN + CELLS; cell++) room.set(cell, 20);
  return room;
}

const wholeStay = (room: RoomHistory) => [
  { kind: 'room' as const, roomId: 'r', room, from: ORIGIN, to: ORIGIN + CELLS },
];

describe('swings of a batch, carried on', () => {
  it('equal a count from scratch however many cells were rewritten in between', () => {
    const room = calmRoom();
    const carried = new BatchCycles();
    for (let rewritten = 1; rewritten <= 25; rewritten++) {
      // One, then ten, then more rewrites between two counts.
      for (let again = 0; again < (rewritten === 2 ? 9 : 1); again++)
        room.set(ORIGIN + 2 * rewritten, 23 + again + rewritten / 10);
      expect(carried.damage(wholeStay(room))).toBeCloseTo(new BatchCycles().damage(wholeStay(room)), 12);
    }
  });

  it('are counted anew for a history that was built anew', () => {
    const carried = new BatchCycles();
    const wild = calmRoom();
    wild.set(ORIGIN + 10, 30);
    expect(carried.damage(wholeStay(wild))).toBeGreaterThan(0);
    const fresh = calmRoom();
    for (let count = 0; count < wild.rewrites; count++) fresh.set(ORIGIN, 20 + (count % 2 === 0 ? 0.1 : 0));
    expect(fresh.rewrites).toBe(wild.rewrites);
    expect(carried.damage(wholeStay(fresh))).toBe(0);
  });
});
