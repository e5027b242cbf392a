import type { BatchCycles } from '#shared/cure/cycles';
import type { BatchToEstimate } from '#shared/cure/estimate';
import type { BatchFacts } from './batch-facts-repository.js';

/** The facts of a batch as they were at an instant (epoch ms): later moves and a later end have not happened. */
export function factsAt(facts: BatchFacts, instant: number): BatchFacts {
  const ended = facts.endedAt !== null && facts.endedAt <= instant;
  return {
    ...facts,
    status: ended ? facts.status : 'curing',
    endedAt: ended ? facts.endedAt : null,
    stays: facts.stays
      .filter((stay) => stay.from <= instant)
      .map((stay) => ({ ...stay, to: stay.to !== null && stay.to > instant ? null : stay.to })),
  };
}

/** What the cure engine is asked about a batch at an instant; tests signed later do not count yet. */
export function questionAbout(facts: BatchFacts, instant: number, cycles: BatchCycles): BatchToEstimate {
  const { design } = facts;
  const testsSoFar = design.tests.filter((test) => test.at <= instant);
  const ownTest = testsSoFar.filter((test) => test.batchId === facts.id).at(-1);
  return {
    pouredAt: facts.pouredAt,
    stays: facts.stays,
    kinetics: design.kinetics,
    loadPercentOfWax: design.loadPercentOfWax,
    // A failed test is repeated anyway; only a passed one can grow old.
    lastTest: ownTest?.passed ? { at: ownTest.at, hardening: ownTest.hardeningAtTest } : null,
    designPassed: testsSoFar.at(-1)?.passed ?? false,
    cycles,
  };
}
