import type { DataSource, EntityManager } from 'typeorm';
import type { AlertFacts, AlertStep, Notice, Rule } from '#shared/contract/alerts';
import { AlertEntity } from '../../database/entities/alert-entity.js';
import { enqueueMail, type MailToSend } from '../../mail/enqueue-mail.js';
import { type AuditLine, appendAudit } from '../audit/audit-lines.js';
import type { AlertChange, AlertRecord, KeptRule, Write } from './alert-records.js';

const date = (ms: number | null) => (ms === null ? null : new Date(ms));

/** Alerts with their steps, the states of rules, notices. Every transition is one transaction. */
export class AlertsRepository {
  constructor(private readonly dataSource: DataSource) {}

  /** Writes transitions together: all or none. */
  async write(writes: readonly Write[], audit?: AuditLine): Promise<void> {
    if (writes.length === 0) return;
    await this.dataSource.transaction(async (manager) => {
      for (const write of writes) await this.#one(manager, write);
      if (audit) await appendAudit(manager, audit);
    });
  }

  async keptRules(): Promise<Map<string, KeptRule>> {
    const rows = await this.dataSource.query<{ rule_key: string; state: string }[]>(
      'SELECT rule_key, state FROM rule_state',
    );
    return new Map(rows.map((row) => [row.rule_key, JSON.parse(row.state) as KeptRule]));
  }

  async find(studioId: string, id: string): Promise<AlertRecord | null> {
    const row = await this.dataSource.getRepository(AlertEntity).findOne({ where: { id, studioId } });
    return row ? toRecord(row) : null;
  }

  async byIds(ids: readonly string[]): Promise<AlertRecord[]> {
    if (ids.length === 0) return [];
    return (
      await this.dataSource
        .getRepository(AlertEntity)
        .createQueryBuilder('alert')
        .where('alert.id IN (:...ids)', { ids })
        .getMany()
    ).map(toRecord);
  }

  /** Alerts that still ask for something: open, acknowledged, or over without anybody having looked. */
  async live(studioIds: readonly string[] | null): Promise<AlertRecord[]> {
    const query = this.dataSource
      .getRepository(AlertEntity)
      .createQueryBuilder('alert')
      .where("alert.state <> 'cleared'")
      .orderBy('alert.raised_at', 'DESC');
    if (studioIds !== null)
      query.andWhere('alert.studio_id IN (:...studioIds)', { studioIds: [...studioIds, ''] });
    return (await query.getMany()).map(toRecord);
  }

  /** Past alerts, newest first. */
  async past(studioId: string, before: number | null, limit: number): Promise<AlertRecord[]> {
    const query = this.dataSource
      .getRepository(AlertEntity)
      .createQueryBuilder('alert')
      .where("alert.studio_id = :studioId AND alert.state = 'cleared'", { studioId })
      .orderBy('alert.raised_at', 'DESC')
      .limit(limit);
    if (before !== null) query.andWhere('alert.raised_at < :before', { before: new Date(before) });
    return (await query.getMany()).map(toRecord);
  }

  async steps(alertId: string): Promise<AlertStep[]> {
    const rows = await this.dataSource.query<
      { at: Date; what: string; who: string | null; note: string; value: number | null }[]
    >(
      `SELECT s.at, s.what, p.name AS who, s.note, s.value FROM alert_step s LEFT JOIN person p ON p.id = s.who
       WHERE s.alert_id = ? ORDER BY s.at, s.id`,
      [alertId],
    );
    return rows.map((row) => ({
      at: row.at.toISOString(),
      what: row.what as AlertStep['what'],
      who: row.who,
      note: row.note,
      value: row.value,
    }));
  }

  async names(personIds: readonly (string | null)[]): Promise<Map<string, string>> {
    const ids = [...new Set(personIds.filter((id) => id !== null))];
    if (ids.length === 0) return new Map();
    const rows = await this.dataSource.query<{ id: string; name: string }[]>(
      'SELECT id, name FROM person WHERE id IN (?)',
      [ids],
    );
    return new Map(rows.map((row) => [row.id, row.name]));
  }

  /** The rules a room has of its own; null: it has only the defaults; undefined: no such room. */
  async ownRules(studioId: string, roomId: string): Promise<readonly Rule[] | null | undefined> {
    const [row] = await this.dataSource.query<{ rules: string | null }[]>(
      'SELECT rules FROM room WHERE id = ? AND studio_id = ?',
      [roomId, studioId],
    );
    return row === undefined ? undefined : row.rules === null ? null : (JSON.parse(row.rules) as Rule[]);
  }

