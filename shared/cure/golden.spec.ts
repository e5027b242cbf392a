import { describe, expect, it } from 'vitest';
import { BatchCycles } from '#shared/cure/cycles';
import { estimateBatch } from '#shared/cure/estimate';
import { Forecast } from '#shared/cure/forecast';
import { CELL_MS, CELLS_PER_DAY } from '#shared/cure/grid';
import type { CureKinetics, KineticClass } from '#shared/cure/kinetics';
import { type GapInStretch, RoomHistory } from '#shared/cure/room-history';
import { WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';
import cure from '../reference/cure.json' with { type: 'json' };

const ORIGIN = 20_000 * CELLS_PER_DAY;
const SOY = WAX_FAMILY_DEFAULTS['soy-container'].kinetics;
/** The hardening clock alone decides. */
const HARDENING_ONLY: CureKinetics = { ...SOY, scentDays: 0.25 };

type Days = (number | null)[][];

/** A room whose usual day is given instead of learned, and whose gaps are given as filled at 21.5 °C ± 1.5 K. */
class GivenRoom extends RoomHistory {
  readonly gaps: { from: number; to: number }[] = [];

  override forecast(kinetic: KineticClass, from: number): Forecast {
    return new Forecast(
      { cell: from, celsius: this.celsius(from - 1), hours: Array<number>(24).fill(21) },
      kinetic,
    );
  }

  override gapsBetween(from: number, to: number): GapInStretch[] {
    return this.gaps.map((gap) => ({
      gap: { ...gap, fill: 'hour-of-day', sigma: 1.5, celsius: [] },
      from: Math.max(from, gap.from),
      to: Math.min(to, gap.to),
    }));
  }
}

function estimate(history: Days, kinetics: CureKinetics) {
  const room = new GivenRoom(ORIGIN);
  let cell = ORIGIN;
  for (const [days, celsius] of history) {
    const from = cell;
    for (let left = days! * CELLS_PER_DAY; left > 0; left--) room.set(cell++, celsius ?? 21.5);
    if (celsius === null) room.gaps.push({ from, to: cell });
  }
  const estimated = estimateBatch(
    {
      pouredAt: ORIGIN * CELL_MS,
      stays: [{ roomId: 'room', from: ORIGIN * CELL_MS, to: null }],
      kinetics,
      loadPercentOfWax: 6,
      lastTest: null,
      designPassed: true,
      cycles: new BatchCycles(),
    },
    () => room,
    cell * CELL_MS,
  );
  if (!estimated.known) throw new Error('an estimate was expected');
  return estimated.estimate;
}

const dayOf = (ms: number | null) => (ms === null ? null : (ms / CELL_MS - ORIGIN) / CELLS_PER_DAY);

describe('golden runs', () => {
  const { rows, tolerance } = cure.golden;

  it.each(rows)('$history, calibration $calibration', (row) => {
    const found = estimate(row.history as Days, { ...HARDENING_ONLY, calibration: row.calibration ?? null });
    expect(Math.abs(found.hardeningDays - row.days)).toBeLessThanOrEqual(tolerance.days);
    expect(Math.abs(found.wickTest.chanceNow - row.chance)).toBeLessThanOrEqual(tolerance.chance);
    expect(Math.abs(found.spread - row.spread)).toBeLessThanOrEqual(tolerance.spread);
    for (const name of ['t10', 't50', 't90'] as const) {
      const day = dayOf(found.wickTest[name]);
      if (row[name] === null) expect(day).toBeNull();
      else expect(Math.abs(day! - row[name])).toBeLessThanOrEqual(tolerance.time);
    }
    if (row.sdGap !== undefined) {
      expect(Math.abs(Math.sqrt(found.hardeningSums.variance) - row.sdGap)).toBeLessThanOrEqual(5e-6);
    }
  });

  it.each(cure.golden.ages)('ages after $history', (row) => {
    const found = estimate(row.history, SOY);
    expect(Math.abs(found.hardeningDays - row.hardeningDays)).toBeLessThanOrEqual(5e-5);
    if (row.scentDays !== undefined) {
      expect(Math.abs(found.scentDays - row.scentDays)).toBeLessThanOrEqual(5e-5);
      expect(Math.abs(found.hardening - row.hardening)).toBeLessThanOrEqual(5e-6);
      expect(Math.abs(found.scent - row.scent)).toBeLessThanOrEqual(5e-6);
    }
  });

  it.each(cure.constant.rows)('at a constant %d °C ready after %d d', (celsius, days) => {
    // Two days in, so that the forecast knows nothing but this temperature.
    const room = new RoomHistory(ORIGIN);
    for (let cell = 0; cell < 2 * CELLS_PER_DAY; cell++) room.set(ORIGIN + cell, celsius);
    const estimated = estimateBatch(
      {
        pouredAt: ORIGIN * CELL_MS,
        stays: [{ roomId: 'room', from: ORIGIN * CELL_MS, to: null }],
        kinetics: HARDENING_ONLY,
        loadPercentOfWax: 6,
        lastTest: null,
        designPassed: true,
        cycles: new BatchCycles(),
      },
      () => room,
      (ORIGIN + 2 * CELLS_PER_DAY) * CELL_MS,
    );
    if (!estimated.known) throw new Error('an estimate was expected');
    expect(Math.abs(dayOf(estimated.estimate.wickTest.t50)! - days)).toBeLessThanOrEqual(
      cure.constant.tolerance,
    );
  });

  it('re-check: soy tested at day 14 is due at the printed day; a wax tested at its gate with g 0.95 never by hardening', () => {
    const tested = (family: 'soy-container' | 'paraffin-container', atDay: number, hardening: number) => {
      const room = new RoomHistory(ORIGIN);
      for (let cell = 0; cell < atDay * CELLS_PER_DAY; cell++) room.set(ORIGIN + cell, 21);
      const estimated = estimateBatch(
        {
          pouredAt: ORIGIN * CELL_MS,
          stays: [{ roomId: 'room', from: ORIGIN * CELL_MS, to: null }],
          kinetics: WAX_FAMILY_DEFAULTS[family].kinetics,
          loadPercentOfWax: 6,
          lastTest: { at: (ORIGIN + atDay * CELLS_PER_DAY) * CELL_MS, hardening },
          designPassed: true,
          cycles: new BatchCycles(),
        },
        () => room,
        (ORIGIN + atDay * CELLS_PER_DAY) * CELL_MS,
      );
      if (!estimated.known) throw new Error('an estimate was expected');
      return estimated.estimate.recheck;
    };
    const soy = tested('soy-container', 14, 0.9);
    expect(soy.because).toBe('hardened');
    expect(Math.abs(dayOf(soy.at)! - cure.recheckDay.days)).toBeLessThanOrEqual(0.012);
    expect(tested('paraffin-container', 2, 0.95)).toMatchObject({ because: 'none', at: null, due: false });
  });
});
