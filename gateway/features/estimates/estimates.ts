import type { BatchCard, CurvePoint, EstimateView, Shift } from '#shared/contract/batches';
import { cureCurve } from '#shared/cure/curve';
import { BatchCycles } from '#shared/cure/cycles';
import { type Estimated, estimateBatch } from '#shared/cure/estimate';
import { CELL_MS, cellOf, cellStart } from '#shared/cure/grid';
import type { RoomHistory } from '#shared/cure/room-history';
import { shiftLedger } from '#shared/cure/shifts';
import type { BatchesChanged, LayoutChanged } from '../../announcements.js';
import type { Clock } from '../../clock.js';
import type { Feed } from '../../feed.js';
import type { HistoriesChanged, RoomHistories } from '../../history/room-histories.js';
import type { BatchFacts, BatchFactsRepository } from './batch-facts-repository.js';
import {
  cardForViewer,
  cardOf,
  curveViews,
  estimateForViewer,
  estimateView,
  shiftViews,
} from './estimate-views.js';
import { type DaysToTest, daysToTest } from './days-to-test.js';
import { factsAt, questionAbout } from './facts-at.js';
import { Floor } from './floor.js';

export interface EstimatesParts {
  readonly facts: Pick<BatchFactsRepository, 'curing' | 'some' | 'curedWithin'>;
  readonly histories: RoomHistories;
  readonly clock: Clock;
  /** Announced for every batch whose card may read otherwise than before. */
  readonly changed: Feed<BatchesChanged>;
  readonly failed: (error: unknown) => void;
}

/** A batch with its estimate at an instant. */
export interface EstimatedBatch {
  /** Epoch ms. */
  readonly instant: number;
  /** Its stays and state at the instant. */
  readonly facts: BatchFacts;
  readonly card: BatchCard;
  readonly estimate: EstimateView | null;
  readonly shifts: Shift[];
}

/**
 * Where every curing batch stands, kept in memory: the facts of the batches, the histories of their rooms and the cards made of
 * both. Cards are made when somebody asks and forgotten when their rooms' histories or their facts change.
 */
export class Estimates {
  readonly #floor = new Floor();
  readonly #cards = new Map<string, { cell: number; card: Omit<BatchCard, 'atRisk'> }>();
  readonly #cycles = new Map<string, BatchCycles>();
  /** Rooms' temperature right now, as far as it is known and fresh. */
  readonly #celsius = new Map<string, number>();
  #stopping: (() => void)[] = [];
  #reloadDue = false;
  #last: Promise<unknown> = Promise.resolve();

  constructor(private readonly parts: EstimatesParts) {}

