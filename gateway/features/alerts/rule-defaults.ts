import type { AlertKind, Rule } from '#shared/contract/alerts';

/**
 * Rules a room starts with. Delays of 15 min and a deadband of 0.5 K are common practice, no source; every number can
 * be changed per room.
 */
export const DEFAULT_RULES: readonly Rule[] = [
  rule('too-warm', 'warning', 15, 15, 0.5),
  rule('too-cold', 'warning', 30, 30, 0.5),
  rule('too-damp', 'notice', 30, 30, 2),
  rule('condensation', 'warning', 15, 15, 1),
  rule('swinging', 'notice', 0, 60, 0.5),
  rule('silent', 'warning', 0, 0, 0),
  rule('stuck', 'notice', 0, 0, 0),
  rule('battery', 'notice', 0, 0, 5),
];

/** Rules of a whole studio: not set per room. */
export const INTAKE_RULE: Rule = rule('intake-silent', 'critical', 0, 0, 0);

/** What is critical is raised after this, whatever the rule's delay. */
export const CRITICAL_DELAY_MINUTES = 5;

/** A room's rules: its own where it has some, the defaults for the rest. */
export function rulesOf(own: readonly Rule[] | null): Rule[] {
  return DEFAULT_RULES.map((standard) => own?.find(({ kind }) => kind === standard.kind) ?? standard);
}

function rule(
  kind: AlertKind,
  severity: Rule['severity'],
  onDelayMinutes: number,
  offDelayMinutes: number,
  clearBy: number,
): Rule {
  return { kind, enabled: true, severity, onDelayMinutes, offDelayMinutes, clearBy };
}
