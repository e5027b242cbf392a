import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cureCurve } from '#shared/cure/curve';
import { BatchCycles } from '#shared/cure/cycles';
import { estimateBatch } from '#shared/cure/estimate';
import { frostingIndex } from '#shared/cure/frosting';
import { CELL_MS, CELLS_PER_DAY } from '#shared/cure/grid';
import { type CureKinetics, hardeningClass, rate } from '#shared/cure/kinetics';
import { MeanKinetic } from '#shared/cure/mean-kinetic';
import { RoomHistory } from '#shared/cure/room-history';
import { shiftLedger } from '#shared/cure/shifts';
import { degreeHoursOf, sumSegments } from '#shared/cure/stays';
import { WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';
import { fromFahrenheit, toFahrenheit } from '#shared/units/temperature';

const ORIGIN = 2_900_016;
const SOY = WAX_FAMILY_DEFAULTS['soy-container'].kinetics;

const temperatures = (min: number, max: number, cells = 600) =>
  fc
    .array(fc.tuple(fc.integer({ min: 1, max: 80 }), fc.double({ min, max, noNaN: true })), {
      minLength: 8,
      maxLength: 20,
    })
    .map((runs) => {
      const values = runs.flatMap(([run, celsius]) =>
        Array.from({ length: run }, (_, i) => celsius + (i % 5) * 0.03),
      );
      while (values.length < cells) values.push(...values.slice(0, cells - values.length));
      return values.slice(0, cells);
    });

const roomOf = (values: readonly (number | null)[]): RoomHistory => {
  const room = new RoomHistory(ORIGIN);
  values.forEach((celsius, index) => room.set(ORIGIN + index, celsius));
  return room;
};

function batchIn(kinetics: CureKinetics, stays?: { roomId: string; from: number; to: number | null }[]) {
  return {
    pouredAt: ORIGIN * CELL_MS,
    stays: stays ?? [{ roomId: 'a', from: ORIGIN * CELL_MS, to: null }],
    kinetics,
    loadPercentOfWax: 6,
    lastTest: null,
    designPassed: true,
    cycles: new BatchCycles(),
  };
}

function estimate(
  values: readonly (number | null)[] | RoomHistory,
  kinetics: CureKinetics = SOY,
  now?: number,
) {
  const room = values instanceof RoomHistory ? values : roomOf(values);
  const estimated = estimateBatch(batchIn(kinetics), () => room, (now ?? room.end) * CELL_MS);
  if (!estimated.known) throw new Error('an estimate was expected');
  return estimated;
}

const runs = { numRuns: 25 };

describe('properties of the estimate', () => {
  it('P1: age, hardening, scent, degree-hours and frosting never fall as time goes on', () => {
    fc.assert(
      fc.property(temperatures(5, 45), (values) => {
        const room = roomOf(values);
        let last = { days: 0, hardening: 0, scent: 0, degreeHours: 0, index: 0 };
        for (let cells = 20; cells <= values.length; cells += 37) {
          const { estimate: now } = estimate(room, SOY, ORIGIN + cells);
          const next = {
            days: now.hardeningDays,
            hardening: now.hardening,
            scent: now.scent,
            degreeHours: now.frosting!.degreeHours,
            index: now.frosting!.index,
          };
          for (const key of ['days', 'hardening', 'scent', 'degreeHours', 'index'] as const) {
            expect(next[key]).toBeGreaterThanOrEqual(last[key] - 1e-9);
          }
          last = next;
        }
      }),
      runs,
    );
  });

  it('P2 and P6: a constant 21 °C gives the wax its own days, whatever its energy', () => {
    fc.assert(
      fc.property(fc.double({ min: 5, max: 120, noNaN: true }), (energy) => {
        const room = roomOf(Array<number>(14 * CELLS_PER_DAY).fill(21));
        const kinetics = { ...SOY, hardeningEnergy: energy };
        const { estimate: now } = estimate(room, kinetics);
        expect(Math.abs(now.hardeningDays - 14)).toBeLessThanOrEqual(1e-9);
        expect(now.wickTest.state).toBe('reached');
        const early = estimate(room, kinetics, ORIGIN + 5 * CELLS_PER_DAY).estimate;
        expect(early.wickTest.t50).toBe((ORIGIN + 14 * CELLS_PER_DAY) * CELL_MS);
      }),
      runs,
    );
  });

  it('P3: pointwise warmer, up to the soft point, is ready no later (same usual day)', () => {
    fc.assert(
      fc.property(temperatures(8, 30, 400), fc.double({ min: 0, max: 5, noNaN: true }), (values, more) => {
        // The last fourteen days are the same in both, and so is the forecast.
        const same = Array<number>(14 * CELLS_PER_DAY).fill(20);
        const needed = { ...SOY, testDays: 40, scentDays: 40 };
        const cold = estimate([...values, ...same], needed).estimate.wickTest;
        const warm = estimate([...values.map((celsius) => celsius + more), ...same], needed).estimate
          .wickTest;
        expect(warm.t50!).toBeLessThanOrEqual(cold.t50!);
      }),
      runs,
    );
  });

  it('P4: age and degree-hours add up over any split', () => {
    fc.assert(
      fc.property(temperatures(5, 45), fc.integer({ min: 1, max: 599 }), (values, split) => {
        const room = roomOf(values);
        const part = (from: number, to: number) => [
          { kind: 'room' as const, roomId: 'a', room, from: ORIGIN + from, to: ORIGIN + to },
        ];
        const kinetic = hardeningClass(SOY);
        const days = (from: number, to: number) => sumSegments(part(from, to), kinetic).days;
        expect(days(0, split) + days(split, 600)).toBeCloseTo(days(0, 600), 11);
        const heat = (from: number, to: number) => degreeHoursOf(part(from, to), 25);
        expect(heat(0, split) + heat(split, 600)).toBeCloseTo(heat(0, 600), 9);
      }),
      runs,
    );
  });

  it('P5: the rate at 21 °C is 1 for any energy', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 150, noNaN: true }), (energy) => {
        expect(rate(21, { energy, capC: 27, softC: 38 })).toBe(1);
      }),
    );
  });

  it('P7: the same temperatures as a filled gap never narrow the range', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 16, max: 24, noNaN: true }),
        fc.integer({ min: 3, max: 200 }),
        (celsius, length) => {
          // At a constant temperature every kind of fill gives back what was there.
          const values: (number | null)[] = Array<number>(3 * CELLS_PER_DAY).fill(celsius);
          const whole = estimate(values).estimate.wickTest;
          const holed = [...values];
          for (let cell = 200; cell < 200 + length; cell++) holed[cell] = null;
          const gapped = estimate(holed).estimate.wickTest;
          expect(whole.chanceNow).toBeLessThan(0.1);
          const width = (gate: typeof whole) => gate.t90! - gate.t10!;
          expect(width(gapped)).toBeGreaterThanOrEqual(width(whole));
        },
      ),
      runs,
    );
  });

  it('P8: t10 ≤ t50 ≤ t90', () => {
    fc.assert(
      fc.property(temperatures(10, 30), (values) => {
        const { t10, t50, t90 } = estimate(values).estimate.wickTest;
        const order = [t10 ?? -Infinity, t50 ?? (t90 === null ? Infinity : -Infinity), t90 ?? Infinity];
        expect(order).toEqual([...order].sort((a, b) => a - b));
      }),
      runs,
    );
  });

  it('P9: °F readings give the same as °C', () => {
    fc.assert(
      fc.property(temperatures(10, 30), (values) => {
        const viaFahrenheit = values.map((celsius) => fromFahrenheit(toFahrenheit(celsius)));
        expect(estimate(viaFahrenheit).estimate.hardeningDays).toBeCloseTo(
          estimate(values).estimate.hardeningDays,
          9,
        );
      }),
      runs,
    );
  });

  it('P11: with the wax’s energy as ΔH and no cap, t·a(MKT) is the cure age', () => {
    fc.assert(
      fc.property(temperatures(12, 26), (values) => {
        // MKT uses ΔH/R = 10 000 K; the wax is given that energy.
        const energy = 10 * 8.314462618;
        const mean = new MeanKinetic();
        for (const celsius of values) mean.add(celsius);
        const kinetics = { ...SOY, hardeningEnergy: energy, capC: 60, softC: 70 };
        const { estimate: now } = estimate(values, kinetics);
        const byMean = (values.length / CELLS_PER_DAY) * rate(mean.celsius()!, hardeningClass(kinetics));
        expect(byMean).toBeCloseTo(now.hardeningDays, 9);
      }),
      runs,
    );
  });

  it('P12 and P13: two batches alike get the same answer; moving between rooms joins their histories', () => {
    fc.assert(
      fc.property(
        temperatures(10, 30),
        temperatures(10, 30),
        fc.integer({ min: 1, max: 599 }),
        (first, second, split) => {
          const rooms = new Map([
            ['a', roomOf(first)],
            ['b', roomOf(second)],
          ]);
          const moved = estimateBatch(
            batchIn(SOY, [
              { roomId: 'a', from: ORIGIN * CELL_MS, to: (ORIGIN + split) * CELL_MS },
              { roomId: 'b', from: (ORIGIN + split) * CELL_MS, to: null },
            ]),
            (id) => rooms.get(id) ?? null,
            (ORIGIN + 600) * CELL_MS,
          );
          if (!moved.known) throw new Error('an estimate was expected');
          const joined = estimate([...first.slice(0, split), ...second.slice(split)]).estimate;
          expect(moved.estimate.hardeningDays).toBeCloseTo(joined.hardeningDays, 10);
          expect(moved.estimate.frosting!.index).toBeCloseTo(joined.frosting!.index, 9);
          expect(estimate(rooms.get('a')!).estimate).toEqual(estimate(rooms.get('a')!).estimate);
        },
      ),
      runs,
    );
  });

  it('P14: waxes that do not frost have no frosting index', () => {
    for (const { kinetics } of Object.values(WAX_FAMILY_DEFAULTS)) {
      if (kinetics.frosting !== 'no') continue;
      expect(estimate(Array<number>(300).fill(31), kinetics).estimate.frosting).toBeNull();
      expect(frostingIndex(50, 10, kinetics.frosting)).toBe(0);
    }
  });

  it('P15: a better known wax has a narrower range around the same date', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.02, max: 0.19, noNaN: true }), (cvD) => {
        const values = Array<number>(5 * CELLS_PER_DAY).fill(21);
        const rough = estimate(values).estimate.wickTest;
        const known = estimate(values, { ...SOY, calibration: { cvD, sdEnergy: 15 } }).estimate.wickTest;
        expect(known.t50).toBe(rough.t50);
        expect(known.t90! - known.t10!).toBeLessThan(rough.t90! - rough.t10!);
      }),
      runs,
    );
  });
});

