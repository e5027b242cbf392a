import { randomUUID } from 'node:crypto';
import type { AlertFacts, Rule } from '#shared/contract/alerts';
import type { AlertRecord, AlertStudio, KeptRule, Write } from './alert-records.js';
import type { News } from './deliveries.js';
import { CRITICAL_DELAY_MINUTES } from './rule-defaults.js';
import { type RuleDelays, type RuleSample, stepRule } from './rule-machine.js';
import type { Seen, Subject } from './sightings.js';

/** What the names in an alert's facts are, and how it is held back. */
export interface Surroundings {
  readonly studio: AlertStudio | null;
  readonly roomName: string | null;
  readonly sensorName: string | null;
  /** Until when a new alert is held back by quiet hours, epoch ms; null: not. */
  readonly heldUntil: (severity: AlertRecord['severity'], at: number) => number | null;
}

/** What came of one look of one rule. */
export interface Transition {
  readonly kept: KeptRule;
  readonly writes: readonly Write[];
  /** The alert as it is afterwards, if it changed. */
  readonly alert: AlertRecord | null;
  readonly news: News | null;
}

/**
 * Moves one rule on by what was seen and says what has to be written. Pure but for the new alert's id.
 * @param known the alert this rule has raised, as it is kept
 */
export function transition(
  subject: Subject,
  seen: Seen,
  kept: KeptRule,
  known: AlertRecord | null,
  around: Surroundings,
  now: number,
): Transition {
  const sample: RuleSample = subject.rule.enabled ? seen.sample : { ...seen.sample, status: 'good' };
  const { state, event } = stepRule(kept.state, sample, delaysOf(subject.rule));
  const done = (
    alertId: string | null,
    writes: Write[],
    alert: AlertRecord | null,
    news: News | null,
  ): Transition => {
    const next = { state, alertId };
    const keep: Write[] = isWorthKeeping(kept, next)
      ? [{ do: 'keep', key: subject.key, rule: next, at: now }]
      : [];
    return { kept: next, writes: [...writes, ...keep], alert, news };
  };
  if (event?.what === 'raised') {
    const alert = raise(subject, seen, around, state.since ?? sample.at, state.worst, event.at);
    const writes: Write[] = [
      { do: 'raise', alert },
      stepOf(alert.id, event.at, 'raised', '', state.value),
      ...heldStep(alert, event.at),
    ];
    return done(alert.id, writes, alert, { alert, what: 'raised' });
  }
  if (known === null) return done(kept.alertId, [], null, null);
  if (event?.what === 'cleared') {
    const over = known.state === 'acknowledged' ? 'cleared' : 'returned';
    const set = { state: over, clearedAt: event.at, nextEscalationAt: null, shelvedUntil: null } as const;
    const alert: AlertRecord = { ...known, ...set, version: known.version + 1 };
    const writes: Write[] = [
      { do: 'change', alertId: alert.id, set },
      stepOf(alert.id, event.at, over, '', known.facts.worst),
    ];
    return done(null, writes, alert, { alert, what: 'cleared' });
  }
  if (state.phase !== 'raised') return done(kept.alertId, [], null, null);
  const facts = factsOf(subject, seen, around, Date.parse(known.facts.since), state.worst, state.severity);
  const worse = event?.what === 'worse';
  if (!worse && !isNews(known.facts, facts)) return done(kept.alertId, [], null, null);
  const set = { facts, severity: facts.severity, ...(worse ? reopened(known, around.studio, now) : {}) };
  const alert = { ...known, ...set, version: known.version + 1 };
  const writes: Write[] = [{ do: 'change', alertId: alert.id, set }];
  if (worse) writes.push(stepOf(alert.id, event.at, 'worse', '', state.value));
  return done(kept.alertId, writes, alert, worse ? { alert, what: 'worse' } : null);
}

/** One line of an alert's story, written by nobody in particular. */
export function stepOf(
  alertId: string,
  at: number,
  what: Extract<Write, { do: 'step' }>['what'],
  note: string,
  value: number | null,
): Write {
  return { do: 'step', alertId, at, what, who: null, note, value };
}

