import { randomUUID } from 'node:crypto';
import type { DataSource, EntityManager } from 'typeorm';
import { In, IsNull } from 'typeorm';
import type { Rack } from '#shared/contract/racks';
import { RackEntity } from '../../database/entities/rack-entity.js';
import { ShelfEntity } from '../../database/entities/shelf-entity.js';
import { type AuditLine, appendAudit } from '../audit/audit-lines.js';

export interface RackFields {
  readonly name: string;
  readonly position: number;
  /** From the top; a shelf with an id is one the rack has already. */
  readonly shelves: readonly { readonly id?: string | undefined; readonly capacity: number }[];
}

/** How a change of a rack ended. */
export type RackChange =
  | { readonly kind: 'changed' }
  | { readonly kind: 'changed-meanwhile' }
  | { readonly kind: 'unknown-shelf' }
  /** Shelves to be taken away on which batches stand, by position. */
  | { readonly kind: 'shelves-in-use'; readonly positions: readonly number[] };

/** After waiting for a shelf's lock, what others have put there meanwhile must be seen. */
const EACH_READ_ANEW = 'READ COMMITTED';

/** Racks and shelves. Every read and write names the studio. */
export class RacksRepository {
  constructor(private readonly dataSource: DataSource) {}

  async list(studioIds: readonly string[]): Promise<Rack[]> {
    if (studioIds.length === 0) return [];
    const racks = await this.dataSource
      .getRepository(RackEntity)
      .find({ where: { studioId: In([...studioIds]) }, order: { position: 'ASC', name: 'ASC', id: 'ASC' } });
    return this.withShelves(racks);
  }

  async find(studioId: string, rackId: string): Promise<Rack | null> {
    const rack = await this.dataSource.getRepository(RackEntity).findOne({ where: { id: rackId, studioId } });
    return rack ? ((await this.withShelves([rack]))[0] ?? null) : null;
  }

  async insert(
    studioId: string,
    roomId: string,
    id: string,
    fields: RackFields,
    audit: AuditLine,
  ): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      const { name, position } = fields;
      await manager.insert(RackEntity, { id, studioId, roomId, name, position, version: 1 });
      await insertShelves(
        manager,
        id,
        fields.shelves.map((shelf, index) => ({ ...shelf, position: index + 1 })),
      );
      await appendAudit(manager, audit);
    });
  }

  /** Changes nothing unless the outcome is `changed`. */
  async update(
    studioId: string,
    rackId: string,
    version: number,
    fields: RackFields,
    audit: AuditLine,
  ): Promise<RackChange> {
    return this.dataSource.transaction(EACH_READ_ANEW, async (manager) => {
      // The rack's row first, then its shelves: moving a batch locks its shelf alone, so the two cannot deadlock.
      const rack = await manager.findOne(RackEntity, {
        where: { id: rackId, studioId, version },
        lock: { mode: 'pessimistic_write' },
      });
      if (!rack) return { kind: 'changed-meanwhile' };
      const present = await manager.find(ShelfEntity, {
        where: { rackId, takenAwayAt: IsNull() },
        lock: { mode: 'pessimistic_write' },
      });
      const presentIds = new Set(present.map((shelf) => shelf.id));
      const keptIds = fields.shelves.flatMap((shelf) => (shelf.id === undefined ? [] : [shelf.id]));
      if (new Set(keptIds).size !== keptIds.length || keptIds.some((id) => !presentIds.has(id)))
        return { kind: 'unknown-shelf' };
      const kept = new Set(keptIds);
      const gone = present.filter((shelf) => !kept.has(shelf.id));
      const occupied = await occupiedShelves(
        manager,
        gone.map((shelf) => shelf.id),
      );
      if (occupied.size > 0) {
        const positions = gone.filter((shelf) => occupied.has(shelf.id)).map((shelf) => shelf.position);
        return { kind: 'shelves-in-use', positions: positions.sort((a, b) => a - b) };
      }
      for (const shelf of gone)
        await manager.update(ShelfEntity, { id: shelf.id }, { takenAwayAt: audit.at });
      const wanted = fields.shelves.map((shelf, index) => ({ ...shelf, position: index + 1 }));
      for (const { id, position, capacity } of wanted)
        if (id !== undefined) await manager.update(ShelfEntity, { id, rackId }, { position, capacity });
      await insertShelves(
        manager,
        rackId,
        wanted.filter((shelf) => shelf.id === undefined),
      );
      const { name, position } = fields;
      await manager.update(RackEntity, { id: rackId, studioId }, { name, position, version: version + 1 });
      await appendAudit(manager, audit);
      return { kind: 'changed' };
    });
  }

  /** Removes a rack and its shelves; false when a batch stands or stood there, and nothing is removed then. */
  async remove(studioId: string, rackId: string, audit: AuditLine): Promise<boolean> {
    return this.dataSource.transaction(EACH_READ_ANEW, async (manager) => {
      const shelves = await manager.find(ShelfEntity, {
        where: { rackId },
        lock: { mode: 'pessimistic_write' },
      });
      const ids = shelves.map((shelf) => shelf.id);
      if (ids.length > 0) {
        const [row] = await manager.query<{ used: number | string }[]>(
          'SELECT EXISTS (SELECT 1 FROM stay WHERE shelf_id IN (?)) AS used',
          [ids],
        );
        if (Number(row?.used) === 1) return false;
      }
      await manager.delete(ShelfEntity, { rackId });
      await manager.delete(RackEntity, { id: rackId, studioId });
      await appendAudit(manager, audit);
      return true;
    });
  }

  private async withShelves(racks: readonly RackEntity[]): Promise<Rack[]> {
    const shelves = await this.dataSource.getRepository(ShelfEntity).find({
      where: { rackId: In(racks.map((rack) => rack.id)), takenAwayAt: IsNull() },
      order: { position: 'ASC' },
    });
    const byRack = new Map<string, ShelfEntity[]>();
    for (const shelf of shelves) byRack.set(shelf.rackId, [...(byRack.get(shelf.rackId) ?? []), shelf]);
    return racks.map(({ id, roomId, name, position, version }) => ({
      id,
      roomId,
      name,
      position,
      shelves: (byRack.get(id) ?? []).map((shelf) => ({
        id: shelf.id,
        position: shelf.position,
        capacity: shelf.capacity,
      })),
      version,
    }));
  }
}

async function insertShelves(
  manager: EntityManager,
  rackId: string,
  shelves: readonly { readonly position: number; readonly capacity: number }[],
): Promise<void> {
  for (const { position, capacity } of shelves)
    await manager.insert(ShelfEntity, { id: randomUUID(), rackId, position, capacity, takenAwayAt: null });
}

async function occupiedShelves(manager: EntityManager, shelfIds: readonly string[]): Promise<Set<string>> {
  if (shelfIds.length === 0) return new Set();
  const rows = await manager.query<{ shelf_id: string }[]>(
    'SELECT DISTINCT shelf_id FROM stay WHERE shelf_id IN (?) AND to_at IS NULL',
    [shelfIds],
  );
  return new Set(rows.map((row) => row.shelf_id));
}
