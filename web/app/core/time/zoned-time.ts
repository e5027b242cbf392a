/** Times as a studio's wall clock shows them. Instants are ISO 8601 strings or epoch milliseconds. */
export type Instant = string | number;

export interface ZonedParts {
  /** Local date as a number that can be compared, e.g. 20260508. */
  readonly dayKey: number;
  readonly year: number;
  readonly month: number;
  readonly day: number;
  readonly hour: number;
  readonly minute: number;
  readonly second: number;
  /** "Fri" */
  readonly weekday: string;
  /** "May" */
  readonly monthName: string;
}

export const MINUTE_MS = 60_000;
export const HOUR_MS = 3_600_000;
export const DAY_MS = 86_400_000;

const formats = new Map<string, Intl.DateTimeFormat>();

/** Epoch milliseconds of an instant. */
export function epoch(instant: Instant): number {
  return typeof instant === 'number' ? instant : Date.parse(instant);
}

/** Wall-clock parts of an instant in an IANA time zone. Throws RangeError for a zone this browser does not know. */
export function zonedParts(instant: Instant, timeZone: string): ZonedParts {
  const found: Record<string, string> = {};
  for (const { type, value } of formatOf(timeZone).formatToParts(epoch(instant))) found[type] = value;
  const part = (name: string) => Number(found[name]);
  const [year, month, day] = [part('year'), part('month'), part('day')];
  return {
    dayKey: year * 10_000 + month * 100 + day,
    year,
    month,
    day,
    hour: part('hour'),
    minute: part('minute'),
    second: part('second'),
    weekday: found['weekday'] ?? '',
    monthName: MONTHS[month - 1] ?? '',
  };
}

const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'June', 'July', 'Aug', 'Sept', 'Oct', 'Nov', 'Dec'];

function formatOf(timeZone: string): Intl.DateTimeFormat {
  let format = formats.get(timeZone);
  if (!format) {
    format = new Intl.DateTimeFormat('en-GB', {
      timeZone,
      weekday: 'short',
      year: 'numeric',
      month: 'numeric',
      day: 'numeric',
      hour: '2-digit',
      minute: '2-digit',
      second: '2-digit',
      hourCycle: 'h23',
    });
    formats.set(timeZone, format);
  }
  return format;
}

const two = (value: number) => String(value).padStart(2, '0');

/** Worked value: 2026-05-08T12:20Z in Europe/Lisbon → "13:20". */
export function clockTime(instant: Instant, timeZone: string): string {
  const { hour, minute } = zonedParts(instant, timeZone);
  return `${two(hour)}:${two(minute)}`;
}

/** Worked value: 2026-05-08T12:20Z in Europe/Lisbon → "Fri 8 May". */
export function dayWords(instant: Instant, timeZone: string): string {
  const { weekday, day, monthName } = zonedParts(instant, timeZone);
  return `${weekday} ${day} ${monthName}`;
}

/** "Fri 8 May 13:20" */
export function dayAndTime(instant: Instant, timeZone: string): string {
  return `${dayWords(instant, timeZone)} ${clockTime(instant, timeZone)}`;
}

/** Whole local days from one instant to another: 0 the same day, 1 tomorrow, −1 yesterday. */
export function localDaysBetween(from: Instant, to: Instant, timeZone: string): number {
  const midnight = (instant: Instant) => {
    const { year, month, day } = zonedParts(instant, timeZone);
    return Date.UTC(year, month - 1, day);
  };
  return Math.round((midnight(to) - midnight(from)) / DAY_MS);
}

/** A time seen from now: "14:20" today, "yesterday 14:20", "Fri 8 May 14:20", with the year when it is another. */
export function timeSeenFrom(instant: Instant, now: Instant, timeZone: string): string {
  const days = localDaysBetween(now, instant, timeZone);
  const time = clockTime(instant, timeZone);
  if (days === 0) return time;
  if (days === -1) return `yesterday ${time}`;
  if (days === 1) return `tomorrow ${time}`;
  return `${daySeenFrom(instant, now, timeZone)} ${time}`;
}

/** A day seen from now: "today", "tonight" (from 18:00), "tomorrow", "yesterday", "Fri 8 May", "8 May 2027". */
export function daySeenFrom(instant: Instant, now: Instant, timeZone: string): string {
  const days = localDaysBetween(now, instant, timeZone);
  const parts = zonedParts(instant, timeZone);
  if (days === 0) return parts.hour >= 18 && epoch(instant) > epoch(now) ? 'tonight' : 'today';
  if (days === 1) return 'tomorrow';
  if (days === -1) return 'yesterday';
  if (Math.abs(days) > 300) return `${parts.day} ${parts.monthName} ${parts.year}`;
  return `${parts.weekday} ${parts.day} ${parts.monthName}`;
}

/** A duration in its largest useful unit. Worked values: 840 000 → "14 min"; 111 600 000 → "31 h"; 9 days → "9 days". */
export function durationWords(ms: number): string {
  const span = Math.max(0, ms);
  if (span < 90_000) return `${Math.floor(span / 1000)} s`;
  if (span < 90 * MINUTE_MS) return `${Math.floor(span / MINUTE_MS)} min`;
  if (span < 48 * HOUR_MS) return `${Math.floor(span / HOUR_MS)} h`;
  return `${Math.floor(span / DAY_MS)} days`;
}

/** The city of a zone name. Worked value: "America/New_York" → "New York". */
export function zoneCity(timeZone: string): string {
  return (timeZone.split('/').at(-1) ?? timeZone).replaceAll('_', ' ');
}

/**
 * Epoch ms of a local wall time in a zone (for date fields). A time that a clock change skips becomes the
 * instant after the gap; of a time that happens twice the first is taken.
 */
export function instantOfLocal(local: string, timeZone: string): number {
  const wall = Date.parse(`${local.length === 10 ? `${local}T00:00` : local}Z`);
  const offsetAt = (ms: number) => {
    const p = zonedParts(ms, timeZone);
    return Date.UTC(p.year, p.month - 1, p.day, p.hour, p.minute, p.second) - Math.floor(ms / 1000) * 1000;
  };
  const before = offsetAt(wall - DAY_MS);
  const first = wall - before;
  if (offsetAt(first) === before) return first;
  const second = wall - offsetAt(wall + DAY_MS);
  return offsetAt(second) === wall - second ? second : first;
}

/** Local date and time for an `<input type="datetime-local">`. Worked value: "2026-05-08T13:20". */
export function localInput(instant: Instant, timeZone: string): string {
  const p = zonedParts(instant, timeZone);
  return `${p.year}-${two(p.month)}-${two(p.day)}T${two(p.hour)}:${two(p.minute)}`;
}