describe('what is told of a batch', () => {
  it('why the date moved adds up exactly to calendar hours less cure-age hours', () => {
    fc.assert(
      fc.property(temperatures(8, 37), fc.integer({ min: 50, max: 400 }), (values, hole) => {
        const holed: (number | null)[] = [...values];
        for (let cell = hole; cell < hole + 30; cell++) holed[cell] = null;
        const { estimate: now, segments } = estimate(holed);
        const ledger = shiftLedger(segments, SOY);
        const hours = ledger.reduce((sum, entry) => sum + entry.hours, 0);
        expect(hours).toBeCloseTo(values.length / 6 - now.hardeningDays * 24, 7);
        expect(ledger.some((entry) => entry.because === 'gap')).toBe(true);
        for (let index = 1; index < ledger.length; index++)
          expect(ledger[index]!.from).toBe(ledger[index - 1]!.to);
      }),
      runs,
    );
  });

  it('the curve passes through now, rises, and its range opens only where something is unknown', () => {
    const room = roomOf(Array<number>(5 * CELLS_PER_DAY).fill(23));
    const estimated = estimate(room);
    const points = cureCurve(batchIn(SOY), estimated, () => room);
    const now = points.find((point) => point.at === estimated.estimate.asOf)!;
    expect(now.cureAgeDays).toBeCloseTo(estimated.estimate.hardeningDays, 9);
    expect(points.length).toBeLessThanOrEqual(500);
    for (let index = 1; index < points.length; index++) {
      expect(points[index]!.hardening).toBeGreaterThanOrEqual(points[index - 1]!.hardening);
    }
    const last = points.at(-1)!;
    expect(last.forecast).toBe(true);
    expect(last.highDays - last.lowDays).toBeGreaterThan(now.highDays - now.lowDays);
  });

  it('a re-softened batch is blocked and its wax gathers nothing while soft', () => {
    const values = [...Array<number>(15 * CELLS_PER_DAY).fill(21), ...Array<number>(6).fill(39)];
    const { estimate: now } = estimate(values);
    expect(now.hardeningDays).toBeCloseTo(15, 9);
    expect(now.resoftened).toBe(true);
    expect(now.wickTest).toMatchObject({ state: 'blocked', blockedBy: ['re-softened'] });
  });
});