function raise(
  subject: Subject,
  seen: Seen,
  around: Surroundings,
  since: number,
  worst: number | null,
  at: number,
): AlertRecord {
  const facts = factsOf(subject, seen, around, since, worst, seen.sample.severity);
  const held = around.heldUntil(facts.severity, at);
  return {
    id: randomUUID(),
    ...{
      studioId: subject.studioId,
      roomId: subject.roomId,
      sensorId: subject.sensorId,
      kind: subject.kind,
    },
    ...{ severity: facts.severity, state: 'open', facts, raisedAt: at, clearedAt: null },
    ...{ acknowledgedBy: null, acknowledgedAt: null, acknowledgeNote: null },
    ...{ shelvedBy: null, shelvedUntil: null, shelveReason: null, holder: null },
    escalation: held === null ? 0 : -1,
    nextEscalationAt: held ?? at + (around.studio?.escalateAfterMs ?? 0),
    version: 1,
  };
}

function heldStep(alert: AlertRecord, at: number): Write[] {
  if (alert.escalation >= 0) return [];
  return [
    stepOf(
      alert.id,
      at,
      'held-quiet',
      'Held back by quiet hours; told when they end, if it is still so.',
      null,
    ),
  ];
}

/** A rise in severity passes everything: it is open again and told at once. */
function reopened(known: AlertRecord, studio: AlertStudio | null, now: number) {
  return {
    state: 'open' as const,
    ...{ acknowledgedBy: null, acknowledgedAt: null, acknowledgeNote: null },
    ...{ shelvedBy: null, shelvedUntil: null, shelveReason: null },
    escalation: Math.max(0, known.escalation),
    nextEscalationAt: now + (studio?.escalateAfterMs ?? 0),
  };
}

function factsOf(
  subject: Subject,
  seen: Seen,
  around: Surroundings,
  since: number,
  worst: number | null,
  severity: AlertFacts['severity'] | null,
): AlertFacts {
  return {
    kind: subject.kind,
    severity: severity ?? subject.rule.severity,
    studioName: around.studio?.name ?? '',
    roomName: around.roomName,
    sensorName: around.sensorName,
    value: seen.sample.value,
    worst,
    limit: seen.limit,
    dewPoint: seen.dewPoint,
    celsius: seen.celsius,
    since: new Date(since).toISOString(),
    lastHeardAt: seen.lastHeardAt === null ? null : new Date(seen.lastHeardAt).toISOString(),
    batches: seen.batches,
  };
}

function delaysOf(rule: Rule): RuleDelays {
  return {
    on: rule.onDelayMinutes * 60_000,
    onCritical: CRITICAL_DELAY_MINUTES * 60_000,
    // A rule that was switched off ends at once.
    off: rule.enabled ? rule.offDelayMinutes * 60_000 : 0,
  };
}

/** Changes of a figure below this are noise. */
const WORTH_TELLING = 0.05;

/** A value that moved, a new worst or other batches; the rest is noise. */
function isNews(before: AlertFacts, after: AlertFacts): boolean {
  const moved = (a: number | null, b: number | null) => Math.abs((a ?? 0) - (b ?? 0)) > WORTH_TELLING;
  return (
    moved(before.value, after.value) ||
    moved(before.worst, after.worst) ||
    moved(before.limit, after.limit) ||
    before.batches.length !== after.batches.length ||
    before.batches.some(
      ({ id, shelf }, index) => id !== after.batches[index]?.id || shelf !== after.batches[index]?.shelf,
    )
  );
}

/** States are written when a restart would otherwise tell another story; not for every sample. */
function isWorthKeeping(before: KeptRule, after: KeptRule): boolean {
  return (
    before.alertId !== after.alertId ||
    before.state.phase !== after.state.phase ||
    before.state.since !== after.state.since ||
    before.state.severity !== after.state.severity ||
    (before.state.goodSince === null) !== (after.state.goodSince === null)
  );
}
