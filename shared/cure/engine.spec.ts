import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { BatchCycles } from '#shared/cure/cycles';
import { estimateBatch, gapsOf } from '#shared/cure/estimate';
import { CELL_MS } from '#shared/cure/grid';
import type { CureKinetics } from '#shared/cure/kinetics';
import { RoomHistory } from '#shared/cure/room-history';
import { type PlainRoom, plainEstimate, type PlainStay } from '#shared/cure/test-plain-estimate';
import { WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';
import { normalCdf } from '#shared/statistics/normal';

const ORIGIN = 2_900_000;
const SOY = WAX_FAMILY_DEFAULTS['soy-container'].kinetics;

/** Cell temperatures with gaps short and long. */
const recording = (cells: number) =>
  fc
    .array(
      fc.oneof(
        {
          weight: 6,
          arbitrary: fc.record({
            run: fc.integer({ min: 1, max: 60 }),
            celsius: fc.double({ min: 8, max: 33, noNaN: true }),
          }),
        },
        {
          weight: 1,
          arbitrary: fc.record({ run: fc.integer({ min: 1, max: 70 }), celsius: fc.constant(null) }),
        },
        {
          weight: 1,
          arbitrary: fc.record({
            run: fc.integer({ min: 1, max: 4 }),
            celsius: fc.double({ min: 36, max: 44, noNaN: true }),
          }),
        },
      ),
      { minLength: 3, maxLength: 25 },
    )
    .map((runs) => {
      const values: (number | null)[] = [];
      for (const { run, celsius } of runs) {
        for (let i = 0; i < run; i++) values.push(celsius === null ? null : celsius + (i % 7) * 0.21);
      }
      while (values.length < cells) values.push(...values.slice(0, cells - values.length));
      return values.slice(0, cells);
    })
    .filter((values) => values.some((value) => value !== null));

function estimateOf(
  stays: PlainStay[],
  rooms: Map<string, RoomHistory>,
  kinetics: CureKinetics,
  nowCell: number,
  cycles = new BatchCycles(),
) {
  const estimated = estimateBatch(
    {
      pouredAt: (stays[0]?.fromCell ?? 0) * CELL_MS,
      stays: stays.map(({ roomId, fromCell, toCell }) => ({
        roomId,
        from: fromCell * CELL_MS,
        to: toCell === null ? null : toCell * CELL_MS,
      })),
      kinetics,
      loadPercentOfWax: 6,
      lastTest: null,
      designPassed: true,
      cycles,
    },
    (id) => rooms.get(id) ?? null,
    nowCell * CELL_MS,
  );
  if (!estimated.known) throw new Error('an estimate was expected');
  return estimated;
}

describe('incremental engine', () => {
  it('equals a plain recomputation, with late readings in any order, two rooms and moves', () => {
    const cells = 700;
    fc.assert(
      fc.property(
        recording(cells),
        recording(cells),
        fc.array(
          fc.tuple(
            fc.integer({ min: 0, max: cells - 1 }),
            fc.option(fc.double({ min: 10, max: 30, noNaN: true })),
          ),
          {
            maxLength: 12,
          },
        ),
        fc.integer({ min: 60, max: 300 }),
        fc.integer({ min: 310, max: 640 }),
        (first, second, late, pour, move) => {
          const plain = new Map<string, PlainRoom>([
            ['a', { origin: ORIGIN, cells: [...first] }],
            ['b', { origin: ORIGIN, cells: [...second] }],
          ]);
          const rooms = new Map(
            [...plain].map(([id, room]) => {
              const history = new RoomHistory(ORIGIN);
              for (const [index, celsius] of room.cells.entries())
                if (celsius !== null) history.set(ORIGIN + index, celsius);
              history.advanceTo(ORIGIN + cells);
              return [id, history] as const;
            }),
          );
          const stays: PlainStay[] = [
            { roomId: 'a', fromCell: ORIGIN + pour, toCell: ORIGIN + move },
            { roomId: 'b', fromCell: ORIGIN + move, toCell: null },
          ];
          const cycles = new BatchCycles();
          const compare = () => {
            const now = ORIGIN + cells;
            if ([...plain.values()].some((room) => room.cells.every((value) => value === null))) return;
            const expected = plainEstimate(stays[0]!.fromCell * CELL_MS, stays, plain, SOY, now, normalCdf);
            const { estimate } = estimateOf(stays, rooms, SOY, now, cycles);
            expect(estimate.hardeningDays).toBeCloseTo(expected.hardeningDays, 9);
            expect(estimate.scentDays).toBeCloseTo(expected.scentDays, 9);
            expect(estimate.frosting!.degreeHours).toBeCloseTo(expected.degreeHours, 7);
            expect(estimate.frosting!.cycleDamage).toBeCloseTo(expected.cycles, 9);
            expect(estimate.wickTest.chanceNow).toBeCloseTo(expected.chanceNow, 9);
            for (const name of ['t10', 't50', 't90'] as const)
              expect(estimate.wickTest[name]).toBe(expected[name]);
          };
          compare();
          for (const [index, celsius] of late) {
            const id = index % 2 === 0 ? 'a' : 'b';
            plain.get(id)!.cells[index] = celsius;
            rooms.get(id)!.set(ORIGIN + index, celsius);
          }
          compare();
        },
      ),
      { numRuns: 40 },
    );
  }, 60_000);

  it('P9: the order in which cells arrive and repeats do not matter', () => {
    fc.assert(
      fc.property(recording(300), fc.infiniteStream(fc.nat()), (values, random) => {
        const inOrder = new RoomHistory(ORIGIN);
        inOrder.advanceTo(ORIGIN + 300);
        values.forEach((celsius, index) => inOrder.set(ORIGIN + index, celsius));
        const shuffled = [...values.entries()].sort(() => (random.next().value! % 3) - 1);
        const outOfOrder = new RoomHistory(ORIGIN);
        outOfOrder.advanceTo(ORIGIN + 300);
        for (const [index, celsius] of [...shuffled, ...shuffled.slice(0, 40)])
          outOfOrder.set(ORIGIN + index, celsius);
        const stays = [{ roomId: 'a', fromCell: ORIGIN + 10, toCell: null }];
        const days = (room: RoomHistory) =>
          estimateOf(stays, new Map([['a', room]]), SOY, ORIGIN + 300).estimate.hardeningDays;
        expect(days(outOfOrder)).toBeCloseTo(days(inOrder), 12);
      }),
      { numRuns: 50 },
    );
  });

  it('fills the past once the first reading comes, and says how', () => {
    const room = new RoomHistory(ORIGIN);
    room.advanceTo(ORIGIN + 100);
    expect(room.known).toBe(false);
    room.set(ORIGIN + 50, 19.5);
    expect(room.known).toBe(true);
    expect(room.celsius(ORIGIN)).toBe(19.5);
    const { segments } = estimateOf(
      [{ roomId: 'a', fromCell: ORIGIN, toCell: null }],
      new Map([['a', room]]),
      SOY,
      ORIGIN + 100,
    );
    expect(gapsOf(segments, SOY).map((gap) => gap.fill)).toEqual(['last-known', 'last-known']);
  });

  it('carries the last known temperature through a time without a shelf', () => {
    const room = new RoomHistory(ORIGIN);
    for (let cell = 0; cell < 300; cell++) room.set(ORIGIN + cell, cell < 100 ? 18 : 24);
    const rooms = new Map([['a', room]]);
    const stays = [
      { roomId: 'a', fromCell: ORIGIN, toCell: ORIGIN + 100 },
      { roomId: 'a', fromCell: ORIGIN + 150, toCell: null },
    ];
    const { segments, estimate } = estimateOf(stays, rooms, SOY, ORIGIN + 300);
    expect(segments.map((segment) => segment.kind)).toEqual(['room', 'hole', 'room']);
    expect(segments[1]).toMatchObject({ celsius: 18 });
    expect(estimate.hardeningSums.variance).toBeGreaterThan(0);
  });

  it('knows nothing of a batch whose rooms were never measured', () => {
    const empty = new RoomHistory(ORIGIN);
    empty.advanceTo(ORIGIN + 10);
    const estimated = estimateBatch(
      {
        pouredAt: ORIGIN * CELL_MS,
        stays: [{ roomId: 'a', from: ORIGIN * CELL_MS, to: null }],
        kinetics: SOY,
        loadPercentOfWax: 6,
        lastTest: null,
        designPassed: true,
        cycles: new BatchCycles(),
      },
      () => empty,
      (ORIGIN + 10) * CELL_MS,
    );
    expect(estimated.known).toBe(false);
  });
});
