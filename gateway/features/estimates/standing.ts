import type { BatchCard, GateView } from '#shared/contract/batches';
import type { WaxFamilyName } from '#shared/cure/wax-families';
import { HORIZON } from '#shared/cure/forecast';
import { CELLS_PER_DAY, CELLS_PER_HOUR, cellOf } from '#shared/cure/grid';
import { type CureKinetics, hardeningClass, loadFactor, rate } from '#shared/cure/kinetics';
import type { RoomHistories } from '../../history/room-histories.js';
import type { BatchFacts } from './batch-facts-repository.js';
import type { Estimates } from './estimates.js';

/** A batch as an alert about its room speaks of it. */
export interface StandingBatch {
  readonly id: string;
  readonly code: string;
  readonly waxFamily: WaxFamilyName;
  readonly frosting: CureKinetics['frosting'];
  /** Temperature above which this wax tends to frost, °C; null for waxes that do not. */
  readonly frostingFrom: number | null;
  /** Rack and shelf in words. */
  readonly shelf: string;
  /**
   * Days by which its next gate is expected later than it would be at 21 °C all along; negative: earlier. Counts what has
   * happened and what the room's usual days promise. Null without readings or when both gates are behind it.
   */
  readonly slipDays: number | null;
  /** Days by which that gate would come later than at 21 °C from now on, should the room stay at the given temperature. */
  readonly slipIfItStaysDays: number | null;
}

const DAY_MS = 86_400_000;

/** What stands in a room and what the room does to it. */
export class Standing {
  constructor(
    private readonly estimates: Pick<Estimates, 'floor' | 'cards'>,
    private readonly histories: Pick<RoomHistories, 'peek' | 'end'>,
  ) {}

  /** Curing batches of a room. @param celsius the room's temperature now, for what would happen should it stay so */
  inRoom(roomId: string, celsius: number | null = null): StandingBatch[] {
    const batches = this.estimates.floor.standing(roomId);
    const cards = new Map(
      this.estimates
        .cards(
          batches.map(({ id }) => id),
          false,
        )
        .map((card) => [card.id, card]),
    );
    return batches.map((facts) => {
      const stay = facts.stays.at(-1);
      const { kinetics, family } = facts.design;
      const card = cards.get(facts.id);
      return {
        id: facts.id,
        code: facts.code,
        waxFamily: family,
        frosting: kinetics.frosting,
        frostingFrom: kinetics.frosting === 'no' ? null : kinetics.frostingFrom,
        shelf: stay ? `${stay.rackName}, shelf ${stay.shelfPosition}` : '',
        slipDays: card ? this.#slip(facts, card) : null,
        slipIfItStaysDays: card && celsius !== null ? slipAt(facts, card, celsius) : null,
      };
    });
  }

  /** The lowest temperature at which something in the room frosts or the room itself is too warm, °C; null for no such limit. */
  heatLimit(roomId: string, ownLimit: number | null): number | null {
    const limits = this.estimates.floor
      .standing(roomId)
      .map(({ design }) => (design.kinetics.frosting === 'no' ? null : design.kinetics.frostingFrom));
    const known = [ownLimit, ...limits].filter((limit) => limit !== null);
    return known.length === 0 ? null : Math.min(...known);
  }

  /**
   * Hours by which the dates of what stands in a room slipped in the last 24 hours: calendar hours less hours of cure age there,
   * the mean over the batches; 0 for an empty or never measured room. Positive is later.
   */
  slippedHours(roomId: string): number {
    const history = this.histories.peek(roomId);
    if (!history?.known) return 0;
    const { end } = this.histories;
    const slips = this.estimates.floor.standing(roomId).flatMap((facts) => {
      const from = Math.max(
        end - CELLS_PER_DAY,
        cellOf(facts.stays.at(-1)?.from ?? Infinity),
        history.origin,
      );
      if (!(from < end)) return [];
      const { days } = history.sums(hardeningClass(facts.design.kinetics), from, end);
      return [(end - from) / CELLS_PER_HOUR - days * 24];
    });
    return slips.length === 0 ? 0 : slips.reduce((sum, hours) => sum + hours, 0) / slips.length;
  }

  #slip(facts: BatchFacts, card: BatchCard): number | null {
    const next = nextGate(facts, card);
    if (next === null) return null;
    const now = this.histories.end * (DAY_MS / CELLS_PER_DAY);
    // Beyond the horizon the date is not known: the slip is at least this.
    const expected =
      next.gate.t50 === null ? now + HORIZON * (DAY_MS / CELLS_PER_DAY) : Date.parse(next.gate.t50);
    const date = next.gate.t50 === null && next.gate.chanceNow >= 0.5 ? now : expected;
    return (date - facts.pouredAt) / DAY_MS - next.days;
  }
}

/** The gate a batch waits for and its days at 21 °C; null when it waits for none, or nothing is known. */
function nextGate(facts: BatchFacts, card: BatchCard): { gate: GateView; days: number } | null {
  const { kinetics, loadPercentOfWax } = facts.design;
  const factor = loadFactor(kinetics, loadPercentOfWax);
  const test = factor * Math.max(kinetics.testDays, kinetics.scentDays);
  const ship = factor * Math.max(kinetics.shipDays, kinetics.scentDays);
  const waits = (gate: GateView) => gate.state !== 'unknown' && gate.reachedAt === null;
  if (waits(card.wickTest)) return { gate: card.wickTest, days: test };
  return waits(card.ship) ? { gate: card.ship, days: ship } : null;
}

function slipAt(facts: BatchFacts, card: BatchCard, celsius: number): number | null {
  const next = nextGate(facts, card);
  if (next === null || card.cureAgeDays === null) return null;
  const left = Math.max(0, next.days - card.cureAgeDays);
  const pace = rate(celsius, hardeningClass(facts.design.kinetics));
  // Wax that softens again does not cure at all: no number of days says how late it is.
  return pace === 0 ? null : left * (1 / pace - 1);
}
