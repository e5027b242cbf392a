import type { Severity } from '#shared/contract/alerts';

/** What a rule sees at one instant: beyond its limit, back behind the deadband, in between, or nothing at all. */
export interface RuleSample {
  /** Epoch ms of the domain. */
  readonly at: number;
  readonly status: 'bad' | 'good' | 'between' | 'no-data';
  readonly severity: Severity;
  readonly value: number | null;
  /** Whether a larger or a smaller value is worse. */
  readonly worse: 'higher' | 'lower';
}

export interface RuleDelays {
  /** How long it must be bad before it is raised, ms. */
  readonly on: number;
  /** The same for what is critical, ms. */
  readonly onCritical: number;
  /** How long it must be good before it is over, ms. */
  readonly off: number;
}

/** State of one rule for one room, sensor or studio; plain data, so that a restart neither re-fires nor forgets. */
export interface RuleState {
  readonly phase: 'normal' | 'pending' | 'raised';
  /** When it began to be bad. */
  readonly since: number | null;
  /** When it began to be good again while raised. */
  readonly goodSince: number | null;
  readonly severity: Severity | null;
  readonly value: number | null;
  readonly worst: number | null;
  /** Newest sample looked at; older ones change nothing. */
  readonly lastAt: number;
}

export interface RuleEvent {
  readonly what: 'raised' | 'worse' | 'cleared';
  readonly at: number;
}

export const NORMAL: RuleState = {
  phase: 'normal',
  since: null,
  goodSince: null,
  severity: null,
  value: null,
  worst: null,
  lastAt: -Infinity,
};

const RANK: Record<Severity, number> = { notice: 0, warning: 1, critical: 2 };

/**
 * Moves a rule on by one sample. Silence is never fine and never ends an alert; a sample older than the last one is ignored, so
 * late readings re-fire nothing and their order does not matter.
 */
export function stepRule(
  state: RuleState,
  sample: RuleSample,
  delays: RuleDelays,
): { state: RuleState; event: RuleEvent | null } {
  if (sample.at <= state.lastAt) return { state, event: null };
  if (sample.status === 'no-data') {
    return { state: { ...state, goodSince: null, lastAt: sample.at }, event: null };
  }
  const seen = { ...state, lastAt: sample.at };
  return state.phase === 'raised' ? whileRaised(seen, sample, delays) : whileQuiet(seen, sample, delays);
}

function whileQuiet(state: RuleState, sample: RuleSample, delays: RuleDelays) {
  if (sample.status !== 'bad') return { state: { ...NORMAL, lastAt: sample.at }, event: null };
  const since = state.since ?? sample.at;
  const pending: RuleState = {
    ...state,
    phase: 'pending',
    since,
    severity: sample.severity,
    value: sample.value,
    worst: worstOf(state.worst, sample),
  };
  const delay = sample.severity === 'critical' ? Math.min(delays.on, delays.onCritical) : delays.on;
  if (sample.at - since < delay) return { state: pending, event: null };
  return {
    state: { ...pending, phase: 'raised' as const },
    event: { what: 'raised' as const, at: sample.at },
  };
}

function whileRaised(state: RuleState, sample: RuleSample, delays: RuleDelays) {
  if (sample.status === 'good') {
    const goodSince = state.goodSince ?? sample.at;
    if (sample.at - goodSince >= delays.off) {
      return { state: { ...NORMAL, lastAt: sample.at }, event: { what: 'cleared' as const, at: sample.at } };
    }
    return { state: { ...state, goodSince, value: sample.value }, event: null };
  }
  const rises = RANK[sample.severity] > RANK[state.severity ?? 'notice'] && sample.status === 'bad';
  return {
    state: {
      ...state,
      goodSince: null,
      value: sample.value,
      worst: worstOf(state.worst, sample),
      severity: rises ? sample.severity : state.severity,
    },
    event: rises ? { what: 'worse' as const, at: sample.at } : null,
  };
}

function worstOf(worst: number | null, { value, worse }: RuleSample): number | null {
  if (value === null || worst === null) return value ?? worst;
  return worse === 'higher' ? Math.max(worst, value) : Math.min(worst, value);
}
