import { randomUUID } from 'node:crypto';
import type { DataSource, EntityManager } from 'typeorm';
import { BatchEntity } from '../../database/entities/batch-entity.js';
import { BurnVerdictEntity } from '../../database/entities/burn-verdict-entity.js';
import { StayEntity } from '../../database/entities/stay-entity.js';
import { type AuditLine, appendAudit } from '../audit/audit-lines.js';
import { placesTaken } from './shelf-room.js';

export interface BatchToPour {
  readonly id: string;
  /** null: the next free code of the studio. */
  readonly code: string | null;
  readonly designId: string;
  readonly vessels: number;
  readonly vesselDiameterMm: number;
  readonly pouredAt: Date;
  readonly pouredBy: string;
  readonly pourCelsius: number | null;
  readonly waxGrams: number;
  readonly fragranceGrams: number;
  readonly notes: string;
}

/** Where a batch shall stand. */
export interface Placing {
  readonly shelfId: string;
  /** Epoch ms. */
  readonly at: number;
  readonly overfill: boolean;
}

/** Why a pour or a move was not done; nothing is changed then. */
export type Refusal =
  | { readonly kind: 'code-taken' }
  | { readonly kind: 'changed-meanwhile' }
  | { readonly kind: 'no-such-shelf' }
  | { readonly kind: 'stands-there' }
  /** Free room in vessels of 75 mm, and what is needed. */
  | { readonly kind: 'shelf-full'; readonly shelf: string; readonly free: number; readonly needed: number }
  /** The batch came to its present shelf, or was poured, only then. */
  | { readonly kind: 'too-early'; readonly since: Date }
  | { readonly kind: 'ended' };

export type Outcome = { readonly kind: 'done' } | Refusal;

/** After waiting for a shelf's lock, what others have put there meanwhile must be seen. */
const EACH_READ_ANEW = 'READ COMMITTED';

/** Batches and their stays. Every read and write names the studio. */
export class BatchesRepository {
  constructor(private readonly dataSource: DataSource) {}

  /** Starts a batch, and puts it onto a shelf if one is named. */
  async pour(
    studioId: string,
    batch: BatchToPour,
    placing: Placing | null,
    audit: (code: string) => AuditLine,
  ): Promise<Outcome> {
    try {
      return await this.dataSource.transaction(EACH_READ_ANEW, async (manager) => {
        const code = batch.code ?? (await nextCode(manager, studioId));
        const { vesselDiameterMm, ...columns } = batch;
        const needed = placesTaken(batch.vessels, vesselDiameterMm);
        const shelf = placing === null ? null : await shelfFor(manager, studioId, placing, needed);
        if (shelf && 'kind' in shelf) return shelf;
        await manager.insert(BatchEntity, {
          ...columns,
          code,
          studioId,
          status: 'curing',
          endedAt: null,
          version: 1,
        });
        if (shelf && placing) await insertStay(manager, batch.id, shelf, placing);
        await appendAudit(manager, audit(code));
        return { kind: 'done' };
      });
    } catch (error) {
      if ((error as { code?: string }).code === 'ER_DUP_ENTRY') return { kind: 'code-taken' };
      throw error;
    }
  }

  /** Ends the present stay and begins the next; a stay that would last no time is taken back. */
  async move(
    studioId: string,
    batchId: string,
    version: number,
    placing: Placing,
    audit: AuditLine,
  ): Promise<Outcome> {
    return this.#change(studioId, batchId, version, async (manager, batch) => {
      const present = await presentStay(manager, batchId);
      if (present?.shelfId === placing.shelfId) return { kind: 'stands-there' };
      const since = present?.fromAt ?? batch.pouredAt;
      if (placing.at < since.getTime()) return { kind: 'too-early', since };
      const [design] = await manager.query<{ vessel_diameter_mm: number }[]>(
        'SELECT vessel_diameter_mm FROM design WHERE id = ?',
        [batch.designId],
      );
      const needed = placesTaken(batch.vessels, design?.vessel_diameter_mm ?? 0);
      const shelf = await shelfFor(manager, studioId, placing, needed);
      if ('kind' in shelf) return shelf;
      if (present?.fromAt.getTime() === placing.at) await manager.delete(StayEntity, { id: present.id });
      else if (present) await manager.update(StayEntity, { id: present.id }, { toAt: new Date(placing.at) });
      await insertStay(manager, batchId, shelf, placing);
      await appendAudit(manager, audit);
      return { kind: 'done' };
    });
  }

  /** Takes a batch off its shelf for good. */
  async end(
    studioId: string,
    batchId: string,
    version: number,
    as: 'dispatched' | 'scrapped',
    at: Date,
    audit: AuditLine,
  ): Promise<Outcome> {
    return this.#change(studioId, batchId, version, async (manager, batch) => {
      const present = await presentStay(manager, batchId);
      const since = present?.fromAt ?? batch.pouredAt;
      if (at < since) return { kind: 'too-early', since };
      if (present) await manager.update(StayEntity, { id: present.id }, { toAt: at });
      await manager.update(BatchEntity, { id: batchId, studioId }, { status: as, endedAt: at });
      await appendAudit(manager, audit);
      return { kind: 'done' };
    });
  }

  async insertVerdict(verdict: BurnVerdictEntity, audit: AuditLine): Promise<void> {
    await this.dataSource.transaction(EACH_READ_ANEW, async (manager) => {
      await manager.insert(BurnVerdictEntity, verdict);
      await appendAudit(manager, audit);
    });
  }

  /** Runs a change on a curing batch of the given version and counts the version up if it is done. */
  async #change(
    studioId: string,
    batchId: string,
    version: number,
    change: (manager: EntityManager, batch: BatchEntity) => Promise<Outcome>,
  ): Promise<Outcome> {
    const refused = new Map<EntityManager, Refusal>();
    try {
      return await this.dataSource.transaction(EACH_READ_ANEW, async (manager) => {
        const result = await manager.update(
          BatchEntity,
          { id: batchId, studioId, version },
          { version: version + 1 },
        );
        if (result.affected !== 1) return { kind: 'changed-meanwhile' };
        const batch = await manager.findOneByOrFail(BatchEntity, { id: batchId });
        const outcome: Outcome = batch.status === 'curing' ? await change(manager, batch) : { kind: 'ended' };
        if (outcome.kind === 'done') return outcome;
        refused.set(manager, outcome);
        throw new Refused();
      });
    } catch (error) {
      const [refusal] = refused.values();
      if (error instanceof Refused && refusal) return refusal;
      throw error;
    }
  }
}