  /** Loads every curing batch and the histories it needs, then follows what changes. */
  async start(historiesChanged: Feed<HistoriesChanged>, layout: Feed<LayoutChanged>): Promise<void> {
    this.#stopping = [
      historiesChanged.listen((changed) => this.#historiesChanged(changed)),
      layout.listen(() => this.#reloadSoon()),
    ];
    await this.#inTurn(() => this.#reload());
  }

  async stop(): Promise<void> {
    for (const stop of this.#stopping.splice(0)) stop();
    await this.settled();
  }

  /** Resolves when everything known to be due has been read. */
  async settled(): Promise<void> {
    await this.#last;
  }

  /** What stands on the shelves of every room. */
  get floor(): Pick<Floor, 'standing' | 'curingIn'> {
    return this.#floor;
  }

  /** Cards of the curing batches among these; a viewer's are without what tells of recipe and tests. */
  cards(batchIds: Iterable<string>, forViewer: boolean): BatchCard[] {
    const cards: BatchCard[] = [];
    for (const id of batchIds) {
      const facts = this.#floor.get(id);
      if (!facts) continue;
      const card = { ...this.#cardOf(facts), atRisk: this.#atRisk(facts) };
      cards.push(forViewer ? cardForViewer(card) : card);
    }
    return cards;
  }

  /** Cards of every curing batch of a studio, oldest pour first. */
  cardsOfStudio(studioId: string, forViewer: boolean): BatchCard[] {
    return this.cards(this.#floor.curingIn(studioId), forViewer);
  }

  /** Those of these batches that are no longer curing. */
  gone(batchIds: readonly string[]): string[] {
    return batchIds.filter((id) => !this.#floor.get(id));
  }

  /** Cards of any batches, ended ones as they were at their end; in the order of the ids. */
  async cardsOfAny(batchIds: readonly string[], forViewer: boolean): Promise<BatchCard[]> {
    const ended = await this.parts.facts.some(this.gone(batchIds));
    await this.#needHistoriesOf(ended);
    const found = new Map(this.cards(batchIds, forViewer).map((card) => [card.id, card]));
    for (const facts of ended) {
      const card = { ...this.#cardOf(facts), atRisk: false };
      found.set(facts.id, forViewer ? cardForViewer(card) : card);
    }
    return batchIds.flatMap((id) => found.get(id) ?? []);
  }

  /**
   * A batch of a studio with everything behind its dates, now or as it was at an earlier instant with what is known today.
   * An instant outside the batch's life is moved to its pour or its end. Null for a batch of another studio.
   */
  async page(
    studioId: string,
    batchId: string,
    at: number | null,
    forViewer: boolean,
  ): Promise<EstimatedBatch | null> {
    const [facts] = await this.parts.facts.some([batchId]);
    if (facts?.studioId !== studioId) return null;
    await this.#needHistoriesOf([facts]);
    const instant = this.#instantFor(facts, at);
    const then = factsAt(facts, instant);
    const estimated = this.#estimate(then, instant, new BatchCycles());
    const atRisk = at === null && then.status === 'curing' && this.#atRisk(then);
    const card = { ...cardOf(then, estimated), atRisk };
    const names = new Map(then.stays.map((stay) => [stay.roomId, stay.roomName]));
    const view = estimated.known ? estimateView(then, estimated) : null;
    return {
      instant,
      facts: then,
      card: forViewer ? cardForViewer(card) : card,
      estimate: view && forViewer ? estimateForViewer(view) : view,
      shifts: estimated.known
        ? shiftViews(shiftLedger(estimated.segments, facts.design.kinetics), names)
        : [],
    };
  }

  /** Cure curve from the pour to a little after the gates; empty without readings, null for a batch of another studio. */
  async curve(studioId: string, batchId: string): Promise<CurvePoint[] | null> {
    const [facts] = await this.parts.facts.some([batchId]);
    if (facts?.studioId !== studioId) return null;
    await this.#needHistoriesOf([facts]);
    const instant = this.#instantFor(facts, null);
    const question = questionAbout(facts, instant, new BatchCycles());
    const estimated = estimateBatch(question, this.#historyOf, instant);
    return estimated.known ? curveViews(cureCurve(question, estimated, this.#historyOf)) : [];
  }

  /** How long the batches of studios took whose wick-test gate was reached in a period; scrapped ones are left out. */
  async daysToTest(studioIds: readonly string[], from: number, to: number): Promise<DaysToTest[]> {
    const batches = await this.parts.facts.curedWithin(studioIds, new Date(from), new Date(to));
    await this.#needHistoriesOf(batches);
    return batches.flatMap((facts) => {
      const taken = daysToTest(facts, this.#historyOf, this.parts.histories.end);
      return taken && taken.reachedAt >= from && taken.reachedAt < to ? [taken] : [];
    });
  }

  /** Hardening and cure age of a batch at an instant, for a test's record; null without readings. */
  async ageAt(batchId: string, at: number): Promise<{ hardening: number; cureAgeDays: number } | null> {
    const [facts] = await this.parts.facts.some([batchId]);
    if (!facts) return null;
    await this.#needHistoriesOf([facts]);
    const instant = this.#instantFor(facts, at);
    const estimated = this.#estimate(factsAt(facts, instant), instant, new BatchCycles());
    if (!estimated.known) return null;
    return { hardening: estimated.estimate.hardening, cureAgeDays: estimated.estimate.hardeningDays };
  }

  /** Reads batches again after they were changed and committed, then announces them. */
  async batchesTouched(studioId: string, batchIds: readonly string[]): Promise<void> {
    await this.#inTurn(() => this.#readAgain(batchIds));
    this.parts.changed.announce({ studioId, batchIds });
  }

  async #readAgain(batchIds: readonly string[]): Promise<void> {
    const fresh = new Map((await this.parts.facts.some(batchIds)).map((facts) => [facts.id, facts]));
    await this.#needHistoriesOf([...fresh.values()].filter((facts) => facts.status === 'curing'));
    for (const id of batchIds) {
      const facts = fresh.get(id);
      this.#cards.delete(id);
      if (facts?.status === 'curing') this.#floor.put(facts);
      else {
        this.#floor.remove(id);
        this.#cycles.delete(id);
      }
    }
  }

  /** The same for every curing batch on a wax or a design; returns the studios they belong to. */
  async madeOfTouched(made: { readonly waxId?: string; readonly designId?: string }): Promise<string[]> {
    const batches = this.#floor
      .all()
      .filter(({ design }) => design.waxId === made.waxId || design.id === made.designId);
    await this.#inTurn(() => this.#readAgain(batches.map(({ id }) => id)));
    this.#announce(batches);
    return [...new Set(batches.map(({ studioId }) => studioId))];
  }

  /** Takes a room's temperature right now (null: not known or stale) and announces the batches whose risk it changed. */
  roomIsAt(roomId: string, celsius: number | null): void {
    const standing = this.#floor.standing(roomId);
    const before = new Set(standing.filter((facts) => this.#atRisk(facts)));
    if (celsius === null) this.#celsius.delete(roomId);
    else this.#celsius.set(roomId, celsius);
    this.#announce(standing.filter((facts) => this.#atRisk(facts) !== before.has(facts)));
  }

  #cardOf(facts: BatchFacts): Omit<BatchCard, 'atRisk'> {
    const { end } = this.parts.histories;
    const known = this.#cards.get(facts.id);
    if (known?.cell === end && facts.status === 'curing') return known.card;
    const instant = this.#instantFor(facts, null);
    const card = cardOf(facts, this.#estimate(facts, instant, this.#cyclesOf(facts)));
    if (facts.status === 'curing') this.#cards.set(facts.id, { cell: end, card });
    return card;
  }

  #cyclesOf(facts: BatchFacts): BatchCycles {
    if (facts.status !== 'curing') return new BatchCycles();
    let cycles = this.#cycles.get(facts.id);
    if (!cycles) {
      cycles = new BatchCycles();
      this.#cycles.set(facts.id, cycles);
    }
    return cycles;
  }

  #estimate(facts: BatchFacts, instant: number, cycles: BatchCycles): Estimated {
    return estimateBatch(questionAbout(facts, instant, cycles), this.#historyOf, instant);
  }

  /** The instant to estimate for: within the batch's life and not past the complete cells. */
  #instantFor(facts: BatchFacts, at: number | null): number {
    const { end } = this.parts.histories;
    const now = Math.min(Math.max(this.parts.clock.now(), cellStart(end)), cellStart(end) + CELL_MS - 1);
    const latest = Math.min(now, facts.endedAt ?? now);
    return Math.max(Math.min(at ?? latest, latest), Math.min(facts.pouredAt, latest));
  }

  readonly #historyOf = (roomId: string): RoomHistory | null => this.parts.histories.peek(roomId);

  async #needHistoriesOf(batches: Iterable<BatchFacts>): Promise<void> {
    const fromCells = new Map<string, number>();
    for (const { stays } of batches) {
      for (const { roomId, from } of stays)
        fromCells.set(roomId, Math.min(cellOf(from), fromCells.get(roomId) ?? Infinity));
    }
    await this.parts.histories.need(fromCells);
  }

  #atRisk(facts: BatchFacts): boolean {
    const { frosting, frostingFrom } = facts.design.kinetics;
    const roomId = facts.stays.at(-1)?.to === null ? facts.stays.at(-1)?.roomId : undefined;
    const celsius = roomId === undefined ? undefined : this.#celsius.get(roomId);
    return frosting !== 'no' && frostingFrom !== null && celsius !== undefined && celsius > frostingFrom;
  }

  #historiesChanged(changed: HistoriesChanged): void {
    const touched = this.#floor.touchedBy(changed);
    for (const { id } of touched) this.#cards.delete(id);
    this.#announce(touched);
  }

  #announce(batches: readonly BatchFacts[]): void {
    const byStudio = new Map<string, string[]>();
    for (const { studioId, id } of batches) {
      const ids = byStudio.get(studioId);
      if (ids) ids.push(id);
      else byStudio.set(studioId, [id]);
    }
    for (const [studioId, batchIds] of byStudio) this.parts.changed.announce({ studioId, batchIds });
  }

  #reloadSoon(): void {
    if (this.#reloadDue) return;
    this.#reloadDue = true;
    void this.#inTurn(() => {
      this.#reloadDue = false;
      return this.#reload();
    }).catch(this.parts.failed);
  }

  /** Reads facts one time after the other: what is read last is also what is kept. */
  #inTurn<T>(task: () => Promise<T>): Promise<T> {
    const result = this.#last.then(task);
    this.#last = result.catch(() => undefined);
    return result;
  }

  async #reload(): Promise<void> {
    const batches = await this.parts.facts.curing();
    await this.#needHistoriesOf(batches);
    for (const id of this.#floor.replace(batches)) this.#cards.delete(id);
    for (const id of this.#cards.keys()) if (!this.#floor.get(id)) this.#cards.delete(id);
    for (const id of this.#cycles.keys()) if (!this.#floor.get(id)) this.#cycles.delete(id);
  }
}
