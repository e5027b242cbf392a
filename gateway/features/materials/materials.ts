import { randomUUID } from 'node:crypto';
import type { Design, Fragrance, Wax } from '#shared/contract/materials';
import { STARTING_GUESS, WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';
import type { Clock } from '../../clock.js';
import type { Actor } from '../../http/actor.js';
import { ProblemError, changedMeanwhile, notFound } from '../../http/problem-error.js';
import type { DesignFields, FragranceFields, MaterialsRepository } from './materials-repository.js';

/** Waxes with their cure numbers, fragrance oils, and the designs made of them. */
export class Materials {
  constructor(
    private readonly repository: MaterialsRepository,
    private readonly clock: Clock,
    /** Told after the cure numbers of a wax changed: every estimate on it must be made anew. */
    private readonly waxChanged: (waxId: string) => Promise<void>,
  ) {}

  waxes(): Promise<Wax[]> {
    return this.repository.waxes();
  }

  fragrances(): Promise<Fragrance[]> {
    return this.repository.fragrances();
  }

  designs(): Promise<Design[]> {
    return this.repository.designs();
  }

  /** Adds a wax; its cure numbers start from its family and are marked as a guess. */
  async createWax(fields: Pick<Wax, 'name' | 'family'>, actor: Actor): Promise<Wax> {
    const family = WAX_FAMILY_DEFAULTS[fields.family];
    const wax: Wax = {
      id: randomUUID(),
      ...fields,
      kinetics: family.kinetics,
      pourLow: family.pour[0],
      pourHigh: family.pour[1],
      provenance: STARTING_GUESS,
      version: 1,
    };
    await this.repository.insertWax(wax, this.line(actor, 'added', 'wax', wax.id, undefined, wax));
    return wax;
  }

  /**
   * Changes the cure numbers of a wax and says where they come from.
   * @throws ProblemError not-found, changed-meanwhile, or bad-input for numbers that contradict each other
   */
  async changeWax(
    waxId: string,
    fields: Pick<Wax, 'name' | 'kinetics' | 'provenance' | 'version'>,
    actor: Actor,
  ): Promise<Wax> {
    const { version, ...rest } = fields;
    checkKinetics(rest.kinetics);
    const before = await this.wax(waxId);
    const line = this.line(actor, 'changed', 'wax', waxId, before, rest);
    if (!(await this.repository.updateWax(waxId, version, rest, line))) throw changedMeanwhile('wax');
    await this.waxChanged(waxId);
    return this.wax(waxId);
  }

  async createFragrance(fields: FragranceFields, actor: Actor): Promise<Fragrance> {
    const id = randomUUID();
    await this.repository.insertFragrance(
      id,
      fields,
      this.line(actor, 'added', 'fragrance', id, undefined, fields),
    );
    return { id, ...fields };
  }

  /** @throws ProblemError bad-input when the wax or the fragrance does not exist */
  async createDesign(fields: DesignFields, actor: Actor): Promise<Design> {
    const known = await this.repository.known(fields.waxId, fields.fragranceId);
    if (!known.wax) throw badField('waxId', 'Choose a wax from the list.');
    if (!known.fragrance) throw badField('fragranceId', 'Choose a fragrance oil from the list.');
    if (fields.fragranceId === null && fields.loadPercentOfWax > 0)
      throw badField('fragranceId', 'Choose the fragrance oil this load is of, or set the load to 0 %.');
    const id = randomUUID();
    await this.repository.insertDesign(
      id,
      fields,
      this.line(actor, 'added', 'design', id, undefined, fields),
    );
    const [design] = await this.repository.designs(id);
    if (!design) throw notFound('design');
    return design;
  }

  private async wax(id: string): Promise<Wax> {
    const wax = await this.repository.wax(id);
    if (!wax) throw new ProblemError('not-found', 'This wax does not exist.');
    return wax;
  }

  private line(actor: Actor, action: string, thing: string, thingId: string, was: unknown, became: unknown) {
    return { at: new Date(this.clock.now()), actor, studioId: null, action, thing, thingId, was, became };
  }
}

function checkKinetics({ capC, softC, frosting, frostingFrom }: Wax['kinetics']): void {
  if (capC >= softC)
    throw badField('kinetics.capC', 'The temperature above which nothing cures faster lies below softening.');
  if (frosting !== 'no' && frostingFrom === null)
    throw badField('kinetics.frostingFrom', 'A wax that frosts needs the temperature it frosts from.');
}

function badField(path: string, message: string): ProblemError {
  return new ProblemError('bad-input', message, [{ path, message }]);
}
