import { BatchCycles } from '#shared/cure/cycles';
import { type BatchToEstimate, estimateBatch } from '#shared/cure/estimate';
import { CELL_MS, CELLS_PER_DAY } from '#shared/cure/grid';
import { RoomHistory } from '#shared/cure/room-history';
import { WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';

/** How long the engine takes for ten thousand batches in forty rooms over sixty days, without a database. */
const [BATCHES, ROOMS, DAYS] = [10_000, 40, 60];
const ORIGIN = 20_000 * CELLS_PER_DAY;
const families = Object.values(WAX_FAMILY_DEFAULTS);

function roomOf(seed: number): RoomHistory {
  const room = new RoomHistory(ORIGIN);
  for (let cell = 0; cell < DAYS * CELLS_PER_DAY; cell++) {
    const day = Math.sin((2 * Math.PI * cell) / CELLS_PER_DAY);
    const silent = (cell + seed * 997) % 3001 < 30;
    room.set(ORIGIN + cell, silent ? null : 20 + day * 1.5 + ((cell * 7919 + seed) % 100) / 200);
  }
  return room;
}

const rooms = new Map(Array.from({ length: ROOMS }, (_, index) => [String(index), roomOf(index)]));
const batches = Array.from({ length: BATCHES }, (_, index): BatchToEstimate => {
  const pouredAt = (ORIGIN + (index % (DAYS - 1)) * CELLS_PER_DAY) * CELL_MS;
  return {
    pouredAt,
    stays: [{ roomId: String(index % ROOMS), from: pouredAt, to: null }],
    kinetics: (families[index % families.length] ?? WAX_FAMILY_DEFAULTS.palm).kinetics,
    loadPercentOfWax: 6,
    lastTest: null,
    designPassed: true,
    cycles: new BatchCycles(),
  };
});

function all(nowCell: number, roomId: string | null): number {
  const start = performance.now();
  for (const batch of batches) {
    if (roomId !== null && batch.stays[0]?.roomId !== roomId) continue;
    estimateBatch(batch, (id) => rooms.get(id) ?? null, nowCell * CELL_MS);
  }
  return performance.now() - start;
}

let now = ORIGIN + DAYS * CELLS_PER_DAY;
const cold = all(now, null);
const warm = all(now, null);
for (const room of rooms.values()) room.set(now, 20.4);
now++;
const afterCell = all(now, null);
rooms.get('3')?.set(ORIGIN + 40 * CELLS_PER_DAY, 23);
const afterLate = all(now, '3');
const show = (ms: number) => `${ms.toFixed(0)} ms`;
console.log(`  ${BATCHES} batches cold: ${show(cold)}`);
console.log(`  the same again: ${show(warm)} (${(warm / cold).toFixed(2)} of cold)`);
console.log(
  `  all, after a new cell in every room: ${show(afterCell)} (${(afterCell / cold).toFixed(2)} of cold)`,
);
console.log(
  `  the ${BATCHES / ROOMS} batches of one room after a late reading: ${show(afterLate)} (${(afterLate / cold).toFixed(3)} of cold)`,
);
