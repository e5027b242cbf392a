import type { DataSource } from 'typeorm';
import type { AuditEntry } from '#shared/contract/audit';

export interface AuditQuery {
  /** Only lines about this thing. */
  readonly thingId: string | null;
  /** Only lines before the one with this number. */
  readonly before: string | null;
  readonly limit: number;
}

/** Reads the audit trail, newest first. Lines are written by appendAudit. */
export class AuditRepository {
  constructor(private readonly dataSource: DataSource) {}

  async list({ thingId, before, limit }: AuditQuery): Promise<AuditEntry[]> {
    const conditions = [
      ...(thingId === null ? [] : [{ sql: 'thing_id = ?', value: thingId }]),
      ...(before === null ? [] : [{ sql: 'id < ?', value: before }]),
    ];
    const where =
      conditions.length === 0 ? '' : `WHERE ${conditions.map((condition) => condition.sql).join(' AND ')}`;
    const rows = await this.dataSource.query<AuditRow[]>(
      `SELECT id, at, who, studio_id, action, thing, thing_id, was, became, address FROM audit ${where} ORDER BY id DESC LIMIT ?`,
      [...conditions.map((condition) => condition.value), limit],
    );
    return rows.map((row) => ({
      id: String(row.id),
      at: row.at.toISOString(),
      who: row.who,
      studioId: row.studio_id,
      action: row.action,
      thing: row.thing,
      thingId: row.thing_id,
      from: row.was === null ? null : (JSON.parse(row.was) as unknown),
      to: row.became === null ? null : (JSON.parse(row.became) as unknown),
      address: row.address,
    }));
  }
}

interface AuditRow {
  id: string | number;
  at: Date;
  who: string;
  studio_id: string | null;
  action: string;
  thing: string;
  thing_id: string;
  was: string | null;
  became: string | null;
  address: string;
}
