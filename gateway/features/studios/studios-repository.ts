import type { DataSource } from 'typeorm';
import type { Studio } from '#shared/contract/studios';
import { StudioEntity } from '../../database/entities/studio-entity.js';
import { remakeStudioDays } from '../../history/studio-days.js';
import { type AuditLine, appendAudit } from '../audit/audit-lines.js';

/** A studio without the role somebody holds in it. */
export type StudioFacts = Omit<Studio, 'role'>;
export type StudioFields = Omit<StudioFacts, 'id' | 'version'>;

/** Studios of the company. */
export class StudiosRepository {
  constructor(private readonly dataSource: DataSource) {}

  /** All studios, in the order in which the company shows them. */
  async list(): Promise<StudioFacts[]> {
    const rows = await this.dataSource
      .getRepository(StudioEntity)
      .find({ order: { position: 'ASC', name: 'ASC' } });
    return rows.map(toFacts);
  }

  async find(studioId: string): Promise<StudioFacts | null> {
    const row = await this.dataSource.getRepository(StudioEntity).findOneBy({ id: studioId });
    return row ? toFacts(row) : null;
  }

  /** Of the given people, those who may be reached for a studio: its members and the owners, unless disabled. */
  async membersAmong(studioId: string, personIds: readonly string[]): Promise<Set<string>> {
    if (personIds.length === 0) return new Set();
    const rows = await this.dataSource.query<{ id: string }[]>(
      `SELECT p.id FROM person p LEFT JOIN membership m ON m.person_id = p.id AND m.studio_id = ?
       WHERE p.id IN (?) AND p.disabled = 0 AND (p.owner = 1 OR m.person_id IS NOT NULL)`,
      [studioId, personIds],
    );
    return new Set(rows.map((row) => row.id));
  }

  async insert(id: string, fields: StudioFields, audit: AuditLine): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      const position = ((await manager.maximum(StudioEntity, 'position')) ?? 0) + 1;
      await manager.insert(StudioEntity, { id, position, version: 1, ...toColumns(fields) });
      await appendAudit(manager, audit);
    });
  }

  /**
   * False when the version is no longer the current one; nothing is changed then. Another time zone has the daily rollups made
   * anew, from the same transaction on.
   */
  update(studioId: string, version: number, fields: StudioFields, audit: AuditLine): Promise<boolean> {
    return this.dataSource.transaction(async (manager) => {
      const before = await manager.findOneBy(StudioEntity, { id: studioId, version });
      const result = await manager.update(
        StudioEntity,
        { id: studioId, version },
        { ...toColumns(fields), version: version + 1 },
      );
      if (result.affected !== 1) return false;
      if (before?.timeZone !== fields.timeZone) await remakeStudioDays(manager, studioId);
      await appendAudit(manager, audit);
      return true;
    });
  }
}

function toFacts(row: StudioEntity): StudioFacts {
  return {
    id: row.id,
    name: row.name,
    timeZone: row.timeZone,
    unit: row.unit === 'F' ? 'F' : 'C',
    address: row.address,
    pressureHpa: row.pressureHpa,
    quietFrom: row.quietFrom,
    quietTo: row.quietTo,
    recipients: row.recipients,
    escalateAfterMinutes: row.escalateAfterMinutes,
    version: row.version,
  };
}

function toColumns(fields: StudioFields) {
  return { ...fields, recipients: [...new Set(fields.recipients)] };
}
