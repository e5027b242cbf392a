import type { DataSource } from 'typeorm';
import { PersonEntity } from '../../database/entities/person-entity.js';
import { appendAudit } from '../audit/audit-lines.js';
import { endSessions } from '../sign-in/end-sessions.js';
import { type LinkKind, type MadeLink, makeLink } from '../sign-in/mailed-links.js';

export interface OwnerToMake {
  /** For a new person. */
  readonly id: string;
  readonly email: string;
  readonly name: string | null;
  /** Null: a link is made instead. */
  readonly passwordHash: string | null;
  readonly now: Date;
}

/** Makes owners from the machine itself, where nobody needs to be signed in. */
export class OwnerRepository {
  constructor(private readonly dataSource: DataSource) {}

  /** Somebody who is here already becomes an owner, is enabled again and signed out everywhere. */
  make(owner: OwnerToMake): Promise<{ link: (MadeLink & { kind: LinkKind }) | null }> {
    return this.dataSource.transaction(async (manager) => {
      const { email, passwordHash, now } = owner;
      const known = await manager.findOneBy(PersonEntity, { email });
      const personId = known?.id ?? owner.id;
      if (known) {
        await manager.update(
          PersonEntity,
          { id: personId },
          {
            owner: true,
            disabled: false,
            name: owner.name ?? known.name,
            passwordHash: passwordHash ?? known.passwordHash,
            tokenVersion: known.tokenVersion + 1,
            version: known.version + 1,
          },
        );
        await endSessions(manager, { personId, except: null, because: 'made an owner', now });
      } else {
        await manager.insert(PersonEntity, {
          id: personId,
          email,
          name: owner.name ?? email.slice(0, 80),
          passwordHash,
          owner: true,
          disabled: false,
          tokenVersion: 1,
          lastSeenAt: null,
          createdAt: now,
          version: 1,
        });
      }
      await appendAudit(manager, {
        at: now,
        actor: { personId, name: 'Set-up on this machine', role: null, address: 'this machine' },
        studioId: null,
        action: 'made an owner',
        thing: 'person',
        thingId: personId,
        became: { email, owner: true },
      });
      if (passwordHash !== null) return { link: null };
      const kind: LinkKind = known?.passwordHash ? 'password' : 'invitation';
      return { link: { kind, ...(await makeLink(manager, { kind, personId, createdBy: null, now })) } };
    });
  }
}
