import type { BatchCycles } from '#shared/cure/cycles';
import { frostingIndex, frostingLevel } from '#shared/cure/frosting';
import type { GapFill } from '#shared/cure/gaps';
import { type GateEstimate, type GateClocks, estimateGate } from '#shared/cure/gates';
import { CELLS_PER_HOUR, cellOf, cellStart } from '#shared/cure/grid';
import {
  type CureKinetics,
  daysToHardening,
  hardening,
  hardeningClass,
  loadFactor,
  scentClass,
  scentSettled,
} from '#shared/cure/kinetics';
import { type ClockSums, type Doubt, doubtOf, readySpread } from '#shared/cure/readiness';
import type { RoomHistory } from '#shared/cure/room-history';
import {
  degreeHoursOf,
  type RoomStay,
  type Segment,
  segmentsOf,
  sumSegments,
  cellReaching,
} from '#shared/cure/stays';
import { Outlook } from '#shared/cure/outlook';

/** Wick re-check is due after this much further hardening; the last bit keeps rounding from saying so of a wax that never gets there. */
const RECHECK_HARDENING = 0.05 + 1e-6;
const RECHECK_DAYS = 60;
/** Waxes with a flatter curve than this go on hardening for months: they are re-checked by the calendar as well. */
const SLOW_EXPONENT = 0.7;
/** Temperatures the equation is plausible for, °C. */
const TESTED_RANGE = { low: 10, high: 27 } as const;

export interface BatchToEstimate {
  /** Epoch ms. */
  readonly pouredAt: number;
  readonly stays: readonly RoomStay[];
  readonly kinetics: CureKinetics;
  readonly loadPercentOfWax: number;
  /** Last wick test of this batch: epoch ms and hardening then. */
  readonly lastTest: { readonly at: number; readonly hardening: number } | null;
  /** Whether the design's latest burn test passed. */
  readonly designPassed: boolean;
  /** Carries the swings on between calls. */
  readonly cycles: BatchCycles;
}

export interface Recheck {
  readonly due: boolean;
  /** When it fell or falls due, epoch ms; null when never. */
  readonly at: number | null;
  readonly because: 'hardened' | 'time' | 'none';
  readonly hardenedSinceTest: number | null;
}

export interface BatchEstimate {
  /** End of the history used, epoch ms. */
  readonly asOf: number;
  readonly hardeningDays: number;
  readonly scentDays: number;
  readonly hardening: number;
  readonly scent: number;
  readonly set: { readonly at: number; readonly reached: boolean };
  readonly wickTest: GateEstimate;
  readonly ship: GateEstimate;
  readonly recheck: Recheck;
  readonly frosting: {
    readonly index: number;
    readonly level: 'low' | 'watch' | 'high';
    readonly degreeHours: number;
    readonly cycleDamage: number;
  } | null;
  readonly resoftened: boolean;
  /** Days needed at 21 °C, the load taken into account. */
  readonly needed: GateClocks;
  readonly doubt: Doubt;
  readonly hardeningSums: ClockSums;
  /** sd s of ln(τ/D) now. */
  readonly spread: number;
}

export type Estimated =
  | { readonly known: true; readonly estimate: BatchEstimate; readonly segments: readonly Segment[] }
  | { readonly known: false };

/**
 * Estimates where a batch stands at an instant from the conditions its rooms really had. The history is made of whole
 * cells: it ends where the cell containing `now` starts; what comes after is forecast.
 * @param historyOf history of a room, advanced at least to now; null for a room nobody has ever measured
 */
export function estimateBatch(
  batch: BatchToEstimate,
  historyOf: (roomId: string) => RoomHistory | null,
  now: number,
): Estimated {
  const { kinetics } = batch;
  const nowCell = Math.max(cellOf(now), cellOf(batch.pouredAt));
  const segments = segmentsOf(batch.pouredAt, batch.stays, historyOf, nowCell);
  if (segments === null) return { known: false };
  const outlook = Outlook.of(batch.stays, segments, historyOf, nowCell);
  if (outlook === null) return { known: false };
  const factor = loadFactor(kinetics, batch.loadPercentOfWax);
  const needed: GateClocks = {
    test: kinetics.testDays * factor,
    scent: kinetics.scentDays * factor,
    ship: kinetics.shipDays * factor,
  };
  const doubt = doubtOf(kinetics.calibration);
  const hard = { kinetic: hardeningClass(kinetics), sums: sumSegments(segments, hardeningClass(kinetics)) };
  const scent = { kinetic: scentClass(kinetics), sums: sumSegments(segments, scentClass(kinetics)) };
  const resoftened = degreeHoursOf(segments, kinetics.softC) > 0;
  const gate = (hardDays: number, scentDays: number, blockedBy: GateEstimate['blockedBy']) =>
    estimateGate({
      clocks: [
        { ...hard, needed: hardDays },
        { ...scent, needed: scentDays },
      ],
      segments,
      outlook,
      doubt,
      blockedBy,
    });
  const soft = resoftened ? (['re-softened'] as const) : [];
  const hardened = (days: number) =>
    hardening(days, needed.test, kinetics.hardeningAtTest, kinetics.exponent);
  return {
    known: true,
    segments,
    estimate: {
      asOf: cellStart(nowCell),
      hardeningDays: hard.sums.days,
      scentDays: scent.sums.days,
      hardening: hardened(hard.sums.days),
      scent: scentSettled(scent.sums.days, needed.scent),
      set: setMark(batch, now),
      wickTest: gate(needed.test, needed.scent, [...soft]),
      ship: gate(needed.ship, Math.max(needed.scent, needed.ship), [
        ...soft,
        ...(batch.designPassed ? [] : (['no-passing-test'] as const)),
      ]),
      recheck: recheckOf(batch, segments, outlook, needed.test, hard.sums, hardened(hard.sums.days), now),
      frosting: frostingOf(batch, segments),
      resoftened,
      needed,
      doubt,
      hardeningSums: hard.sums,
      spread: hard.sums.days > 0 ? readySpread(hard.sums, doubt) : doubt.cvD,
    },
  };
}

