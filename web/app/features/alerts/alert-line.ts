import type { Alert } from '#shared/contract/alerts';
import { alertPlace, alertWords, clearedSentence } from '#shared/words/alert-words';
import type { StudioFormats } from '../../core/time/studio-formats';
import { ALERT_STATUS } from '../../ui/alert-status';
import type { Status } from '../../ui/status-mark';

/** An alert as one line of a list. */
export interface AlertLine {
  readonly id: string;
  readonly studioId: string;
  readonly status: Status;
  readonly place: string;
  readonly headline: string;
  readonly figures: string;
  /** Whose it is and where it stands. */
  readonly who: string;
  readonly critical: boolean;
}

/** @param now epoch ms, from which times are told */
export function alertLine(alert: Alert, formats: StudioFormats, now: number): AlertLine {
  const words = alertWords(alert.facts, formats, now);
  return {
    id: alert.id,
    studioId: alert.studioId,
    status: ALERT_STATUS[alert.facts.kind],
    place: alertPlace(alert.facts),
    headline: words.headline,
    figures:
      alert.clearedAt === null
        ? words.figures
        : clearedSentence(alert.facts, formats, Date.parse(alert.clearedAt)),
    who: whose(alert, formats, now),
    critical: alert.facts.severity === 'critical',
  };
}

/** "Ines has it", "nobody yet", "shelved by Ines until 18:00". */
export function whose(alert: Alert, formats: StudioFormats, now: number): string {
  if (alert.shelved) {
    return `shelved by ${alert.shelved.by} until ${formats.timeSeenFrom(alert.shelved.until, now)}: ${alert.shelved.reason}`;
  }
  if (alert.state === 'returned') return 'over, nobody has looked at it';
  const holder = alert.holder?.name ?? alert.acknowledged?.by;
  if (alert.state === 'cleared') return holder ? `${holder} had it` : 'over';
  return holder ? `${holder} has it` : 'nobody yet';
}

const WEIGHT: Readonly<Record<Alert['facts']['severity'], number>> = { critical: 0, warning: 1, notice: 2 };

/** The worst first, among them the newest; what is over comes last. */
export function byUrgency(a: Alert, b: Alert): number {
  const weight = (alert: Alert) => (alert.clearedAt !== null ? 3 : WEIGHT[alert.facts.severity]);
  return weight(a) - weight(b) || b.raisedAt.localeCompare(a.raisedAt);
}
