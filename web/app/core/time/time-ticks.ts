import { clockTime, DAY_MS, HOUR_MS, instantOfLocal, zonedParts } from './zoned-time';

export interface TimeTick {
  /** Epoch ms. */
  readonly at: number;
  readonly label: string;
}

const HOUR_STEPS = [1, 2, 3, 6, 12];
const DAY_STEPS = [1, 2, 7, 14];
const MONTH_STEPS = [1, 2, 3, 6, 12];

/**
 * Ticks of a time axis at round times of the studio's wall clock: hours, midnights or firsts of a month.
 * @param wanted about how many; there are at most that many and usually more than half
 */
export function timeTicks(from: number, to: number, timeZone: string, wanted: number): TimeTick[] {
  const span = to - from;
  const hours = HOUR_STEPS.find((step) => span / (step * HOUR_MS) <= wanted);
  if (hours !== undefined) return hourTicks(from, to, timeZone, hours);
  const days = DAY_STEPS.find((step) => span / (step * DAY_MS) <= wanted);
  if (days !== undefined) return dayTicks(from, to, timeZone, days);
  const months = MONTH_STEPS.find((step) => span / (step * 30.4 * DAY_MS) <= wanted) ?? 12;
  return monthTicks(from, to, timeZone, months);
}

function hourTicks(from: number, to: number, timeZone: string, step: number): TimeTick[] {
  const ticks: TimeTick[] = [];
  // Zones differ from UTC by multiples of a quarter of an hour, and full hours repeat or vanish at clock changes.
  for (let at = Math.ceil(from / (HOUR_MS / 4)) * (HOUR_MS / 4); at <= to; at += HOUR_MS / 4) {
    const { hour, minute, day, monthName, weekday } = zonedParts(at, timeZone);
    if (minute !== 0 || hour % step !== 0) continue;
    ticks.push({ at, label: hour === 0 ? `${weekday} ${day} ${monthName}` : clockTime(at, timeZone) });
  }
  return ticks;
}

function dayTicks(from: number, to: number, timeZone: string, step: number): TimeTick[] {
  const start = zonedParts(from, timeZone);
  const first = Date.UTC(start.year, start.month - 1, start.day);
  const ticks: TimeTick[] = [];
  for (let wall = first; wall <= to + DAY_MS; wall += DAY_MS) {
    if (Math.round(wall / DAY_MS) % step !== 0) continue;
    const at = instantOfLocal(new Date(wall).toISOString().slice(0, 10), timeZone);
    if (at < from || at > to) continue;
    const { day, monthName } = zonedParts(at, timeZone);
    ticks.push({ at, label: `${day} ${monthName}` });
  }
  return ticks;
}

function monthTicks(from: number, to: number, timeZone: string, step: number): TimeTick[] {
  const start = zonedParts(from, timeZone);
  const ticks: TimeTick[] = [];
  for (let month = start.year * 12 + start.month - 1; ; month++) {
    const year = Math.floor(month / 12);
    const at = instantOfLocal(`${year}-${String((month % 12) + 1).padStart(2, '0')}-01`, timeZone);
    if (at > to) return ticks;
    if (at < from || month % step !== 0) continue;
    const { monthName } = zonedParts(at, timeZone);
    ticks.push({ at, label: month % 12 === 0 ? `${monthName} ${year}` : monthName });
  }
}
