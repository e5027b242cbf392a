import type { BatchCard, GateView } from '#shared/contract/batches';
import type { Rack } from '#shared/contract/racks';
import type { StudioFormats } from '../../core/time/studio-formats';
import { DAY_MS, epoch, zonedParts } from '../../core/time/zoned-time';

export type GateName = 'wickTest' | 'ship';

/** A rack with what stands on it, in its studio's own time. */
export interface RackInStudio {
  readonly studioId: string;
  readonly studioName: string;
  readonly roomId: string;
  readonly roomName: string;
  readonly rack: Rack;
  readonly batches: readonly BatchCard[];
  readonly formats: StudioFormats;
}

/** A batch on the calendar; places are parts of the four weeks, 0–1. */
export interface CalendarBar {
  readonly id: string;
  readonly code: string;
  readonly start: number;
  readonly low: number;
  readonly middle: number;
  readonly high: number;
  readonly notches: readonly number[];
  readonly ready: boolean;
  /** "ready", "Fri 8 May (6 to 12 May)", "no date" */
  readonly when: string;
  /** Where the words stand so that they cover no bar. */
  readonly side: 'after' | 'before' | 'below';
}

export interface CalendarRow {
  readonly id: string;
  readonly studioId: string;
  readonly place: string;
  readonly roomId: string;
  readonly name: string;
  readonly size: string;
  readonly vessels: number;
  readonly bars: readonly CalendarBar[];
  /** When the last batch passes the gate, epoch ms; null: one has no date. */
  readonly readyAt: number | null;
  readonly lastCode: string;
}

export interface CalendarDay {
  readonly key: number;
  readonly day: number;
  readonly weekend: boolean;
  readonly today: boolean;
  /** "Mon 4 May" */
  readonly label: string;
}

/** Days before today and days in all. */
const BEFORE = 12;
export const DAYS = 28;

/** Local wall time as if it were UTC, so that every studio's midnights fall on the same lines. */
function wallTime(instant: string | number, timeZone: string): number {
  const { year, month, day, hour, minute } = zonedParts(instant, timeZone);
  return Date.UTC(year, month - 1, day, hour, minute);
}

/** First midnight of the four weeks for a studio, as wall time. */
function windowStart(now: number, timeZone: string): number {
  return Math.floor(wallTime(now, timeZone) / DAY_MS) * DAY_MS - BEFORE * DAY_MS;
}

/** The days across the top, by the calendar of a zone. */
export function calendarDays(now: number, timeZone: string): CalendarDay[] {
  const start = windowStart(now, timeZone);
  return Array.from({ length: DAYS }, (_, index) => {
    const parts = zonedParts(start + index * DAY_MS, 'UTC');
    return {
      key: parts.dayKey,
      day: parts.day,
      weekend: parts.weekday === 'Sat' || parts.weekday === 'Sun',
      today: index === BEFORE,
      label: `${parts.weekday} ${parts.day} ${parts.monthName}`,
    };
  });
}

/** Place of an instant on the four weeks of a studio, 0–1; may lie outside. */
export function placeOf(instant: string | number, now: number, timeZone: string): number {
  return (wallTime(instant, timeZone) - windowStart(now, timeZone)) / (DAYS * DAY_MS);
}

/** When a gate was or will be passed, epoch ms; null without a date. */
export function passedAt(gate: GateView): number | null {
  const at = gate.reachedAt ?? gate.t50;
  return at === null ? null : epoch(at);
}

/** One row of the calendar. @param now epoch ms */
export function calendarRow(place: RackInStudio, gateName: GateName, now: number): CalendarRow {
  const { rack, batches, formats } = place;
  const bars = [...batches]
    .sort((a, b) => epoch(a.pouredAt) - epoch(b.pouredAt))
    .map((batch) => barOf(batch, gateName, formats, now));
  const passed = batches.map((batch) => ({ code: batch.code, at: passedAt(batch[gateName]) }));
  const last = passed.reduce(
    (latest, one) => ((one.at ?? Infinity) > (latest.at ?? Infinity) ? one : latest),
    {
      code: '',
      at: -Infinity as number | null,
    },
  );
  const shelves = rack.shelves.length;
  const vessels = batches.reduce((sum, batch) => sum + batch.vessels, 0);
  return {
    id: rack.id,
    studioId: place.studioId,
    place: `${place.studioName}, ${place.roomName}`,
    roomId: place.roomId,
    name: rack.name,
    size: `${shelves} ${shelves === 1 ? 'shelf' : 'shelves'}, ${vessels} vessels`,
    vessels,
    bars,
    readyAt: passed.some(({ at }) => at === null) ? null : last.at,
    lastCode: last.code,
  };
}

