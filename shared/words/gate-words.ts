import type { BatchCard, GateView } from '#shared/contract/batches';

export interface GateFormats {
  /** "today", "tonight", "tomorrow", "Fri 8 May" */
  readonly daySeenFrom: (instant: string | number, now: number) => string;
}

/** What comes next for a batch: `what` names the gate, `when` the day; together they fit a narrow block. */
export interface NextGate {
  readonly what: '' | 'test' | 'ship';
  readonly when: string;
  /** The same in one sentence. */
  readonly sentence: string;
}

const DAY_MS = 86_400_000;

/**
 * The next gate of a batch in words. A range of half a day or more is told where dates rest on a forecast.
 * @param now epoch ms
 * @param withRange tell the half width of the 10–90 % range
 */
export function nextGate(batch: BatchCard, formats: GateFormats, now: number, withRange = false): NextGate {
  if (batch.ship.state === 'reached') {
    return batch.recheckDue
      ? { what: '', when: 're-check', sentence: 'ready to ship, wick re-check due' }
      : { what: '', when: 'ready', sentence: 'ready to ship' };
  }
  if (batch.recheckDue) return { what: '', when: 're-check', sentence: 'wick re-check due' };
  const tested = batch.wickTest.state === 'reached';
  const gate = tested ? batch.ship : batch.wickTest;
  const what = tested ? 'ship' : 'test';
  const name = tested ? 'ready to ship' : 'wick test';
  if (gate.blockedBy.includes('re-softened'))
    return { what, when: 're-softened', sentence: `${name} open: the wax softened again` };
  if (gate.t50 === null || gate.state === 'unknown')
    return { what, when: 'no date', sentence: `${name} has no date yet` };
  if (Date.parse(gate.t50) <= now) {
    if (gate.blockedBy.includes('no-passing-test'))
      return { what: '', when: 'test due', sentence: 'cured; a passing wick test is missing' };
    return { what, when: 'due now', sentence: `${name} due now` };
  }
  const range = withRange ? halfRange(gate) : '';
  const day = formats.daySeenFrom(gate.t50, now);
  return { what, when: `${day}${range}`, sentence: `${name} ${day}${range}` };
}

function halfRange(gate: GateView): string {
  if (gate.t10 === null || gate.t90 === null) return '';
  const days = (Date.parse(gate.t90) - Date.parse(gate.t10)) / 2 / DAY_MS;
  return days < 0.5 ? '' : ` ±${Math.round(days)} d`;
}
