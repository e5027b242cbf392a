import type { StudioFormats } from '../../core/time/studio-formats';
import { type CalendarRow, type GateName, isReadyBy } from './readiness-calendar';
import { gateWhen } from './readiness-words';

/**
 * The sentence above the calendar: what is ready by the end of a day, and which rack takes longest.
 * @param endOfDay end of that day for a studio, epoch ms
 * @param day "Fri 8 May"
 * @param now epoch ms
 */
export function readinessSentence(
  rows: readonly CalendarRow[],
  gateName: GateName,
  endOfDay: (formats: StudioFormats) => number,
  day: string,
  now: number,
): { readonly lead: string; readonly rest: string } {
  const what = gateName === 'ship' ? 'ready to ship' : 'ready for the wick test';
  const ready = rows.filter((row) => isReadyBy(row, endOfDay(row.formats)));
  const vessels = ready.reduce((sum, row) => sum + row.vessels, 0);
  const lead =
    ready.length === 0
      ? `No rack is ${what} by ${day}.`
      : `${what.charAt(0).toUpperCase()}${what.slice(1)} by ${day}: ${counted(ready.length, 'rack')}, ${counted(vessels, 'vessel')}.`;
  const untested = rows.filter(
    (row) => row.untested && row.curedAt !== null && row.curedAt <= endOfDay(row.formats),
  );
  const waits =
    untested.length === 0
      ? ''
      : `${counted(untested.length, 'more rack')} will be cured by then but ${untested.length === 1 ? 'waits' : 'wait'} for a passing wick test.`;
  return { lead, rest: [waits, longestWait(rows, gateName, now)].filter((text) => text !== '').join(' ') };
}

function longestWait(rows: readonly CalendarRow[], gateName: GateName, now: number): string {
  const waiting = rows.filter(({ curedAt }) => curedAt === null || curedAt > now);
  const longest = waiting.reduce<CalendarRow | null>(
    (latest, row) => ((row.curedAt ?? Infinity) > (latest?.curedAt ?? -Infinity) ? row : latest),
    null,
  );
  if (longest === null) return '';
  const gate = longest.last[gateName];
  return `The longest wait is ${longest.name} in ${longest.roomName}, ${gateWhen(gate, longest.formats, now)}, because of ${longest.last.code}.`;
}

function counted(count: number, thing: string): string {
  return `${count} ${thing}${count === 1 ? '' : 's'}`;
}
