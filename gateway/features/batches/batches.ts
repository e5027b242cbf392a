import { randomUUID } from 'node:crypto';
import type { BatchCard, BatchPage, CurvePoint, batchRoutes } from '#shared/contract/batches';
import { may, type Role } from '#shared/contract/roles';
import type { BodyOf, QueryOf } from '#shared/contract/route';
import { loadOfMix, pourGrams } from '#shared/cure/load';
import type { Clock } from '../../clock.js';
import type { Actor } from '../../http/actor.js';
import { ProblemError, changedMeanwhile, notFound } from '../../http/problem-error.js';
import type { EstimatedBatch, Estimates } from '../estimates/estimates.js';
import type { BatchDetails, BatchListRepository } from './batch-list-repository.js';
import type { BatchesRepository, Outcome } from './batches-repository.js';
import { checkedInstant, fieldProblem, refusalInWords } from './refusals.js';

export interface BatchesParts {
  readonly repository: BatchesRepository;
  readonly lists: BatchListRepository;
  readonly estimates: Estimates;
  readonly clock: Clock;
}

/** The life of a batch: poured, placed, moved, tested, dispatched or scrapped. */
export class Batches {
  constructor(private readonly parts: BatchesParts) {}

  /** A page of a studio's batches, newest pour first. */
  async list(
    studioId: string,
    query: QueryOf<typeof batchRoutes.list>,
    role: Role | null,
  ): Promise<{ total: number; batches: BatchCard[] }> {
    const recipes = may(role, 'batches.recipe');
    const { search, status, offset, limit } = query;
    const { total, ids } = await this.parts.lists.list(studioId, { search, status, offset, limit, recipes });
    return { total, batches: await this.parts.estimates.cardsOfAny(ids, !recipes) };
  }

  /** @throws ProblemError not-found for a batch of another studio */
  async get(
    studioId: string,
    batchId: string,
    at: string | undefined,
    role: Role | null,
  ): Promise<BatchPage> {
    const recipes = may(role, 'batches.recipe');
    const instant = at === undefined ? null : Date.parse(at);
    const [estimated, details] = await Promise.all([
      this.parts.estimates.page(studioId, batchId, instant, !recipes),
      this.parts.lists.details(studioId, batchId),
    ]);
    if (!estimated || !details) throw notFound('batch');
    return pageOf(estimated, details, recipes);
  }

  /** @throws ProblemError not-found for a batch of another studio */
  async curve(studioId: string, batchId: string): Promise<{ points: CurvePoint[] }> {
    const points = await this.parts.estimates.curve(studioId, batchId);
    if (!points) throw notFound('batch');
    return { points };
  }

  /**
   * Starts a batch. Grams come from the design's fill and its load in per cent of the wax.
   * @throws ProblemError bad-input (design, time), conflict (code), not-found or shelf-full (shelf)
   */
  async pour(studioId: string, fields: BodyOf<typeof batchRoutes.pour>, actor: Actor): Promise<BatchPage> {
    const pouredAt = checkedInstant(fields.pouredAt, this.parts.clock.now(), 'pouredAt');
    const design = await this.parts.lists.design(fields.designId);
    if (!design) throw fieldProblem('designId', 'Choose a design from the list.');
    const grams = pourGrams(design.fillGrams, fields.vessels, design.loadPercentOfWax);
    const id = randomUUID();
    const { code, designId, vessels, pourCelsius, notes, shelfId, overfill } = fields;
    const outcome = await this.parts.repository.pour(
      studioId,
      {
        id,
        code: code ?? null,
        designId,
        vessels,
        vesselDiameterMm: design.vesselDiameterMm,
        pouredAt: new Date(pouredAt),
        pouredBy: actor.personId,
        pourCelsius,
        waxGrams: grams.wax,
        fragranceGrams: grams.fragrance,
        notes,
      },
      shelfId === null ? null : { shelfId, at: pouredAt, overfill },
      (given) => this.line(actor, studioId, 'poured', id, undefined, { ...fields, code: given }),
    );
    return this.#settle(outcome, studioId, id, actor);
  }