/** Thrown inside a transaction to take it back. */
class Refused extends Error {}

interface ShelfOfRoom {
  readonly roomId: string;
}

/** The shelf, locked, if it has room; otherwise why not. */
async function shelfFor(
  manager: EntityManager,
  studioId: string,
  placing: Placing,
  needed: number,
): Promise<ShelfOfRoom | Extract<Refusal, { kind: 'no-such-shelf' | 'shelf-full' }>> {
  const [shelf] = await manager.query<{ rack_id: string; capacity: number; position: number }[]>(
    'SELECT rack_id, capacity, position FROM shelf WHERE id = ? AND taken_away_at IS NULL FOR UPDATE',
    [placing.shelfId],
  );
  if (!shelf) return { kind: 'no-such-shelf' };
  const [rack] = await manager.query<{ room_id: string; name: string }[]>(
    'SELECT room_id, name FROM rack WHERE id = ? AND studio_id = ?',
    [shelf.rack_id, studioId],
  );
  if (!rack) return { kind: 'no-such-shelf' };
  if (!placing.overfill) {
    const standing = await manager.query<{ vessels: number; diameter: number }[]>(
      `SELECT b.vessels, d.vessel_diameter_mm AS diameter FROM stay s JOIN batch b ON b.id = s.batch_id JOIN design d ON d.id = b.design_id
       WHERE s.shelf_id = ? AND s.to_at IS NULL`,
      [placing.shelfId],
    );
    const taken = standing.reduce((sum, batch) => sum + placesTaken(batch.vessels, batch.diameter), 0);
    const free = Math.max(0, shelf.capacity - taken);
    if (needed > free + 1e-9)
      return { kind: 'shelf-full', shelf: `Shelf ${shelf.position} of ${rack.name}`, free, needed };
  }
  return { roomId: rack.room_id };
}

async function insertStay(
  manager: EntityManager,
  batchId: string,
  { roomId }: ShelfOfRoom,
  { shelfId, at }: Placing,
): Promise<void> {
  await manager.insert(StayEntity, {
    id: randomUUID(),
    batchId,
    shelfId,
    roomId,
    fromAt: new Date(at),
    toAt: null,
  });
}

async function presentStay(manager: EntityManager, batchId: string): Promise<StayEntity | null> {
  return manager
    .createQueryBuilder(StayEntity, 'stay')
    .where('stay.batchId = :batchId AND stay.toAt IS NULL', { batchId })
    .getOne();
}

/** First letter of the studio's name and a number counted up, e.g. L-118; the studio's row is locked until the commit. */
async function nextCode(manager: EntityManager, studioId: string): Promise<string> {
  const [studio] = await manager.query<{ name: string }[]>(
    'SELECT name FROM studio WHERE id = ? FOR UPDATE',
    [studioId],
  );
  const plain = (studio?.name ?? '').normalize('NFD').toUpperCase();
  const letter = /[A-Z]/.exec(plain)?.[0] ?? 'B';
  const [row] = await manager.query<{ last: string | number | null }[]>(
    `SELECT MAX(CAST(SUBSTRING(code, 3) AS UNSIGNED)) AS last FROM batch WHERE studio_id = ? AND code REGEXP ?`,
    [studioId, `^${letter}-[0-9]{1,15}$`],
  );
  return `${letter}-${Number(row?.last ?? 100) + 1}`;
}
