import { HORIZON } from '#shared/cure/forecast';
import type { Forecast } from '#shared/cure/forecast';
import { CELLS_PER_HOUR, cellStart } from '#shared/cure/grid';
import type { KineticClass } from '#shared/cure/kinetics';
import { cellsReaching, type Outlook } from '#shared/cure/outlook';
import { type ClockSums, type Doubt, readyChance, readyScore, SCORE_AT } from '#shared/cure/readiness';
import { cellReaching, type Segment } from '#shared/cure/stays';

/** Equivalent days each gate asks for at 21 °C, the fragrance load taken into account. */
export interface GateClocks {
  readonly test: number;
  readonly scent: number;
  readonly ship: number;
}

/** Where a gate stands. Times are epoch ms; null: past already, or not within the horizon of 180 days. */
export interface GateEstimate {
  readonly state: 'reached' | 'expected' | 'blocked' | 'unknown';
  readonly reachedAt: number | null;
  readonly t10: number | null;
  readonly t50: number | null;
  readonly t90: number | null;
  /** Chance that both clocks are ready now, 0–1 (the smaller of the two, an upper bound). */
  readonly chanceNow: number;
  readonly blockedBy: readonly ('re-softened' | 'no-passing-test' | 'no-readings')[];
}

interface Clock {
  readonly kinetic: KineticClass;
  readonly sums: ClockSums;
  readonly needed: number;
}

interface GateQuestion {
  readonly clocks: readonly [Clock, Clock];
  readonly segments: readonly Segment[];
  readonly outlook: Outlook;
  readonly doubt: Doubt;
  readonly blockedBy: GateEstimate['blockedBy'];
}

/** The chance is looked at once an hour, then cell by cell in the hour in which it passes the level. */
const STRIDE = CELLS_PER_HOUR;
/** What rounding may add to or take from a sum of days. */
const ROUNDING = 1e-9;

/**
 * A gate with two clocks: reached when both have gathered their days (tolerance 1e-9 d); otherwise the first forecast cells after
 * which the chance of both being ready reaches 10, 50 and 90 %.
 */
export function estimateGate(question: GateQuestion): GateEstimate {
  const { clocks, segments, outlook, doubt, blockedBy } = question;
  const ahead = clocks.map((clock) => ({ clock, forecast: outlook.forecast(clock.kinetic) }));
  const scoreAfter = (cells: number): number => {
    let lowest = Infinity;
    for (const { clock, forecast } of ahead) {
      lowest = Math.min(lowest, readyScore(gathered(clock.sums, forecast, cells), clock.needed, doubt));
    }
    return lowest;
  };
  const scoreNow = scoreAfter(0);
  const timeOf = (cells: number | null) => (cells === null ? null : cellStart(outlook.from + cells));
  // A later level is never reached before an earlier one, nor at all if that one is not.
  let from: number | null = 1;
  const first = (score: number): number | null => {
    if (scoreNow >= score) return null;
    const earliest = from === null ? null : earliestCell(ahead, score, doubt);
    from =
      from === null || earliest === null ? null : firstCellAt(scoreAfter, score, Math.max(from, earliest));
    return from;
  };
  const t10 = first(SCORE_AT.t10);
  const t50 = first(SCORE_AT.t50);
  const t90 = first(SCORE_AT.t90);
  const reached = clocks.map((clock) => cellReaching(segments, clock.kinetic, clock.needed));
  const [a, b] = reached;
  const reachedAt =
    a === null || a === undefined || b === null || b === undefined ? null : cellStart(Math.max(a, b) + 1);
  const hindered = blockedBy.length > 0 && (reachedAt !== null || blockedBy.includes('re-softened'));
  return {
    state: hindered ? 'blocked' : reachedAt !== null ? 'reached' : 'expected',
    reachedAt,
    t10: timeOf(t10),
    t50: timeOf(t50),
    t90: timeOf(t90),
    chanceNow: readyChance(scoreNow),
    blockedBy,
  };
}

function gathered(sums: ClockSums, forecast: Forecast, cells: number): ClockSums {
  return {
    days: sums.days + forecast.days(cells),
    perKelvin: sums.perKelvin + forecast.perKelvin(cells),
    perEnergy: sums.perEnergy + forecast.perEnergy(cells),
    variance: sums.variance + forecast.variance(cells),
  };
}

/**
 * Forecast cells before which a score cannot be reached: it needs ln(τ/D) ≥ score·s on both clocks, and s is never below cv_D.
 * For a negative score that says nothing, 1; null beyond the horizon.
 */
function earliestCell(
  ahead: readonly { readonly clock: Clock; readonly forecast: Forecast }[],
  score: number,
  doubt: Doubt,
): number | null {
  if (score < SCORE_AT.t50) return 1;
  let earliest = 1;
  for (const { clock, forecast } of ahead) {
    const days = clock.needed * Math.exp(Math.max(0, score) * doubt.cvD) * (1 - ROUNDING);
    const cells = cellsReaching(forecast, days - clock.sums.days);
    if (cells === null) return null;
    earliest = Math.max(earliest, cells);
  }
  return earliest;
}

/** Fewest forecast cells, from `from` on, after which the score is reached; null beyond the horizon. */
function firstCellAt(scoreAfter: (cells: number) => number, score: number, from: number): number | null {
  let before = from - 1;
  for (let cells = from; cells <= HORIZON; cells += STRIDE) {
    if (scoreAfter(cells) >= score) {
      let first = before + 1;
      while (scoreAfter(first) < score) first++;
      return first;
    }
    before = cells;
  }
  return null;
}