  /**
   * Puts a batch onto a shelf, now or at an earlier instant back to when it came to its present shelf.
   * @throws ProblemError changed-meanwhile, not-found, shelf-full, conflict, bad-input
   */
  async move(
    studioId: string,
    batchId: string,
    { version, shelfId, at, overfill }: BodyOf<typeof batchRoutes.move>,
    actor: Actor,
  ): Promise<BatchPage> {
    const before = await this.#owned(studioId, batchId);
    const instant = this.#instant(at);
    const was = before.facts.stays.at(-1) ?? null;
    const line = this.line(
      actor,
      studioId,
      'moved',
      batchId,
      { shelfId: was?.to === null ? was.shelfId : null },
      { shelfId, at: new Date(instant), overfill },
    );
    const placing = { shelfId, at: instant, overfill };
    return this.#settle(
      await this.parts.repository.move(studioId, batchId, version, placing, line),
      studioId,
      batchId,
      actor,
    );
  }

  /**
   * Dispatches or scraps a batch. Dispatch before the ship gate needs a reason, which goes into the audit trail.
   * @throws ProblemError not-ready, changed-meanwhile, not-found, conflict, bad-input
   */
  async end(
    studioId: string,
    batchId: string,
    { version, as, at, reason }: BodyOf<typeof batchRoutes.end>,
    actor: Actor,
  ): Promise<BatchPage> {
    const instant = this.#instant(at);
    const before = await this.#owned(studioId, batchId, instant);
    const { ship } = before.card;
    if (as === 'dispatched' && ship.state !== 'reached' && reason === undefined) {
      throw new ProblemError(
        'not-ready',
        `${before.card.code} ${notReadyBecause(ship)} Write a reason to dispatch it all the same.`,
      );
    }
    const line = this.line(
      actor,
      studioId,
      as,
      batchId,
      { status: 'curing', ship: ship.state, chance: ship.chanceNow },
      { status: as, at: new Date(instant), reason: reason ?? null },
    );
    return this.#settle(
      await this.parts.repository.end(studioId, batchId, version, as, new Date(instant), line),
      studioId,
      batchId,
      actor,
    );
  }

  /**
   * Records a signed verdict on the design of a batch with the hardening and cure age the batch had at the test.
   * @throws ProblemError not-found, bad-input (time), not-ready (no readings to tell the cure age from)
   */
  async recordTest(
    studioId: string,
    batchId: string,
    { at, passed, note }: BodyOf<typeof batchRoutes.recordTest>,
    actor: Actor,
  ): Promise<BatchPage> {
    const instant = checkedInstant(at, this.parts.clock.now(), 'at');
    const { facts } = await this.#owned(studioId, batchId);
    if (instant < facts.pouredAt) throw fieldProblem('at', 'This is before the batch was poured.');
    if (facts.endedAt !== null && instant > facts.endedAt)
      throw fieldProblem('at', 'The batch had left its shelf by then; its cure age is not known.');
    const age = await this.parts.estimates.ageAt(batchId, instant);
    if (!age) {
      throw new ProblemError(
        'not-ready',
        'Nothing was measured where this batch stood, so its cure age at the test is not known. Place it in a room with a sensor first.',
      );
    }
    const verdict = {
      id: randomUUID(),
      batchId,
      designId: facts.design.id,
      at: new Date(instant),
      passed,
      note,
      signedBy: actor.personId,
      hardeningAtTest: age.hardening,
      cureAgeDays: age.cureAgeDays,
    };
    const line = this.line(actor, studioId, 'signed a wick test', batchId, undefined, verdict);
    await this.parts.repository.insertVerdict(verdict, line);
    await this.parts.estimates.madeOfTouched({ designId: facts.design.id });
    return this.get(studioId, batchId, undefined, actor.role);
  }

  async #owned(studioId: string, batchId: string, at: number | null = null): Promise<EstimatedBatch> {
    const batch = await this.parts.estimates.page(studioId, batchId, at, false);
    if (!batch) throw notFound('batch');
    return batch;
  }

  #instant(at: string | undefined): number {
    const now = this.parts.clock.now();
    return at === undefined ? now : checkedInstant(at, now, 'at');
  }

  async #settle(outcome: Outcome, studioId: string, batchId: string, actor: Actor): Promise<BatchPage> {
    if (outcome.kind === 'changed-meanwhile') throw changedMeanwhile('batch');
    if (outcome.kind !== 'done') throw refusalInWords(outcome);
    await this.parts.estimates.batchesTouched(studioId, [batchId]);
    return this.get(studioId, batchId, undefined, actor.role);
  }

  private line(
    actor: Actor,
    studioId: string,
    action: string,
    thingId: string,
    was: unknown,
    became: unknown,
  ) {
    const at = new Date(this.parts.clock.now());
    return { at, actor, studioId, action, thing: 'batch', thingId, was, became };
  }
}

function notReadyBecause({ state, blockedBy }: BatchCard['ship']): string {
  if (blockedBy.includes('re-softened')) return 'got so warm that its wax softened again: check it by hand.';
  if (state === 'blocked') return 'has cured long enough, but its design has no passing burn test.';
  return state === 'unknown' ? 'has no readings to tell its cure from.' : 'has not reached its ship gate.';
}

function pageOf(batch: EstimatedBatch, details: BatchDetails, recipes: boolean): BatchPage {
  const { facts, card, estimate, shifts, instant } = batch;
  const { designId, waxName, fragranceName, loadPercentOfWax, wick, vessel } = details;
  const { waxGrams, fragranceGrams, pourCelsius, pouredBy } = details;
  return {
    card,
    recipe: recipes
      ? {
          ...{
            designId,
            waxName,
            fragranceName,
            loadPercentOfWax,
            loadPercentOfMix: loadOfMix(loadPercentOfWax),
          },
          ...{ wick, vessel, waxGrams, fragranceGrams, pourCelsius, pouredBy },
        }
      : null,
    notes: recipes ? details.notes : '',
    stays: facts.stays.map(({ id, shelfId, roomId, roomName, rackName, shelfPosition, from, to }) => ({
      ...{ id, shelfId, roomId, roomName, rackName, shelfPosition },
      from: new Date(from).toISOString(),
      to: to === null ? null : new Date(to).toISOString(),
    })),
    estimate,
    shifts,
    verdicts: recipes
      ? details.verdicts
          .filter((verdict) => verdict.at.getTime() <= instant)
          .map((verdict) => ({ ...verdict, at: verdict.at.toISOString() }))
      : [],
  };
}
