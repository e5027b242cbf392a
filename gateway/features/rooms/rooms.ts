import { randomUUID } from 'node:crypto';
import type { Room } from '#shared/contract/rooms';
import type { Clock } from '../../clock.js';
import type { Actor } from '../../http/actor.js';
import { ProblemError, changedMeanwhile, notFound } from '../../http/problem-error.js';
import type { RoomFields, RoomsRepository } from './rooms-repository.js';

/** Rooms and their limits. */
export class Rooms {
  constructor(
    private readonly repository: RoomsRepository,
    private readonly clock: Clock,
    /** Told after a room of a studio was added, changed or removed. */
    private readonly changed: (studioId: string, roomId: string) => void,
  ) {}

  list(studioId: string): Promise<Room[]> {
    return this.repository.list(studioId);
  }

  /** @throws ProblemError not-found for a room of another studio */
  async get(studioId: string, roomId: string): Promise<Room> {
    const room = await this.repository.find(studioId, roomId);
    if (!room) throw notFound('room');
    return room;
  }

  async create(studioId: string, fields: RoomFields, actor: Actor): Promise<Room> {
    const id = randomUUID();
    await this.repository.insert(
      studioId,
      id,
      fields,
      this.line(actor, studioId, 'added', id, undefined, fields),
    );
    this.changed(studioId, id);
    return this.get(studioId, id);
  }

  /** @throws ProblemError changed-meanwhile when the version is not the current one */
  async change(
    studioId: string,
    roomId: string,
    fields: RoomFields & { version: number },
    actor: Actor,
  ): Promise<Room> {
    const { version, ...rest } = fields;
    const before = await this.get(studioId, roomId);
    const line = this.line(actor, studioId, 'changed', roomId, before, rest);
    if (!(await this.repository.update(studioId, roomId, version, rest, line)))
      throw changedMeanwhile('room');
    this.changed(studioId, roomId);
    return this.get(studioId, roomId);
  }

  /** @throws ProblemError conflict when the room has racks, sensors or a past */
  async remove(studioId: string, roomId: string, actor: Actor): Promise<void> {
    const room = await this.get(studioId, roomId);
    if (await this.repository.inUse(roomId)) {
      throw new ProblemError(
        'conflict',
        `${room.name} has racks, sensors or batches that stood there. Remove its racks and sensors first; a room with a past stays.`,
      );
    }
    await this.repository.remove(
      studioId,
      roomId,
      this.line(actor, studioId, 'removed', roomId, room, undefined),
    );
    this.changed(studioId, roomId);
  }

  private line(
    actor: Actor,
    studioId: string,
    action: string,
    thingId: string,
    was: unknown,
    became: unknown,
  ) {
    return { at: new Date(this.clock.now()), actor, studioId, action, thing: 'room', thingId, was, became };
  }
}
