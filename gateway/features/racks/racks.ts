import { randomUUID } from 'node:crypto';
import type { Rack } from '#shared/contract/racks';
import type { Clock } from '../../clock.js';
import type { Actor } from '../../http/actor.js';
import { ProblemError, changedMeanwhile, notFound } from '../../http/problem-error.js';
import type { RackFields, RacksRepository } from './racks-repository.js';

/** What racks need to know of rooms. @throws ProblemError not-found for a room of another studio */
export interface RoomOfStudio {
  get(studioId: string, roomId: string): Promise<{ readonly name: string }>;
}

/** Racks and their shelves. */
export class Racks {
  constructor(
    private readonly repository: RacksRepository,
    private readonly rooms: RoomOfStudio,
    private readonly clock: Clock,
    /** Told after a rack of a room was added, changed or removed. */
    private readonly changed: (studioId: string, roomId: string) => void,
  ) {}

  list(studioId: string): Promise<Rack[]> {
    return this.repository.list([studioId]);
  }

  /** Racks of several studios at once, in the order in which they stand. */
  listAll(studioIds: readonly string[]): Promise<Rack[]> {
    return this.repository.list(studioIds);
  }

  /** @throws ProblemError not-found for a room of another studio */
  async create(studioId: string, roomId: string, fields: RackFields, actor: Actor): Promise<Rack> {
    await this.rooms.get(studioId, roomId);
    const fresh = { ...fields, shelves: fields.shelves.map(({ capacity }) => ({ capacity })) };
    const id = randomUUID();
    const line = this.line(actor, studioId, 'added', id, undefined, { roomId, ...fresh });
    await this.repository.insert(studioId, roomId, id, fresh, line);
    this.changed(studioId, roomId);
    return this.get(studioId, id);
  }

  /**
   * @throws ProblemError not-found for a rack of another studio, changed-meanwhile for an old version,
   * conflict when a shelf to be taken away holds a batch, bad-input for a shelf that is not the rack's
   */
  async change(
    studioId: string,
    rackId: string,
    fields: RackFields & { readonly version: number },
    actor: Actor,
  ): Promise<Rack> {
    const { version, ...rest } = fields;
    const before = await this.get(studioId, rackId);
    const line = this.line(actor, studioId, 'changed', rackId, before, rest);
    const outcome = await this.repository.update(studioId, rackId, version, rest, line);
    switch (outcome.kind) {
      case 'changed-meanwhile':
        throw changedMeanwhile('rack');
      case 'unknown-shelf':
        throw new ProblemError('bad-input', `${before.name} has no such shelf. Load the rack again.`, [
          { path: 'shelves', message: 'A shelf that is not on this rack.' },
        ]);
      case 'shelves-in-use':
        throw new ProblemError(
          'conflict',
          `Batches stand on ${shelvesInWords(outcome.positions)} of ${before.name}. Move them first, then take the shelf away.`,
        );
      case 'changed':
        this.changed(studioId, before.roomId);
        return this.get(studioId, rackId);
    }
  }

  /** @throws ProblemError conflict when a batch stands or once stood on the rack */
  async remove(studioId: string, rackId: string, actor: Actor): Promise<void> {
    const rack = await this.get(studioId, rackId);
    const line = this.line(actor, studioId, 'removed', rackId, rack, undefined);
    if (!(await this.repository.remove(studioId, rackId, line))) {
      throw new ProblemError(
        'conflict',
        `Batches stand or stood on ${rack.name}; a rack with a past stays. Take its empty shelves away instead.`,
      );
    }
    this.changed(studioId, rack.roomId);
  }

  private async get(studioId: string, rackId: string): Promise<Rack> {
    const rack = await this.repository.find(studioId, rackId);
    if (!rack) throw notFound('rack');
    return rack;
  }

  private line(
    actor: Actor,
    studioId: string,
    action: string,
    thingId: string,
    was: unknown,
    became: unknown,
  ) {
    return { at: new Date(this.clock.now()), actor, studioId, action, thing: 'rack', thingId, was, became };
  }
}

function shelvesInWords(positions: readonly number[]): string {
  return positions.length === 1
    ? `shelf ${positions[0] ?? ''}`
    : `shelves ${positions.slice(0, -1).join(', ')} and ${positions.at(-1) ?? ''}`;
}
