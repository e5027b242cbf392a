import { holeSigma } from '#shared/cure/gaps';
import { CELLS_PER_DAY, cellOf } from '#shared/cure/grid';
import { energySensitivity, type KineticClass, rate, temperatureSensitivity } from '#shared/cure/kinetics';
import type { RoomHistory } from '#shared/cure/room-history';
import type { ClockSums } from '#shared/cure/readiness';

/** A batch's time on one shelf; only the room matters for the cure. */
export interface RoomStay {
  readonly roomId: string;
  /** Epoch ms. */
  readonly from: number;
  /** Epoch ms; null: still there. */
  readonly to: number | null;
}

/** A stretch of whole cells a batch spent in one room. */
interface RoomSegment {
  readonly kind: 'room';
  readonly roomId: string;
  readonly room: RoomHistory;
  readonly from: number;
  readonly to: number;
}

/** A stretch without a room or in a room that never had a reading: the last known temperature is carried on. */
interface HoleSegment {
  readonly kind: 'hole';
  readonly roomId: string | null;
  readonly from: number;
  readonly to: number;
  readonly celsius: number;
}

export type Segment = RoomSegment | HoleSegment;

/**
 * Everything a batch went through from its pour to a cell, in whole cells: a stay covers the cells from the one it began in up
 * to, not including, the one it ended in.
 * @param until first cell that is not history
 * @returns null when none of its rooms has ever been observed
 */
export function segmentsOf(
  pouredAt: number,
  stays: readonly RoomStay[],
  historyOf: (roomId: string) => RoomHistory | null,
  until: number,
): Segment[] | null {
  interface Piece {
    roomId: string | null;
    room: RoomHistory | null;
    from: number;
    to: number;
  }
  const pieces: Piece[] = [];
  let at = cellOf(pouredAt);
  for (const stay of [...stays].sort((a, b) => a.from - b.from)) {
    const from = Math.max(at, cellOf(stay.from));
    const to = Math.min(until, stay.to === null ? until : cellOf(stay.to));
    if (to <= from) continue;
    if (from > at) pieces.push({ roomId: null, room: null, from: at, to: from });
    const room = historyOf(stay.roomId);
    pieces.push({ roomId: stay.roomId, room: room?.known ? room : null, from, to });
    at = to;
  }
  if (at < until) pieces.push({ roomId: null, room: null, from: at, to: until });
  const firstKnown = pieces.find((piece) => piece.room !== null);
  if (!firstKnown?.room) return pieces.length === 0 ? [] : null;
  let lastKnown = firstKnown.room.celsius(firstKnown.from);
  return pieces.map(({ roomId, room, from, to }) => {
    if (room === null) return { kind: 'hole', roomId, from, to, celsius: lastKnown };
    lastKnown = room.celsius(to - 1);
    return { kind: 'room', roomId: roomId ?? '', room, from, to };
  });
}

/** Sums of one clock over segments, gaps' variance included; gaps add in squares. */
export function sumSegments(segments: readonly Segment[], kinetic: KineticClass): ClockSums {
  let [days, perKelvin, perEnergy, variance] = [0, 0, 0, 0];
  for (const segment of segments) {
    const sums = sumsOf(segment, kinetic);
    days += sums.days;
    perKelvin += sums.perKelvin;
    perEnergy += sums.perEnergy;
    if (segment.kind === 'hole') {
      variance += (holeSigma(segment.to - segment.from) * sums.perKelvin) ** 2;
    } else {
      for (const { gap, from, to } of segment.room.gapsBetween(segment.from, segment.to)) {
        variance += (gap.sigma * segment.room.sums(kinetic, from, to).perKelvin) ** 2;
      }
    }
  }
  return { days, perKelvin, perEnergy, variance };
}

function sumsOf(segment: Segment, kinetic: KineticClass) {
  if (segment.kind === 'room') return segment.room.sums(kinetic, segment.from, segment.to);
  const cells = segment.to - segment.from;
  const days = (cells * rate(segment.celsius, kinetic)) / CELLS_PER_DAY;
  return {
    days,
    perKelvin: days * temperatureSensitivity(segment.celsius, kinetic),
    perEnergy: days * energySensitivity(segment.celsius, kinetic),
  };
}

/** First cell of the history after which a clock has gathered `days` (tolerance 1e-9 d); null when it has not. */
export function cellReaching(
  segments: readonly Segment[],
  kinetic: KineticClass,
  days: number,
): number | null {
  let left = days - 1e-9;
  for (const segment of segments) {
    const gained = sumsOf(segment, kinetic).days;
    if (gained >= left) {
      if (segment.kind === 'room') return segment.room.cellReaching(kinetic, segment.from, segment.to, left);
      return segment.from + Math.max(0, Math.ceil((left / gained) * (segment.to - segment.from)) - 1);
    }
    left -= gained;
  }
  return null;
}

/** °C·h above a limit over segments. */
export function degreeHoursOf(segments: readonly Segment[], limit: number): number {
  let sum = 0;
  for (const segment of segments) {
    sum +=
      segment.kind === 'room'
        ? segment.room.degreeHours(limit, segment.from, segment.to)
        : (Math.max(0, segment.celsius - limit) * (segment.to - segment.from)) / 6;
  }
  return sum;
}
