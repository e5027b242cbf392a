import type { BatchCard, GateView } from '#shared/contract/batches';
import type { Rack } from '#shared/contract/racks';
import type { StudioFormats } from '../../core/time/studio-formats';
import { DAY_MS, epoch, zonedParts } from '../../core/time/zoned-time';
import { gateInShort, gateWhen } from './readiness-words';

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
  /** "ready", "Fri 8 May", "no date yet" */
  readonly short: string;
  /** "ready", "Fri 8 May (6 to 12 May)", "no date yet" */
  readonly when: string;
  /** Where the words stand so that they cover neither whisker nor middle. */
  readonly side: 'after' | 'before' | 'within';
  readonly batch: BatchCard;
  /** "Wed 22 Apr" */
  readonly poured: string;
}

export interface CalendarRow {
  readonly id: string;
  readonly studioId: string;
  /** "Quay Street, Loft" */
  readonly place: string;
  readonly roomId: string;
  readonly roomName: string;
  readonly name: string;
  /** "4 shelves, 96 vessels" */
  readonly size: string;
  readonly vessels: number;
  readonly bars: readonly CalendarBar[];
  /** This moment on the four weeks, by the studio's own clock, 0–1. */
  readonly now: number;
  readonly formats: StudioFormats;
  /** When the last batch has gathered its days, epoch ms; null: one has no date. */
  readonly curedAt: number | null;
  /** A batch has no passing wick test, so that the rack is not ready when it is cured. */
  readonly untested: boolean;
  /** The batch that takes longest. */
  readonly last: BatchCard;
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
/** Place of what has no date: past the edge. */
const BEYOND = 2;
/** Part of the width that a batch's words need. */
const WORDS = 0.13;

/** Local wall time as if it were UTC, so that every studio's midnights fall on the same lines. */
function wallTime(instant: string | number, timeZone: string): number {
  const { year, month, day, hour, minute } = zonedParts(instant, timeZone);
  return Date.UTC(year, month - 1, day, hour, minute);
}

/** First midnight of the four weeks, as wall time: the same date for every studio. @param now epoch ms */
export function calendarStart(now: number, timeZone: string): number {
  return Math.floor(wallTime(now, timeZone) / DAY_MS) * DAY_MS - BEFORE * DAY_MS;
}

/** The days across the top. @param start see calendarStart */
export function calendarDays(start: number): CalendarDay[] {
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

/** Place of an instant on the four weeks by a studio's own clock, 0–1; may lie outside. */
export function placeOf(instant: string | number, start: number, timeZone: string): number {
  return (wallTime(instant, timeZone) - start) / (DAYS * DAY_MS);
}

/** The date of the next Friday (today, if it is one) by a studio's calendar, "2026-05-08". */
export function nextFriday(now: number, timeZone: string): string {
  const today = Math.floor(wallTime(now, timeZone) / DAY_MS) * DAY_MS;
  const FRIDAY = 5;
  const ahead = (FRIDAY - new Date(today).getUTCDay() + 7) % 7;
  return new Date(today + ahead * DAY_MS).toISOString().slice(0, 10);
}

/** When a gate's days were or will be gathered, epoch ms; null without a date. */
export function curedAt(gate: GateView, now: number): number | null {
  if (gate.state === 'unknown' || gate.blockedBy.includes('re-softened')) return null;
  const at = gate.reachedAt ?? gate.t50;
  if (at !== null) return epoch(at);
  return gate.chanceNow >= 0.5 ? now : null;
}

/** One row of the calendar; a rack that holds nothing has none. @param start see calendarStart @param now epoch ms */
export function calendarRow(
  place: RackInStudio,
  gateName: GateName,
  start: number,
  now: number,
): CalendarRow | null {
  const { rack, batches, formats } = place;
  const first = batches[0];
  if (!first) return null;
  const whenCured = (batch: BatchCard) => curedAt(batch[gateName], now);
  const last = batches.reduce(
    (latest, one) => ((whenCured(one) ?? Infinity) > (whenCured(latest) ?? Infinity) ? one : latest),
    first,
  );
  const shelves = rack.shelves.length;
  const vessels = batches.reduce((sum, batch) => sum + batch.vessels, 0);
  return {
    id: rack.id,
    studioId: place.studioId,
    place: `${place.studioName}, ${place.roomName}`,
    roomId: place.roomId,
    roomName: place.roomName,
    name: rack.name,
    size: `${shelves} ${shelves === 1 ? 'shelf' : 'shelves'}, ${vessels} vessels`,
    vessels,
    bars: [...batches]
      .sort((a, b) => epoch(a.pouredAt) - epoch(b.pouredAt))
      .map((batch) => barOf(batch, gateName, formats, start, now)),
    now: placeOf(now, start, formats.timeZone),
    formats,
    curedAt: whenCured(last),
    untested: batches.some((batch) => batch[gateName].blockedBy.includes('no-passing-test')),
    last,
  };
}

function barOf(
  batch: BatchCard,
  gateName: GateName,
  formats: StudioFormats,
  start: number,
  now: number,
): CalendarBar {
  const gate = batch[gateName];
  const place = (instant: string | number) => placeOf(instant, start, formats.timeZone);
  const cured = curedAt(gate, now);
  const middle = cured === null ? BEYOND : place(cured);
  const open = cured !== null && gate.reachedAt === null;
  const high = open ? place(gate.t90 ?? cured) : middle;
  const other = curedAt(batch[gateName === 'ship' ? 'wickTest' : 'ship'], now);
  const poured = place(batch.pouredAt);
  return {
    id: batch.id,
    code: batch.code,
    start: poured,
    middle,
    low: open ? place(gate.t10 ?? now) : middle,
    high,
    // A gate that comes after the end of the bar would stand in the void.
    notches: other === null || place(other) >= middle ? [] : [place(other)],
    ready: gate.state === 'reached',
    short: gateInShort(gate, formats, now),
    when: gateWhen(gate, formats, now),
    side: high < 1 - WORDS ? 'after' : poured > WORDS ? 'before' : 'within',
    batch,
    poured: formats.day(batch.pouredAt),
  };
}

/** Whether everything on a rack passes the gate by an instant, epoch ms. */
export function isReadyBy(row: CalendarRow, by: number): boolean {
  return row.curedAt !== null && row.curedAt <= by && !row.untested;
}
