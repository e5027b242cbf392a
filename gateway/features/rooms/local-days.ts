import { DateTime } from 'luxon';

/** A local day of a studio: its date and when it begins and ends, epoch ms; 23, 24 or 25 hours long. */
export interface LocalDay {
  readonly date: string;
  readonly from: number;
  readonly to: number;
}

/** The local days that reach into [from, to), oldest first; none for an empty period. */
export function localDays(from: number, to: number, timeZone: string): LocalDay[] {
  const days: LocalDay[] = [];
  if (from >= to) return days;
  let start = DateTime.fromMillis(from, { zone: timeZone }).startOf('day');
  while (start.toMillis() < to) {
    const next = start.plus({ days: 1 }).startOf('day');
    days.push({ date: start.toISODate() ?? '', from: start.toMillis(), to: next.toMillis() });
    start = next;
  }
  return days;
}

/** When the local day began in which an instant lies, epoch ms. */
export function startOfLocalDay(at: number, timeZone: string): number {
  return DateTime.fromMillis(at, { zone: timeZone }).startOf('day').toMillis();
}
