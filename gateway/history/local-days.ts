import { DateTime } from 'luxon';

/** First instant of the local day that contains an instant, epoch ms. A day has 23 or 25 hours when the clocks change. */
export function localDayStart(ms: number, zone: string): number {
  return DateTime.fromMillis(ms, { zone }).startOf('day').toMillis();
}

/** First instant of the next local day, epoch ms. */
export function nextLocalDayStart(ms: number, zone: string): number {
  return DateTime.fromMillis(ms, { zone }).startOf('day').plus({ days: 1 }).startOf('day').toMillis();
}

/** Starts of the local days that touch [from, to), epoch ms. */
export function localDayStarts(from: number, to: number, zone: string): number[] {
  const starts: number[] = [];
  for (let at = localDayStart(from, zone); at < to; at = nextLocalDayStart(at, zone)) starts.push(at);
  return starts;
}
