import type { DataSource } from 'typeorm';
import type { BodyOf } from '#shared/contract/route';
import {
  type Design,
  type Fragrance,
  type Wax,
  kinetics,
  type materialRoutes,
  waxFamily,
} from '#shared/contract/materials';
import { DesignEntity } from '../../database/entities/design-entity.js';
import { FragranceEntity } from '../../database/entities/fragrance-entity.js';
import { WaxEntity } from '../../database/entities/wax-entity.js';
import { type AuditLine, appendAudit } from '../audit/audit-lines.js';

export type FragranceFields = BodyOf<typeof materialRoutes.createFragrance>;
export type DesignFields = BodyOf<typeof materialRoutes.createDesign>;

/** Waxes, fragrance oils and designs; they belong to the company, not to one studio. */
export class MaterialsRepository {
  constructor(private readonly dataSource: DataSource) {}

  async waxes(): Promise<Wax[]> {
    const rows = await this.dataSource.getRepository(WaxEntity).find({ order: { name: 'ASC', id: 'ASC' } });
    return rows.map(toWax);
  }

  async wax(id: string): Promise<Wax | null> {
    const row = await this.dataSource.getRepository(WaxEntity).findOneBy({ id });
    return row ? toWax(row) : null;
  }

  async insertWax(wax: Wax, audit: AuditLine): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      await manager.insert(WaxEntity, wax);
      await appendAudit(manager, audit);
    });
  }

  /** False when the version is no longer the current one; nothing is changed then. */
  async updateWax(
    id: string,
    version: number,
    fields: Pick<Wax, 'name' | 'kinetics' | 'provenance'>,
    audit: AuditLine,
  ): Promise<boolean> {
    return this.dataSource.transaction(async (manager) => {
      const result = await manager.update(WaxEntity, { id, version }, { ...fields, version: version + 1 });
      if (result.affected !== 1) return false;
      await appendAudit(manager, audit);
      return true;
    });
  }

  async fragrances(): Promise<Fragrance[]> {
    const rows = await this.dataSource
      .getRepository(FragranceEntity)
      .find({ order: { name: 'ASC', id: 'ASC' } });
    return rows.map(({ id, name, flashPoint, certificateMaxLoad }) => ({
      id,
      name,
      flashPoint,
      certificateMaxLoad,
    }));
  }

  async insertFragrance(id: string, fields: FragranceFields, audit: AuditLine): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      await manager.insert(FragranceEntity, { id, ...fields, version: 1 });
      await appendAudit(manager, audit);
    });
  }

  async designs(id?: string): Promise<Design[]> {
    const rows = await this.dataSource
      .getRepository(DesignEntity)
      .find({ ...(id === undefined ? {} : { where: { id } }), order: { name: 'ASC', id: 'ASC' } });
    const tests = await this.dataSource.query<
      { design_id: string; at: Date; passed: number; code: string | null }[]
    >(
      `SELECT design_id, at, passed, code FROM (
         SELECT v.design_id, v.at, v.passed, b.code, ROW_NUMBER() OVER (PARTITION BY v.design_id ORDER BY v.at DESC, v.id) AS place
         FROM burn_verdict v LEFT JOIN batch b ON b.id = v.batch_id ${id === undefined ? '' : 'WHERE v.design_id = ?'}) latest
       WHERE place = 1`,
      id === undefined ? [] : [id],
    );
    const lastTests = new Map(
      tests.map((test) => [
        test.design_id,
        { at: test.at.toISOString(), passed: test.passed === 1, batchCode: test.code },
      ]),
    );
    return rows.map((row) => ({ ...row, lastTest: lastTests.get(row.id) ?? null }));
  }

  async insertDesign(id: string, fields: DesignFields, audit: AuditLine): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      await manager.insert(DesignEntity, { id, ...fields, version: 1 });
      await appendAudit(manager, audit);
    });
  }

  /** Whether the wax and, if one is named, the fragrance exist. */
  async known(waxId: string, fragranceId: string | null): Promise<{ wax: boolean; fragrance: boolean }> {
    const wax = await this.dataSource.getRepository(WaxEntity).existsBy({ id: waxId });
    const fragrance =
      fragranceId === null ||
      (await this.dataSource.getRepository(FragranceEntity).existsBy({ id: fragranceId }));
    return { wax, fragrance };
  }
}

function toWax(row: WaxEntity): Wax {
  return { ...row, family: waxFamily.parse(row.family), kinetics: kinetics.parse(row.kinetics) };
}
