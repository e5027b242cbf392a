import { type BatchEstimate, type BatchToEstimate, type Estimated } from '#shared/cure/estimate';
import { CELLS_PER_DAY, cellOf, cellStart } from '#shared/cure/grid';
import { hardening, hardeningClass, scentClass, scentSettled } from '#shared/cure/kinetics';
import { Outlook } from '#shared/cure/outlook';
import { ageSpread, type ClockSums } from '#shared/cure/readiness';
import type { RoomHistory } from '#shared/cure/room-history';
import { type Segment, sumSegments } from '#shared/cure/stays';
import { Z_90 } from '#shared/statistics/normal';

export interface CurvePoint {
  /** Epoch ms. */
  readonly at: number;
  readonly forecast: boolean;
  readonly hardening: number;
  readonly scent: number;
  readonly cureAgeDays: number;
  readonly lowDays: number;
  readonly highDays: number;
}

const POINTS = 240;
const DAYS_SHOWN_AFTER = 2;

/**
 * The cure curve from the pour over now to a little after the later gate: hardening, scent and cure age with the 10–90 % range
 * that energy, sensor, gaps and forecast leave open (the doubt about the wax's days is the gates' matter, not the age's).
 */
export function cureCurve(
  batch: BatchToEstimate,
  estimated: Extract<Estimated, { known: true }>,
  historyOf: (roomId: string) => RoomHistory | null,
): CurvePoint[] {
  const { estimate, segments } = estimated;
  const outlook = Outlook.of(batch.stays, segments, historyOf, cellOf(estimate.asOf));
  if (outlook === null) return [];
  const first = cellOf(batch.pouredAt);
  const last = lastCellShown(estimate);
  const step = Math.max(1, Math.ceil((last - first) / POINTS));
  const cells: number[] = [];
  for (let cell = first; cell < last; cell += step) cells.push(cell);
  cells.push(last);
  if (!cells.includes(outlook.from)) cells.push(outlook.from);
  return cells.sort((a, b) => a - b).map((cell) => pointAt(batch, estimate, segments, outlook, cell));
}

function lastCellShown(estimate: BatchEstimate): number {
  const ends = [estimate.ship.t90, estimate.wickTest.t90, estimate.ship.t50].filter((at) => at !== null);
  return cellOf(Math.max(estimate.asOf, ...ends)) + DAYS_SHOWN_AFTER * CELLS_PER_DAY;
}

function pointAt(
  batch: BatchToEstimate,
  estimate: BatchEstimate,
  segments: readonly Segment[],
  outlook: Outlook,
  cell: number,
): CurvePoint {
  const { kinetics } = batch;
  const hard = sumsAt(segments, outlook, hardeningClass(kinetics), cell);
  const scent = sumsAt(segments, outlook, scentClass(kinetics), cell);
  const spread = Math.exp(Z_90 * ageSpread(hard, estimate.doubt));
  return {
    at: cellStart(cell),
    forecast: cell > outlook.from,
    hardening: hardening(hard.days, estimate.needed.test, kinetics.hardeningAtTest, kinetics.exponent),
    scent: scentSettled(scent.days, estimate.needed.scent),
    cureAgeDays: hard.days,
    lowDays: hard.days / spread,
    highDays: hard.days * spread,
  };
}

/** Sums of a clock up to the start of a cell of history or forecast. */
function sumsAt(
  segments: readonly Segment[],
  outlook: Outlook,
  kinetic: Parameters<Outlook['forecast']>[0],
  cell: number,
): ClockSums {
  const past = sumSegments(
    segments.flatMap((segment) =>
      segment.from >= cell ? [] : [{ ...segment, to: Math.min(segment.to, cell) }],
    ),
    kinetic,
  );
  const ahead = Math.max(0, cell - outlook.from);
  if (ahead === 0) return past;
  const forecast = outlook.forecast(kinetic);
  return {
    days: past.days + forecast.days(ahead),
    perKelvin: past.perKelvin + forecast.perKelvin(ahead),
    perEnergy: past.perEnergy + forecast.perEnergy(ahead),
    variance: past.variance + forecast.variance(ahead),
  };
}
