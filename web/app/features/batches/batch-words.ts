import type { EstimateView, GateView, Shift } from '#shared/contract/batches';
import type { StudioFormats } from '../../core/time/studio-formats';
import { figure } from '../../core/units/measure-words';

/** A gate in words: what is so, and the range or what stands in the way. */
export interface GateWords {
  readonly lead: string;
  readonly rest: string;
  readonly good: boolean;
}

const BLOCK_WORDS: Readonly<Record<GateView['blockedBy'][number], string>> = {
  're-softened': 'The wax softened again in the heat: the estimate is not valid, check by hand.',
  'no-passing-test': 'A passing wick test of this design is missing.',
  'no-readings': 'Nothing was measured where it stands.',
};

/** @param now epoch ms */
export function gateWords(gate: GateView, formats: StudioFormats, now: number): GateWords {
  const blocks = gate.blockedBy.map((block) => BLOCK_WORDS[block]).join(' ');
  if (gate.state === 'unknown') return { lead: 'Not known', rest: blocks, good: false };
  if (gate.reachedAt !== null) {
    const reached = `reached ${formats.dayAndTime(gate.reachedAt)}`;
    return gate.state === 'reached'
      ? { lead: 'Ready', rest: reached, good: true }
      : { lead: 'Cured, not released', rest: `${reached}. ${blocks}`, good: false };
  }
  if (gate.blockedBy.includes('re-softened')) return { lead: 'Not valid', rest: blocks, good: false };
  const chance = `Chance that it is ready now: ${Math.round(gate.chanceNow * 100)} %.`;
  if (gate.t50 === null) {
    const lead = gate.chanceNow >= 0.5 ? 'About now' : 'Not within half a year';
    return { lead, rest: [chance, blocks].filter((text) => text !== '').join(' '), good: false };
  }
  const low = gate.t10 === null ? 'now' : formats.dayAndTime(gate.t10);
  const high = gate.t90 === null ? 'beyond half a year' : formats.dayAndTime(gate.t90);
  return {
    lead: formats.daySeenFrom(gate.t50, now),
    rest: [`10 to 90 %: ${low} to ${high}.`, chance, blocks].filter((text) => text !== '').join(' '),
    good: false,
  };
}

/** Why the date moved, entry by entry: "Colder than 21 °C in the Loft: 3.2 h later". */
export function shiftWords(shift: Shift, formats: StudioFormats): { what: string; when: string; by: string } {
  const where = shift.roomName === null ? 'without a shelf' : `in ${shift.roomName}`;
  const mean = shift.meanCelsius === null ? '' : `, mean ${formats.temperature(shift.meanCelsius)}`;
  const reference = formats.temperature(21, 0);
  const what: Readonly<Record<Shift['because'], string>> = {
    colder: `Colder than ${reference} ${where}${mean}`,
    warmer: `Warmer than ${reference} ${where}${mean}`,
    gap: `No readings ${where}, filled${mean}`,
    're-softened': `Softened again ${where}${mean}`,
    'at-reference': `Close to ${reference} ${where}`,
  };
  return {
    what: what[shift.because],
    when: `${formats.dayAndTime(shift.from)} to ${formats.dayAndTime(shift.to)}`,
    by: hoursInWords(shift.hours),
  };
}

/** "3.2 h later", "1.1 h earlier", "no change". */
export function hoursInWords(hours: number): string {
  const rounded = Math.round(Math.abs(hours) * 10) / 10;
  if (rounded === 0) return 'no change';
  const amount = rounded >= 48 ? `${figure(rounded / 24, 1)} days` : `${figure(rounded, 1)} h`;
  return `${amount} ${hours > 0 ? 'later' : 'earlier'}`;
}

const FILL_WORDS: Readonly<Record<EstimateView['gaps'][number]['fill'], string>> = {
  line: 'a straight line between its ends',
  'hour-of-day': 'the room’s usual value for the hour',
  'last-known': 'the last known value',
};

/** How a gap was filled and what it adds to the doubt. */
export function gapWords(gap: EstimateView['gaps'][number], formats: StudioFormats): string {
  const length = formats.duration(Date.parse(gap.to) - Date.parse(gap.from));
  return `${formats.dayAndTime(gap.from)}, ${length}: filled by ${FILL_WORDS[gap.fill]}; adds ${figure(gap.sdDays * 24, 1)} h of doubt.`;
}

/** When the wick is to be tested again, or '' when nothing is due. */
export function recheckWords(recheck: EstimateView['recheck'], formats: StudioFormats): string {
  if (recheck.hardenedSinceTest === null) return '';
  const hardened = `Hardened by ${figure(recheck.hardenedSinceTest * 100, 1)} points since its test`;
  if (recheck.at === null) return `${hardened}; no re-check falls due.`;
  const why = recheck.because === 'time' ? '60 days after the test' : 'for 5 points of hardening';
  return recheck.due
    ? `${hardened}: a wick re-check is due since ${formats.day(recheck.at)} (${why}).`
    : `${hardened}; the next re-check falls due ${formats.day(recheck.at)} (${why}).`;
}