  async setRules(roomId: string, rules: readonly Rule[], audit: AuditLine): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      await manager.query('UPDATE room SET rules = ? WHERE id = ?', [JSON.stringify(rules), roomId]);
      await appendAudit(manager, audit);
    });
  }

  /** A person's newest notices of the studios they may still see alerts of. */
  async notices(personId: string, studioIds: readonly string[] | null): Promise<Notice[]> {
    const rows = await this.dataSource.query<
      {
        id: string;
        at: Date;
        studio_id: string;
        alert_id: string | null;
        text: string;
        read_at: Date | null;
      }[]
    >(
      `SELECT id, at, studio_id, alert_id, text, read_at FROM notice
       WHERE person_id = ? ${studioIds === null ? '' : 'AND studio_id IN (?)'} ORDER BY at DESC LIMIT 50`,
      studioIds === null ? [personId] : [personId, [...studioIds, '']],
    );
    return rows.map((row) => ({
      id: row.id,
      at: row.at.toISOString(),
      studioId: row.studio_id,
      alertId: row.alert_id,
      text: row.text,
      read: row.read_at !== null,
    }));
  }

  async readNotices(personId: string, at: number): Promise<void> {
    await this.dataSource.query('UPDATE notice SET read_at = ? WHERE person_id = ? AND read_at IS NULL', [
      new Date(at),
      personId,
    ]);
  }

  /** Alert mails each person got since an instant of the system's time. */
  async mailsSince(personIds: readonly string[], since: number): Promise<Map<string, number>> {
    if (personIds.length === 0) return new Map();
    const rows = await this.dataSource.query<{ person_id: string; n: string }[]>(
      'SELECT person_id, COUNT(*) AS n FROM outbox WHERE person_id IN (?) AND alert_id IS NOT NULL AND created_at >= ? GROUP BY person_id',
      [personIds, new Date(since)],
    );
    return new Map(rows.map((row) => [row.person_id, Number(row.n)]));
  }

  async #one(manager: EntityManager, write: Write): Promise<void> {
    switch (write.do) {
      case 'raise':
        await manager.insert(AlertEntity, {
          id: write.alert.id,
          ...toColumns(write.alert),
          version: 1,
        });
        return;
      case 'change':
        await manager
          .createQueryBuilder()
          .update(AlertEntity)
          .set({ ...toColumns(write.set), version: () => 'version + 1' })
          .where('id = :id', { id: write.alertId })
          .execute();
        return;
      case 'step':
        await manager.query(
          'INSERT INTO alert_step (alert_id, at, what, who, note, value) VALUES (?,?,?,?,?,?)',
          [write.alertId, new Date(write.at), write.what, write.who, write.note, write.value],
        );
        return;
      case 'keep':
        await manager.query(
          'INSERT INTO rule_state (rule_key, state, updated_at) VALUES (?,?,?) ON DUPLICATE KEY UPDATE state = VALUES(state), updated_at = VALUES(updated_at)',
          [write.key, JSON.stringify(write.rule), new Date(write.at)],
        );
        return;
      case 'mail':
        return enqueueMail(manager, write.mail);
      case 'digest':
        return addToDigest(manager, write.mail);
      case 'notice':
        await manager.query(
          'INSERT INTO notice (id, person_id, studio_id, alert_id, at, text) VALUES (?,?,?,?,?,?)',
          [write.id, write.personId, write.studioId, write.alertId, new Date(write.at), write.text],
        );
    }
  }
}

/** A digest gathers until its hour is over and it is sent. */
async function addToDigest(manager: EntityManager, mail: MailToSend): Promise<void> {
  const result = await manager.query<{ affectedRows: number }>(
    "UPDATE outbox SET body = CONCAT(body, '\n\n', ?) WHERE message_id = ? AND state = 'waiting'",
    [mail.body, mail.messageId],
  );
  if (result.affectedRows === 0) await enqueueMail(manager, mail);
}

function toColumns(change: AlertChange | AlertRecord): Partial<AlertEntity> {
  const {
    raisedAt,
    clearedAt,
    acknowledgedAt,
    shelvedUntil,
    nextEscalationAt,
    facts,
    version: _,
    ...rest
  } = change as Partial<AlertRecord>;
  return {
    ...rest,
    ...(facts === undefined ? {} : { facts }),
    ...(raisedAt === undefined ? {} : { raisedAt: new Date(raisedAt) }),
    ...(clearedAt === undefined ? {} : { clearedAt: date(clearedAt) }),
    ...(acknowledgedAt === undefined ? {} : { acknowledgedAt: date(acknowledgedAt) }),
    ...(shelvedUntil === undefined ? {} : { shelvedUntil: date(shelvedUntil) }),
    ...(nextEscalationAt === undefined ? {} : { nextEscalationAt: date(nextEscalationAt) }),
  };
}

function toRecord(row: AlertEntity): AlertRecord {
  return {
    id: row.id,
    studioId: row.studioId,
    roomId: row.roomId,
    sensorId: row.sensorId,
    kind: row.kind as AlertRecord['kind'],
    severity: row.severity as AlertRecord['severity'],
    state: row.state as AlertRecord['state'],
    facts: row.facts as AlertFacts,
    raisedAt: row.raisedAt.getTime(),
    clearedAt: row.clearedAt?.getTime() ?? null,
    acknowledgedBy: row.acknowledgedBy,
    acknowledgedAt: row.acknowledgedAt?.getTime() ?? null,
    acknowledgeNote: row.acknowledgeNote,
    shelvedBy: row.shelvedBy,
    shelvedUntil: row.shelvedUntil?.getTime() ?? null,
    shelveReason: row.shelveReason,
    holder: row.holder,
    escalation: row.escalation,
    nextEscalationAt: row.nextEscalationAt?.getTime() ?? null,
    version: row.version,
  };
}
