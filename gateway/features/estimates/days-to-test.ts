import { cellOf, cellStart } from '#shared/cure/grid';
import { hardeningClass, loadFactor, scentClass } from '#shared/cure/kinetics';
import type { RoomHistory } from '#shared/cure/room-history';
import { cellReaching, segmentsOf } from '#shared/cure/stays';
import type { WaxFamilyName } from '#shared/cure/wax-families';
import type { BatchFacts } from './batch-facts-repository.js';

/** How long a batch took to its wick-test gate. */
export interface DaysToTest {
  readonly studioId: string;
  readonly family: WaxFamilyName;
  /** When the gate was reached, epoch ms. */
  readonly reachedAt: number;
  /** Calendar days from the pour. */
  readonly days: number;
  /** Days it takes at 21 °C, the fragrance load taken into account. */
  readonly nominalDays: number;
}

/** Null while the gate has not been reached (up to the batch's end), or without readings. */
export function daysToTest(
  facts: BatchFacts,
  historyOf: (roomId: string) => RoomHistory | null,
  endCell: number,
): DaysToTest | null {
  const { kinetics, loadPercentOfWax, family } = facts.design;
  const until = facts.endedAt === null ? endCell : Math.min(cellOf(facts.endedAt), endCell);
  const segments = segmentsOf(facts.pouredAt, facts.stays, historyOf, until);
  if (segments === null) return null;
  const factor = loadFactor(kinetics, loadPercentOfWax);
  const hard = cellReaching(segments, hardeningClass(kinetics), kinetics.testDays * factor);
  const scent = cellReaching(segments, scentClass(kinetics), kinetics.scentDays * factor);
  if (hard === null || scent === null) return null;
  const reachedAt = cellStart(Math.max(hard, scent) + 1);
  return {
    studioId: facts.studioId,
    family,
    reachedAt,
    days: (reachedAt - facts.pouredAt) / 86_400_000,
    nominalDays: Math.max(kinetics.testDays, kinetics.scentDays) * factor,
  };
}
