import type { EntityManager } from 'typeorm';
import type { Actor } from '../../http/actor.js';

/** One line of the audit trail, written in the transaction of the change it tells of. */
export interface AuditLine {
  readonly at: Date;
  readonly actor: Actor;
  readonly studioId: string | null;
  /** Verb in plain words, e.g. "changed limits". */
  readonly action: string;
  readonly thing: string;
  readonly thingId: string;
  readonly was?: unknown;
  readonly became?: unknown;
}

/** Appends an audit line. Lines are never changed or removed. */
export async function appendAudit(manager: EntityManager, line: AuditLine): Promise<void> {
  await manager.query(
    'INSERT INTO audit (at, person_id, who, studio_id, action, thing, thing_id, was, became, address) VALUES (?,?,?,?,?,?,?,?,?,?)',
    [
      line.at,
      line.actor.personId,
      line.actor.name,
      line.studioId,
      line.action,
      line.thing,
      line.thingId,
      line.was === undefined ? null : JSON.stringify(line.was),
      line.became === undefined ? null : JSON.stringify(line.became),
      line.actor.address,
    ],
  );
}
