import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { NORMAL, type RuleEvent, type RuleSample, type RuleState, stepRule } from './rule-machine.js';

const MINUTE = 60_000;
const DELAYS = { on: 15 * MINUTE, onCritical: 5 * MINUTE, off: 15 * MINUTE };
const LIMIT = 25;
const DEADBAND = 0.5;

/** A room's temperature against a limit with a deadband. */
const sampleAt = (minute: number, celsius: number | null): RuleSample => ({
  at: minute * MINUTE,
  status:
    celsius === null ? 'no-data' : celsius > LIMIT ? 'bad' : celsius <= LIMIT - DEADBAND ? 'good' : 'between',
  severity: celsius !== null && celsius >= LIMIT + 3 ? 'critical' : 'warning',
  value: celsius,
  worse: 'higher',
});

function runThrough(samples: readonly RuleSample[], from: RuleState = NORMAL) {
  const events: RuleEvent[] = [];
  let state = from;
  for (const sample of samples) {
    const step = stepRule(state, sample, DELAYS);
    state = step.state;
    if (step.event) events.push(step.event);
  }
  return { state, events };
}

const courses = fc.array(fc.option(fc.double({ min: 22, max: 29, noNaN: true }), { freq: 8 }), {
  minLength: 1,
  maxLength: 200,
});
const samplesOf = (course: readonly (number | null)[]) =>
  course.map((celsius, minute) => sampleAt(minute * 5, celsius));

describe('rule machine', () => {
  it('raises after the delay, keeps the worst, clears after the delay', () => {
    const warm = [24, 26, 26.4, 26.1, 26.2, 26.3].map((celsius, index) => sampleAt(index * 5, celsius));
    const first = runThrough(warm);
    expect(first.events).toEqual([{ what: 'raised', at: 20 * MINUTE }]);
    expect(first.state).toMatchObject({ phase: 'raised', since: 5 * MINUTE, worst: 26.4 });
    const cool = [24.8, 24.4, 24.3, 24.2, 24.1].map((celsius, index) => sampleAt(30 + index * 5, celsius));
    expect(runThrough(cool, first.state).events).toEqual([{ what: 'cleared', at: 50 * MINUTE }]);
  });

  it('raises sooner when it is critical, and tells of a rise', () => {
    const events = runThrough([28, 28.5, 28.2].map((celsius, index) => sampleAt(index * 5, celsius))).events;
    expect(events).toEqual([{ what: 'raised', at: 5 * MINUTE }]);
    const rising = runThrough(
      [26, 26, 26, 26, 28.4, 28.6].map((celsius, index) => sampleAt(index * 5, celsius)),
    ).events;
    expect(rising.map(({ what }) => what)).toEqual(['raised', 'worse']);
  });

  it('a short excursion is nothing', () => {
    expect(
      runThrough([24, 26, 24, 26, 24].map((celsius, index) => sampleAt(index * 10, celsius))).events,
    ).toEqual([]);
  });

  it('every raise has one clear or is still open, and no two raises follow each other', () => {
    fc.assert(
      fc.property(courses, (course) => {
        const { state, events } = runThrough(samplesOf(course));
        const turns = events.filter(({ what }) => what !== 'worse').map(({ what }) => what);
        turns.forEach((what, index) => expect(what).toBe(index % 2 === 0 ? 'raised' : 'cleared'));
        expect(turns.length % 2 === 1).toBe(state.phase === 'raised');
      }),
    );
  });

  it('noise within the deadband raises at most once', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: LIMIT - DEADBAND + 0.01, max: LIMIT + 0.5, noNaN: true }), {
          maxLength: 200,
        }),
        (course) => {
          const raises = runThrough(samplesOf(course)).events.filter(({ what }) => what === 'raised');
          expect(raises.length).toBeLessThanOrEqual(1);
        },
      ),
    );
  });

  it('silence never raises and never clears', () => {
    fc.assert(
      fc.property(courses, fc.integer({ min: 1, max: 100 }), (course, silence) => {
        const before = runThrough(samplesOf(course));
        const quiet = Array.from({ length: silence }, (_, index) =>
          sampleAt(course.length * 5 + index * 5, null),
        );
        const after = runThrough(quiet, before.state);
        expect(after.events).toEqual([]);
        expect(after.state.phase).toBe(before.state.phase);
      }),
    );
  });

  it('late samples, in whatever order, change nothing', () => {
    fc.assert(
      fc.property(courses, fc.array(fc.nat({ max: 199 }), { maxLength: 30 }), (course, late) => {
        const samples = samplesOf(course);
        const once = runThrough(samples);
        const again = runThrough([...samples, ...late.map((index) => samples[index % samples.length]!)]);
        expect(again).toEqual(once);
      }),
    );
  });

  it('a restart in the middle is no event: the state survives as text', () => {
    fc.assert(
      fc.property(courses, fc.nat({ max: 199 }), (course, cut) => {
        const samples = samplesOf(course);
        const at = cut % samples.length;
        const whole = runThrough(samples);
        const first = runThrough(samples.slice(0, at));
        const stored =
          first.state.lastAt === -Infinity ? NORMAL : (JSON.parse(JSON.stringify(first.state)) as RuleState);
        const second = runThrough(samples.slice(at), stored);
        expect([...first.events, ...second.events]).toEqual(whole.events);
        expect(second.state).toEqual(whole.state);
      }),
    );
  });
});
