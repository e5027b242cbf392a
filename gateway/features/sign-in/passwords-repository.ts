import { IsNull, type DataSource, type EntityManager } from 'typeorm';
import type { StudioRole } from '#shared/contract/roles';
import { PersonEntity } from '../../database/entities/person-entity.js';
import { type MailToSend, enqueueMail } from '../../mail/enqueue-mail.js';
import { type AuditLine, appendAudit } from '../audit/audit-lines.js';
import { endSessions } from './end-sessions.js';
import { type LinkKind, type MadeLink, makeLink, useLink, voidLinks } from './mailed-links.js';
import type { Account } from './sessions-repository.js';

/** A mailed link that is still good, with the person it was sent to. */
export interface GoodLink {
  readonly person: Account;
  readonly createdBy: string | null;
  readonly studios: { readonly name: string; readonly role: StudioRole }[];
}

/** What is written together when a password is set. */
export interface PasswordChange {
  readonly personId: string;
  readonly passwordHash: string;
  readonly now: Date;
  readonly audit: AuditLine;
  readonly mail: MailToSend | null;
}

/** Passwords and the mailed links that set them. */
export class PasswordsRepository {
  constructor(private readonly dataSource: DataSource) {}

  account(personId: string): Promise<Account | null> {
    return this.dataSource.getRepository(PersonEntity).findOneBy({ id: personId });
  }

  /** Links of a kind made for a person since. */
  async linksSince(personId: string, kind: LinkKind, since: Date): Promise<number> {
    const [row] = await this.dataSource.query<{ n: string | number }[]>(
      'SELECT COUNT(*) AS n FROM mailed_link WHERE person_id = ? AND kind = ? AND created_at > ?',
      [personId, kind, since],
    );
    return Number(row?.n ?? 0);
  }

  /** Makes a link for a forgotten password and puts its mail into the outbox. */
  async mailPasswordLink(
    personId: string,
    now: Date,
    mailOf: (link: MadeLink) => MailToSend,
    audit: AuditLine,
  ): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      const link = await makeLink(manager, { kind: 'password', personId, createdBy: null, now });
      await enqueueMail(manager, mailOf(link));
      await appendAudit(manager, audit);
    });
  }

  /** The link if it may still be used. */
  async goodLink(kind: LinkKind, tokenHash: string, now: Date): Promise<GoodLink | null> {
    const [link] = await this.dataSource.query<{ person_id: string; created_by_name: string | null }[]>(
      `SELECT l.person_id, c.name AS created_by_name FROM mailed_link l LEFT JOIN person c ON c.id = l.created_by
       WHERE l.token_hash = ? AND l.kind = ? AND l.used_at IS NULL AND l.expires_at > ?`,
      [tokenHash, kind, now],
    );
    const person = link ? await this.account(link.person_id) : null;
    if (!link || !person || person.disabled) return null;
    const studios = await this.dataSource.query<GoodLink['studios']>(
      'SELECT s.name, m.role FROM membership m JOIN studio s ON s.id = m.studio_id WHERE m.person_id = ? ORDER BY s.position, s.name',
      [person.id],
    );
    return { person, createdBy: link.created_by_name, studios };
  }

  /** Sets a password from inside a session and ends the other sessions; returns their ids. */
  change(change: PasswordChange, keepSession: string): Promise<string[]> {
    return this.dataSource.transaction(async (manager) => {
      await manager.update(PersonEntity, { id: change.personId }, { passwordHash: change.passwordHash });
      await voidLinks(manager, change.personId, ['password'], change.now);
      await note(manager, change);
      return endSessions(manager, {
        personId: change.personId,
        except: keepSession,
        because: 'password changed',
        now: change.now,
      });
    });
  }

  /** Sets a password with a mailed link and ends every session. False when the link has been used meanwhile. */
  reset(change: PasswordChange, tokenHash: string): Promise<boolean> {
    return this.dataSource.transaction(async (manager) => {
      const { personId, passwordHash, now } = change;
      if (!(await useLink(manager, 'password', tokenHash, now))) return false;
      await manager.query(
        'UPDATE person SET password_hash = ?, token_version = token_version + 1 WHERE id = ?',
        [passwordHash, personId],
      );
      await note(manager, change);
      await endSessions(manager, { personId, except: null, because: 'password reset', now });
      return true;
    });
  }

  /** Gives an invited person a name and a password. False when the link has been used meanwhile. */
  accept(change: PasswordChange, name: string, tokenHash: string): Promise<boolean> {
    return this.dataSource.transaction(async (manager) => {
      const { personId, passwordHash, now } = change;
      if (!(await useLink(manager, 'invitation', tokenHash, now))) return false;
      const result = await manager.update(
        PersonEntity,
        { id: personId, passwordHash: IsNull() },
        { name, passwordHash },
      );
      if (result.affected !== 1) return false;
      await manager.increment(PersonEntity, { id: personId }, 'version', 1);
      await note(manager, change);
      return true;
    });
  }
}

async function note(manager: EntityManager, { audit, mail }: PasswordChange): Promise<void> {
  await appendAudit(manager, audit);
  if (mail) await enqueueMail(manager, mail);
}
