import type { GateView } from '#shared/contract/batches';
import type { StudioFormats } from '../../core/time/studio-formats';
import { zonedParts } from '../../core/time/zoned-time';

/** A gate in a word or two: "ready", "Fri 8 May", "no date yet". @param now epoch ms */
export function gateInShort(gate: GateView, formats: StudioFormats, now: number): string {
  if (gate.state === 'reached') return 'ready';
  if (gate.blockedBy.includes('re-softened')) return 'softened again, check by hand';
  if (gate.reachedAt !== null) return 'cured, waits for a passing wick test';
  if (gate.state === 'unknown') return 'nothing measured yet';
  if (gate.t50 !== null) return formats.daySeenFrom(gate.t50, now);
  return gate.chanceNow >= 0.5 ? 'any time now' : 'no date yet';
}

/** The same with the 10–90 % range: "Fri 8 May (6 to 12 May)". */
export function gateWhen(gate: GateView, formats: StudioFormats, now: number): string {
  const short = gateInShort(gate, formats, now);
  const dated =
    gate.reachedAt === null && !gate.blockedBy.includes('re-softened') && gate.state !== 'unknown';
  const range = dated && (gate.t50 !== null || gate.chanceNow >= 0.5) ? rangeInWords(gate, formats) : '';
  return range === '' ? short : `${short} (${range})`;
}

/** "6 to 12 May", "29 Apr to 3 May", "now to 5 May", "14:00 to 19:10", "from 6 May". */
export function rangeInWords(gate: Pick<GateView, 't10' | 't90'>, formats: StudioFormats): string {
  const { t10, t90 } = gate;
  if (t90 === null) return t10 === null ? '' : `from ${dayOfMonth(t10, formats)}`;
  if (t10 === null) return `now to ${dayOfMonth(t90, formats)}`;
  const [low, high] = [zonedParts(t10, formats.timeZone), zonedParts(t90, formats.timeZone)];
  if (low.dayKey === high.dayKey) return `${formats.time(t10)} to ${formats.time(t90)}`;
  const sameMonth = low.month === high.month && low.year === high.year;
  return `${sameMonth ? low.day : dayOfMonth(t10, formats)} to ${dayOfMonth(t90, formats)}`;
}

function dayOfMonth(instant: string, formats: StudioFormats): string {
  const { day, monthName } = zonedParts(instant, formats.timeZone);
  return `${day} ${monthName}`;
}
