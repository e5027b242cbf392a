import { randomUUID } from 'node:crypto';
import { type Holdings, roleIn } from '#shared/contract/roles';
import type { Studio } from '#shared/contract/studios';
import type { Clock } from '../../clock.js';
import type { Actor } from '../../http/actor.js';
import { ProblemError, changedMeanwhile, notFound } from '../../http/problem-error.js';
import type { StudioFacts, StudioFields, StudiosRepository } from './studios-repository.js';

export interface StudiosParts {
  readonly repository: StudiosRepository;
  readonly clock: Clock;
  /** Told after a studio was created or changed. */
  readonly changed: (studioId: string) => void;
}

/** Studios and how each is reached. */
export class Studios {
  /** Studios are never taken away, so that one seen once need not be looked up again. */
  readonly #seen = new Set<string>();

  constructor(private readonly parts: StudiosParts) {}

  /** The studios in which a person holds a role, with that role. */
  async list(person: Holdings): Promise<Studio[]> {
    const studios = await this.parts.repository.list();
    return studios.flatMap((studio) => {
      const role = roleIn(person, studio.id);
      return role === null ? [] : [{ ...studio, role }];
    });
  }

  async exists(studioId: string): Promise<boolean> {
    if (this.#seen.has(studioId)) return true;
    const exists = (await this.parts.repository.find(studioId)) !== null;
    if (exists) this.#seen.add(studioId);
    return exists;
  }

  /** @throws ProblemError bad-input when a recipient is nobody of the studio (for a new one: no owner) */
  async create(fields: StudioFields, actor: Actor): Promise<Studio> {
    const id = randomUUID();
    await this.mustBeMembers(id, fields.recipients);
    await this.parts.repository.insert(id, fields, this.line(actor, 'added', id, undefined, fields));
    this.parts.changed(id);
    return { ...(await this.get(id)), role: 'owner' };
  }

  /** @throws ProblemError bad-input when a recipient is nobody of the studio, changed-meanwhile for an old version */
  async change(
    studioId: string,
    fields: StudioFields & { readonly version: number },
    actor: Actor,
  ): Promise<Studio> {
    const { version, ...rest } = fields;
    const before = await this.get(studioId);
    await this.mustBeMembers(studioId, rest.recipients);
    const line = this.line(actor, 'changed', studioId, before, rest);
    if (!(await this.parts.repository.update(studioId, version, rest, line)))
      throw changedMeanwhile('studio');
    this.parts.changed(studioId);
    return { ...(await this.get(studioId)), role: actor.role ?? 'owner' };
  }

  private async get(studioId: string): Promise<StudioFacts> {
    const studio = await this.parts.repository.find(studioId);
    if (!studio) throw notFound('studio');
    return studio;
  }

  private async mustBeMembers(studioId: string, recipients: readonly string[]): Promise<void> {
    const members = await this.parts.repository.membersAmong(studioId, recipients);
    if (recipients.every((id) => members.has(id))) return;
    const message = 'Alerts can reach people of this studio and owners only. Choose one of them.';
    throw new ProblemError('bad-input', message, [{ path: 'recipients', message }]);
  }

  private line(actor: Actor, action: string, thingId: string, was: unknown, became: unknown) {
    const at = new Date(this.parts.clock.now());
    return { at, actor, studioId: thingId, action, thing: 'studio', thingId, was, became };
  }
}
