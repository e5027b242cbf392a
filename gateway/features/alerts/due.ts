import type { AlertRecord } from './alert-records.js';

/** An acknowledgement of what is still so expires after this. Common practice, no source. */
const ACKNOWLEDGED_FOR_MS = 24 * 3_600_000;

/** What falls due for an alert at an instant; null: nothing. */
export function dueChange(
  alert: Pick<AlertRecord, 'state' | 'shelvedUntil' | 'acknowledgedAt' | 'nextEscalationAt' | 'escalation'>,
  now: number,
): {
  what: 'unshelved' | 'escalated';
  note: string;
  tells: boolean;
  set: {
    state?: 'open';
    shelvedUntil?: null;
    shelvedBy?: null;
    acknowledgedAt?: null;
    acknowledgedBy?: null;
  };
} | null {
  if (alert.shelvedUntil !== null) {
    if (now < alert.shelvedUntil) return null;
    const note = 'The time on the shelf is over and it is still so.';
    return {
      what: 'unshelved',
      note,
      tells: alert.state === 'open',
      set: { shelvedUntil: null, shelvedBy: null },
    };
  }
  if (alert.state === 'acknowledged') {
    if (alert.acknowledgedAt === null || now < alert.acknowledgedAt + ACKNOWLEDGED_FOR_MS) return null;
    const note = 'Acknowledged a day ago and still so.';
    return {
      what: 'escalated',
      note,
      tells: true,
      set: { state: 'open', acknowledgedAt: null, acknowledgedBy: null },
    };
  }
  if (alert.state !== 'open' || alert.nextEscalationAt === null || now < alert.nextEscalationAt) return null;
  const note =
    alert.escalation < 0 ? 'Quiet hours are over and it is still so.' : 'Nobody acknowledged it in time.';
  return { what: 'escalated', note, tells: true, set: {} };
}
