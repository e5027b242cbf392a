import type { BatchCard, CurvePoint, EstimateView, GateView, Shift } from '#shared/contract/batches';
import type { CurvePoint as PointOfCurve } from '#shared/cure/curve';
import {
  type Estimated,
  gapsOf,
  hoursOutsideTestedRange,
  meanCelsius,
  stretchesWhere,
} from '#shared/cure/estimate';
import type { GateEstimate } from '#shared/cure/gates';
import type { Shift as ShiftOfLedger } from '#shared/cure/shifts';
import type { BatchFacts } from './batch-facts-repository.js';

type Known = Extract<Estimated, { known: true }>;

/** Card of a batch; `atRisk` is filled in by whoever knows the room's temperature right now. */
export function cardOf(batch: BatchFacts, estimated: Estimated): Omit<BatchCard, 'atRisk'> {
  const last = batch.stays.at(-1);
  const stay = batch.status === 'curing' && last?.to === null ? last : null;
  const estimate = estimated.known ? estimated.estimate : null;
  return {
    id: batch.id,
    studioId: batch.studioId,
    code: batch.code,
    designName: batch.design.name,
    waxFamily: batch.design.family,
    vessels: batch.vessels,
    pouredAt: iso(batch.pouredAt),
    status: batch.status,
    shelfId: stay?.shelfId ?? null,
    rackId: stay?.rackId ?? null,
    roomId: stay?.roomId ?? null,
    hardening: estimate?.hardening ?? null,
    scent: estimate?.scent ?? null,
    cureAgeDays: estimate?.hardeningDays ?? null,
    wickTest: estimate ? gateView(estimate.wickTest) : UNKNOWN_GATE,
    ship: estimate ? gateView(estimate.ship) : UNKNOWN_GATE,
    recheckDue: estimate?.recheck.due ?? false,
    frosting: estimate?.frosting ? { index: estimate.frosting.index, level: estimate.frosting.level } : null,
    resoftened: estimate?.resoftened ?? false,
    version: batch.version,
  };
}

/** The same card for somebody who may see when a batch is ready but not what it is made of or how it was tested. */
export function cardForViewer(card: BatchCard): BatchCard {
  return { ...card, designName: null, waxFamily: null, recheckDue: false };
}

/** Everything behind a batch's dates. */
export function estimateView(batch: BatchFacts, { estimate, segments }: Known): EstimateView {
  const { kinetics, provenance } = batch.design;
  const { recheck, frosting, needed, doubt } = estimate;
  return {
    asOf: iso(estimate.asOf),
    cureAgeHardeningDays: estimate.hardeningDays,
    cureAgeScentDays: estimate.scentDays,
    hardening: estimate.hardening,
    scent: estimate.scent,
    set: { at: iso(estimate.set.at), reached: estimate.set.reached },
    wickTest: gateView(estimate.wickTest),
    ship: gateView(estimate.ship),
    recheck: { ...recheck, at: isoOrNull(recheck.at) },
    frosting: frosting === null ? null : { ...frosting },
    gaps: gapsOf(segments, kinetics).map((gap) => ({ ...gap, from: iso(gap.from), to: iso(gap.to) })),
    resoftened: estimate.resoftened
      ? stretchesWhere(segments, (celsius) => celsius > kinetics.softC).map(between)
      : [],
    hoursOutsideTestedRange: hoursOutsideTestedRange(segments),
    numbers: {
      testDays: needed.test,
      scentDays: needed.scent,
      shipDays: needed.ship,
      cvD: doubt.cvD,
      sdEnergy: doubt.sdEnergy,
      sdRoom: doubt.sdRoom,
      sdGapsDays: Math.sqrt(estimate.hardeningSums.variance),
      spread: estimate.spread,
      meanCelsius: meanCelsius(segments),
      calibrated: kinetics.calibration !== null,
      provenance,
    },
  };
}

/** The estimate without what tells of tests or of the wax. */
export function estimateForViewer(view: EstimateView): EstimateView {
  return {
    ...view,
    recheck: { due: false, at: null, because: 'none', hardenedSinceTest: null },
    numbers: null,
  };
}

export function shiftViews(
  shifts: readonly ShiftOfLedger[],
  roomNames: ReadonlyMap<string, string>,
): Shift[] {
  return shifts.map((shift) => ({
    ...shift,
    ...between(shift),
    roomName: shift.roomId === null ? null : (roomNames.get(shift.roomId) ?? null),
  }));
}

export function curveViews(points: readonly PointOfCurve[]): CurvePoint[] {
  return points.map((point) => ({ ...point, at: iso(point.at) }));
}

function gateView(gate: GateEstimate): GateView {
  return {
    state: gate.state,
    reachedAt: isoOrNull(gate.reachedAt),
    t10: isoOrNull(gate.t10),
    t50: isoOrNull(gate.t50),
    t90: isoOrNull(gate.t90),
    chanceNow: gate.chanceNow,
    blockedBy: [...gate.blockedBy],
  };
}

const UNKNOWN_GATE: GateView = {
  state: 'unknown',
  reachedAt: null,
  t10: null,
  t50: null,
  t90: null,
  chanceNow: 0,
  blockedBy: ['no-readings'],
};

function between({ from, to }: { from: number; to: number }) {
  return { from: iso(from), to: iso(to) };
}

function iso(at: number): string {
  return new Date(at).toISOString();
}

function isoOrNull(at: number | null): string | null {
  return at === null ? null : iso(at);
}