/** When the wax is solid enough to be moved without care: the set lag after the pour. It drives nothing else. */
function setMark(batch: BatchToEstimate, now: number): { at: number; reached: boolean } {
  const at = batch.pouredAt + batch.kinetics.setLagHours * 3_600_000;
  return { at, reached: now >= at };
}

function frostingOf(batch: BatchToEstimate, segments: readonly Segment[]): BatchEstimate['frosting'] {
  const { frosting, frostingFrom } = batch.kinetics;
  if (frosting === 'no' || frostingFrom === null) return null;
  const degreeHours = degreeHoursOf(segments, frostingFrom);
  const cycleDamage = batch.cycles.damage(segments);
  const index = frostingIndex(degreeHours, cycleDamage, frosting);
  return { index, level: frostingLevel(index), degreeHours, cycleDamage };
}

function recheckOf(
  batch: BatchToEstimate,
  segments: readonly Segment[],
  outlook: Outlook,
  testDays: number,
  sums: ClockSums,
  hardenedNow: number,
  now: number,
): Recheck {
  const { kinetics, lastTest } = batch;
  if (lastTest === null || lastTest.at > now) {
    return { due: false, at: null, because: 'none', hardenedSinceTest: null };
  }
  const target = daysToHardening(
    lastTest.hardening + RECHECK_HARDENING,
    testDays,
    kinetics.hardeningAtTest,
    kinetics.exponent,
  );
  const kinetic = hardeningClass(kinetics);
  const past = cellReaching(segments, kinetic, target);
  const ahead = past === null ? outlook.cellReaching(kinetic, target - sums.days) : past;
  const byHardening = ahead === null ? Infinity : cellStart(ahead + 1);
  const byTime = kinetics.exponent < SLOW_EXPONENT ? lastTest.at + RECHECK_DAYS * 86_400_000 : Infinity;
  const at = Math.min(byHardening, byTime);
  return {
    due: at <= now,
    at: at === Infinity ? null : at,
    because: at === Infinity ? 'none' : byHardening <= byTime ? 'hardened' : 'time',
    hardenedSinceTest: hardenedNow - lastTest.hardening,
  };
}

/** A gap as one batch sees it. */
export interface BatchGap {
  /** Epoch ms. */
  readonly from: number;
  readonly to: number;
  readonly fill: GapFill;
  /** What it adds to the doubt about the cure age, days. */
  readonly sdDays: number;
}

/** The gaps in a batch's history with what each adds to the doubt. */
export function gapsOf(segments: readonly Segment[], kinetics: CureKinetics): BatchGap[] {
  const kinetic = hardeningClass(kinetics);
  return segments.flatMap((segment): BatchGap[] => {
    if (segment.kind === 'hole') {
      const { variance } = sumSegments([segment], kinetic);
      const [from, to] = [cellStart(segment.from), cellStart(segment.to)];
      return [{ from, to, fill: 'last-known', sdDays: Math.sqrt(variance) }];
    }
    return segment.room.gapsBetween(segment.from, segment.to).map(({ gap, from, to }) => ({
      from: cellStart(from),
      to: cellStart(to),
      fill: gap.fill,
      sdDays: gap.sigma * segment.room.sums(kinetic, from, to).perKelvin,
    }));
  });
}

/** Stretches of cells for which a condition on the temperature holds, as epoch ms. */
export function stretchesWhere(
  segments: readonly Segment[],
  holds: (celsius: number) => boolean,
): { from: number; to: number }[] {
  const found: { from: number; to: number }[] = [];
  for (const segment of segments) {
    for (let cell = segment.from; cell < segment.to; cell++) {
      if (!holds(celsiusAt(segment, cell))) continue;
      const last = found.at(-1);
      if (last?.to === cellStart(cell)) last.to = cellStart(cell + 1);
      else found.push({ from: cellStart(cell), to: cellStart(cell + 1) });
    }
  }
  return found;
}

/** Hours the batch spent outside the 10–27 °C for which the equation is plausible. */
export function hoursOutsideTestedRange(segments: readonly Segment[]): number {
  let cells = 0;
  for (const segment of segments) {
    for (let cell = segment.from; cell < segment.to; cell++) {
      const celsius = celsiusAt(segment, cell);
      if (celsius < TESTED_RANGE.low || celsius > TESTED_RANGE.high) cells++;
    }
  }
  return cells / CELLS_PER_HOUR;
}

/** Mean temperature over the history, °C; null for none. */
export function meanCelsius(segments: readonly Segment[]): number | null {
  let [sum, cells] = [0, 0];
  for (const segment of segments) {
    for (let cell = segment.from; cell < segment.to; cell++) sum += celsiusAt(segment, cell);
    cells += segment.to - segment.from;
  }
  return cells === 0 ? null : sum / cells;
}

/** Temperature of a cell of a segment as used by the estimate, °C. */
export function celsiusAt(segment: Segment, cell: number): number {
  return segment.kind === 'hole' ? segment.celsius : segment.room.celsius(cell);
}