function barOf(batch: BatchCard, gateName: GateName, formats: StudioFormats, now: number): CalendarBar {
  const gate = batch[gateName];
  const other = batch[gateName === 'ship' ? 'wickTest' : 'ship'];
  const place = (instant: string | number) => placeOf(instant, now, formats.timeZone);
  const middle = passedAt(gate);
  const ready = gate.state === 'reached';
  const notch = passedAt(other);
  const at = place(middle ?? now);
  return {
    id: batch.id,
    code: batch.code,
    start: place(batch.pouredAt),
    middle: at,
    low: ready || middle === null ? at : place(gate.t10 ?? now),
    high: ready || middle === null ? at : place(gate.t90 ?? middle),
    notches: notch === null ? [] : [place(notch)],
    ready,
    when: whenOf(gate, formats, now),
    side: sideOf(place(batch.pouredAt), ready || middle === null ? at : place(gate.t90 ?? middle)),
  };
}

/** Words need about a third of the width. */
function sideOf(start: number, high: number): CalendarBar['side'] {
  if (high < 0.66) return 'after';
  return start > 0.34 ? 'before' : 'below';
}

function whenOf(gate: GateView, formats: StudioFormats, now: number): string {
  if (gate.state === 'reached') return 'ready';
  if (gate.blockedBy.includes('re-softened')) return 'softened again, check by hand';
  if (gate.reachedAt !== null) return 'cured, waits for a passing wick test';
  if (gate.t50 === null) return gate.chanceNow >= 0.5 ? 'any time now' : 'no date yet';
  const low = gate.t10 === null ? formats.daySeenFrom(now, now) : formats.daySeenFrom(gate.t10, now);
  const high = gate.t90 === null ? 'later' : formats.daySeenFrom(gate.t90, now);
  return `${formats.daySeenFrom(gate.t50, now)} (${low} to ${high})`;
}

/**
 * The sentence above the calendar: what is ready by the end of a day, and which rack takes longest.
 * @param by end of the day asked for, epoch ms  @param byWords "Friday 8 May"
 */
export function readinessSentence(
  rows: readonly CalendarRow[],
  gateName: GateName,
  by: number,
  byWords: string,
  formatsOf: (studioId: string) => StudioFormats | null,
  now: number,
): { lead: string; rest: string } {
  const what = gateName === 'ship' ? 'Ready to ship' : 'Ready for the wick test';
  const ready = rows.filter(({ readyAt }) => readyAt !== null && readyAt <= by);
  const vessels = ready.reduce((sum, row) => sum + row.vessels, 0);
  const lead =
    ready.length === 0
      ? `No rack is ${what.charAt(0).toLowerCase()}${what.slice(1)} by ${byWords}.`
      : `${what} by ${byWords}: ${ready.length} ${ready.length === 1 ? 'rack' : 'racks'}, ${vessels} vessels.`;
  const waiting = rows.filter(({ readyAt }) => readyAt === null || readyAt > now);
  const longest = waiting.reduce<CalendarRow | null>(
    (latest, row) => ((row.readyAt ?? Infinity) > (latest?.readyAt ?? -Infinity) ? row : latest),
    null,
  );
  if (longest === null) return { lead, rest: '' };
  const formats = formatsOf(longest.studioId);
  const date =
    longest.readyAt === null || !formats ? 'no date yet' : formats.daySeenFrom(longest.readyAt, now);
  return {
    lead,
    rest: `The longest wait is ${longest.name} in ${longest.place.split(', ').at(-1)}: ${date}, because of ${longest.lastCode}.`,
  };
}
