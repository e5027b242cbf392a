import type { DataSource, EntityManager } from 'typeorm';
import type { Person } from '#shared/contract/people';
import type { StudioRole } from '#shared/contract/roles';
import { MembershipEntity } from '../../database/entities/membership-entity.js';
import { PersonEntity } from '../../database/entities/person-entity.js';
import { StudioEntity } from '../../database/entities/studio-entity.js';
import { type MailToSend, enqueueMail } from '../../mail/enqueue-mail.js';
import { type AuditLine, appendAudit } from '../audit/audit-lines.js';
import { endSessions } from '../sign-in/end-sessions.js';
import { type MadeLink, makeLink, voidLinks } from '../sign-in/mailed-links.js';

export interface MembershipFacts {
  readonly studioId: string;
  readonly role: StudioRole;
}

export interface NewInvitation {
  readonly personId: string;
  readonly email: string;
  readonly owner: boolean;
  readonly memberships: readonly MembershipFacts[];
  readonly invitedBy: string;
  readonly now: Date;
  readonly mailOf: (link: MadeLink) => MailToSend;
  readonly audit: AuditLine;
}

export interface PersonUpdate {
  readonly personId: string;
  readonly version: number;
  readonly owner: boolean;
  readonly disabled: boolean;
  readonly memberships: readonly MembershipFacts[];
  readonly now: Date;
  readonly audit: AuditLine;
}

export type UpdateOutcome =
  | {
      readonly kind: 'changed';
      /** Studios whose alerts no longer reach the person. */
      readonly unreached: string[];
    }
  | { readonly kind: 'changed-meanwhile' }
  | { readonly kind: 'last-owner' };

/** People, their roles and their invitations. */
export class PeopleRepository {
  constructor(private readonly dataSource: DataSource) {}

  async list(): Promise<Person[]> {
    const people = await this.dataSource
      .getRepository(PersonEntity)
      .find({ order: { name: 'ASC', email: 'ASC' } });
    const memberships = await this.dataSource.getRepository(MembershipEntity).find();
    return people.map((person) =>
      toPerson(
        person,
        memberships.filter(({ personId }) => personId === person.id),
      ),
    );
  }

  async find(personId: string): Promise<Person | null> {
    return this.one({ id: personId });
  }

  async findByEmail(email: string): Promise<Person | null> {
    return this.one({ email });
  }

  /** Names of those studios that exist. */
  async studioNames(studioIds: readonly string[]): Promise<Map<string, string>> {
    if (studioIds.length === 0) return new Map();
    const rows = await this.dataSource.query<{ id: string; name: string }[]>(
      'SELECT id, name FROM studio WHERE id IN (?)',
      [studioIds],
    );
    return new Map(rows.map((row) => [row.id, row.name]));
  }

  /** Writes a new person with an invitation. False when the address was taken meanwhile. */
  async invite(invitation: NewInvitation): Promise<boolean> {
    const { personId: id, email, owner, now } = invitation;
    try {
      await this.dataSource.transaction(async (manager) => {
        await manager.insert(PersonEntity, {
          id,
          email,
          name: email.slice(0, 80),
          passwordHash: null,
          owner,
          disabled: false,
          tokenVersion: 1,
          lastSeenAt: null,
          createdAt: now,
          version: 1,
        });
        await this.giveInvitation(manager, invitation);
      });
      return true;
    } catch (error) {
      if ((error as { code?: string }).code === 'ER_DUP_ENTRY') return false;
      throw error;
    }
  }

  /** Invites again somebody who has not accepted yet; the earlier link stops working. False when accepted meanwhile. */
  inviteAgain(invitation: NewInvitation): Promise<boolean> {
    return this.dataSource.transaction(async (manager) => {
      const result = await manager.query<{ affectedRows: number }>(
        'UPDATE person SET owner = ?, version = version + 1 WHERE id = ? AND password_hash IS NULL AND disabled = 0',
        [invitation.owner ? 1 : 0, invitation.personId],
      );
      if (result.affectedRows !== 1) return false;
      await this.giveInvitation(manager, invitation);
      return true;
    });
  }

