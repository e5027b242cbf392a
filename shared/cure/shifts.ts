import { CELLS_PER_DAY, CELLS_PER_HOUR, cellStart } from '#shared/cure/grid';
import { hardeningClass, type CureKinetics, rate } from '#shared/cure/kinetics';
import { celsiusAt } from '#shared/cure/estimate';
import type { Segment } from '#shared/cure/stays';

export type ShiftReason = 'colder' | 'warmer' | 'gap' | 're-softened' | 'at-reference';

/** One entry of why a date moved. */
export interface Shift {
  /** Epoch ms. */
  readonly from: number;
  readonly to: number;
  readonly roomId: string | null;
  readonly meanCelsius: number;
  /** Calendar hours less hours of cure age; positive: later than at 21 °C. */
  readonly hours: number;
  readonly because: ShiftReason;
}

interface Piece {
  from: number;
  to: number;
  roomId: string | null;
  sum: number;
  hours: number;
  because: ShiftReason;
}

/** A day that gains or loses less than this is called steady, h. */
const STEADY_HOURS = 0.05;

/**
 * Why the date moved, from the pour to now: whole days of one room, warmer or colder than 21 °C on balance, gaps and
 * re-softening on their own; neighbours of a kind are joined. The hours add up exactly to calendar hours less cure-age hours.
 */
export function shiftLedger(segments: readonly Segment[], kinetics: CureKinetics): Shift[] {
  const kinetic = hardeningClass(kinetics);
  const pieces: Piece[] = [];
  for (const segment of segments) {
    let open: Piece | null = null;
    for (let cell = segment.from; cell < segment.to; cell++) {
      const celsius = celsiusAt(segment, cell);
      const apart = apartFrom(segment, cell, celsius, kinetic.softC);
      const newDay = cell % CELLS_PER_DAY === 0;
      if (
        open === null ||
        (open.because === 'at-reference' ? apart !== null || newDay : apart !== open.because)
      ) {
        open = {
          from: cell,
          to: cell,
          roomId: segment.roomId,
          sum: 0,
          hours: 0,
          because: apart ?? 'at-reference',
        };
        pieces.push(open);
      }
      open.to = cell + 1;
      open.sum += celsius;
      open.hours += (1 - rate(celsius, kinetic)) / CELLS_PER_HOUR;
    }
  }
  const joined: Piece[] = [];
  for (const piece of pieces) {
    if (piece.because === 'at-reference') piece.because = onBalance(piece);
    const last = joined.at(-1);
    if (last?.because === piece.because && last.roomId === piece.roomId && last.to === piece.from) {
      last.to = piece.to;
      last.sum += piece.sum;
      last.hours += piece.hours;
    } else {
      joined.push(piece);
    }
  }
  return joined.map(({ from, to, roomId, sum, hours, because }) => ({
    from: cellStart(from),
    to: cellStart(to),
    roomId,
    meanCelsius: sum / (to - from),
    hours,
    because,
  }));
}

function apartFrom(segment: Segment, cell: number, celsius: number, softC: number): ShiftReason | null {
  if (celsius > softC) return 're-softened';
  return segment.kind === 'hole' || Number.isNaN(segment.room.observed(cell)) ? 'gap' : null;
}

function onBalance(piece: Piece): ShiftReason {
  if (Math.abs(piece.hours) < STEADY_HOURS) return 'at-reference';
  return piece.hours > 0 ? 'colder' : 'warmer';
}
