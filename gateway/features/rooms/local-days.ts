import { DateTime } from 'luxon';
import { localDayStarts, nextLocalDayStart } from '../../history/local-days.js';

/** A local day of a studio: its date and when it begins and ends, epoch ms; 23, 24 or 25 hours long. */
export interface LocalDay {
  readonly date: string;
  readonly from: number;
  readonly to: number;
}

/** The local days that reach into [from, to), oldest first; none for an empty period. */
export function localDays(from: number, to: number, timeZone: string): LocalDay[] {
  if (from >= to) return [];
  return localDayStarts(from, to, timeZone).map((start) => ({
    date: DateTime.fromMillis(start, { zone: timeZone }).toISODate() ?? '',
    from: start,
    to: nextLocalDayStart(start, timeZone),
  }));
}