  /** Changes roles or state and ends every session of the person. */
  update(update: PersonUpdate): Promise<UpdateOutcome> {
    return this.dataSource.transaction(async (manager): Promise<UpdateOutcome> => {
      const { personId, version, owner, disabled, memberships, now, audit } = update;
      // All owners are locked, so that two cannot take the right from each other in the same moment.
      const owners = await manager.query<{ id: string; active: number }[]>(
        'SELECT id, disabled = 0 AND password_hash IS NOT NULL AS active FROM person WHERE owner = 1 ORDER BY id FOR UPDATE',
      );
      const staysOwner = owner && !disabled;
      const active = owners.filter((person) => Number(person.active) === 1).map((person) => person.id);
      if (!staysOwner && active.length === 1 && active[0] === personId) return { kind: 'last-owner' };
      const result = await manager.query<{ affectedRows: number }>(
        'UPDATE person SET owner = ?, disabled = ?, token_version = token_version + 1, version = version + 1 WHERE id = ? AND version = ?',
        [owner ? 1 : 0, disabled ? 1 : 0, personId, version],
      );
      if (result.affectedRows !== 1) return { kind: 'changed-meanwhile' };
      await setMemberships(manager, personId, memberships);
      await endSessions(manager, { personId, except: null, because: 'role changed', now });
      if (disabled) await voidLinks(manager, personId, ['invitation', 'password'], now);
      await appendAudit(manager, audit);
      const reached = new Set(disabled ? [] : memberships.map(({ studioId }) => studioId));
      const unreached = staysOwner ? [] : await dropFromRecipients(manager, personId, reached);
      return { kind: 'changed', unreached };
    });
  }

  private async giveInvitation(manager: EntityManager, invitation: NewInvitation): Promise<void> {
    const { personId, memberships, invitedBy, now } = invitation;
    await setMemberships(manager, personId, memberships);
    const link = await makeLink(manager, { kind: 'invitation', personId, createdBy: invitedBy, now });
    await enqueueMail(manager, invitation.mailOf(link));
    await appendAudit(manager, invitation.audit);
  }

  private async one(where: { id: string } | { email: string }): Promise<Person | null> {
    const person = await this.dataSource.getRepository(PersonEntity).findOneBy(where);
    if (!person) return null;
    const memberships = await this.dataSource.getRepository(MembershipEntity).findBy({ personId: person.id });
    return toPerson(person, memberships);
  }
}

async function setMemberships(
  manager: EntityManager,
  personId: string,
  memberships: readonly MembershipFacts[],
): Promise<void> {
  await manager.delete(MembershipEntity, { personId });
  if (memberships.length > 0)
    await manager.insert(
      MembershipEntity,
      memberships.map(({ studioId, role }) => ({ personId, studioId, role })),
    );
}

/** Takes a person off the recipients of studios that are no longer theirs; returns those studios. */
async function dropFromRecipients(
  manager: EntityManager,
  personId: string,
  staysIn: ReadonlySet<string>,
): Promise<string[]> {
  const studios = await manager.find(StudioEntity);
  const left = studios.filter(({ id, recipients }) => recipients.includes(personId) && !staysIn.has(id));
  for (const { id, recipients, version } of left) {
    await manager.update(
      StudioEntity,
      { id },
      { recipients: recipients.filter((recipient) => recipient !== personId), version: version + 1 },
    );
  }
  return left.map(({ id }) => id);
}

function toPerson(row: PersonEntity, memberships: readonly MembershipEntity[]): Person {
  return {
    id: row.id,
    name: row.name,
    email: row.email,
    owner: row.owner,
    memberships: memberships
      .map(({ studioId, role }) => ({ studioId, role: role as StudioRole }))
      .sort((a, b) => a.studioId.localeCompare(b.studioId)),
    state: row.disabled ? 'disabled' : row.passwordHash === null ? 'invited' : 'active',
    lastSeenAt: row.lastSeenAt?.toISOString() ?? null,
    version: row.version,
  };
}
