import { randomUUID } from 'node:crypto';
import type { Person } from '#shared/contract/people';
import { type Holdings, may, roleIn } from '#shared/contract/roles';
import type { PersonChanged } from '../../announcements.js';
import type { Clock } from '../../clock.js';
import type { Actor, SignedInPerson } from '../../http/actor.js';
import { ProblemError, changedMeanwhile } from '../../http/problem-error.js';
import { linkUrl, type MadeLink } from '../sign-in/mailed-links.js';
import { normalEmail } from '../sign-in/sign-in.js';
import { invitationMail } from '../sign-in/sign-in-mails.js';
import type { MembershipFacts, NewInvitation, PeopleRepository } from './people-repository.js';

export interface PeopleParts {
  readonly repository: PeopleRepository;
  /** The system's time: how long links are good. */
  readonly clock: Clock;
  /** The time audit lines carry. */
  readonly auditClock: Clock;
  readonly company: string;
  readonly publicUrl: string;
  readonly changed: (change: PersonChanged) => void;
  /** Told when a studio lost a recipient of its alerts. */
  readonly studioChanged: (studioId: string) => void;
}

export interface InvitationFields {
  readonly email: string;
  readonly owner: boolean;
  readonly memberships: readonly MembershipFacts[];
}

export interface PersonFields {
  readonly version: number;
  readonly owner?: boolean | undefined;
  readonly memberships?: readonly MembershipFacts[] | undefined;
  readonly disabled?: boolean | undefined;
}

/** People of the company and what they may do. */
export class People {
  constructor(private readonly parts: PeopleParts) {}

  /** An owner sees everybody; a lead the owners and the people of the own studios, with their roles there only. */
  async list(viewer: Holdings): Promise<Person[]> {
    const people = await this.parts.repository.list();
    if (viewer.owner) return people;
    const own = studiosWith(viewer, 'people.read');
    return people
      .map((person) => ({
        ...person,
        memberships: person.memberships.filter(({ studioId }) => own.has(studioId)),
      }))
      .filter((person) => person.memberships.length > 0 || (person.owner && person.state === 'active'));
  }

  /**
   * Invites somebody by e-mail, or once more if they have not accepted yet.
   * @throws ProblemError forbidden beyond the inviter's own studios, conflict for somebody who is here already
   */
  async invite(inviter: SignedInPerson, fields: InvitationFields, actor: Actor): Promise<Person> {
    const { repository } = this.parts;
    mayGive(inviter, fields);
    const names = await this.mustExist(fields);
    const email = normalEmail(fields.email);
    const known = await repository.findByEmail(email);
    if (known && known.state !== 'invited') throw isHere(inviter);
    if (known && !inviter.owner) mayReplace(inviter, known);
    const invitation = this.invitation(known?.id ?? randomUUID(), { ...fields, email }, actor, names);
    if (!(known ? await repository.inviteAgain(invitation) : await repository.invite(invitation)))
      throw isHere(inviter);
    return this.get(invitation.personId);
  }

  /**
   * Changes roles or disables. The person's sessions end at once.
   * @throws ProblemError conflict for the last owner, changed-meanwhile for an old version, bad-input without any role
   */
  async change(personId: string, fields: PersonFields, actor: Actor): Promise<Person> {
    const before = await this.get(personId);
    const owner = fields.owner ?? before.owner;
    const memberships = fields.memberships ?? before.memberships;
    const disabled = fields.disabled ?? before.state === 'disabled';
    if (!disabled) await this.mustExist({ owner, memberships });
    const outcome = await this.parts.repository.update({
      personId,
      version: fields.version,
      owner,
      disabled,
      memberships,
      now: new Date(this.parts.clock.now()),
      audit: this.line(actor, 'changed', personId, held(before), { owner, memberships, disabled }),
    });
    if (outcome.kind === 'changed-meanwhile') throw changedMeanwhile('person');
    if (outcome.kind === 'last-owner')
      throw new ProblemError(
        'conflict',
        `${before.name} is the last owner. Make somebody else an owner first.`,
      );
    this.parts.changed({ personId, reason: 'role-changed', sessionId: null });
    for (const studioId of outcome.unreached) this.parts.studioChanged(studioId);
    return this.get(personId);
  }

  private async get(personId: string): Promise<Person> {
    const person = await this.parts.repository.find(personId);
    if (!person) throw new ProblemError('not-found', 'This person does not exist.');
    return person;
  }

  /** Names of the studios. @throws ProblemError bad-input for unknown or repeated studios, or no role at all */
  private async mustExist(
    roles: Pick<InvitationFields, 'owner' | 'memberships'>,
  ): Promise<Map<string, string>> {
    const studioIds = roles.memberships.map(({ studioId }) => studioId);
    const refuse = (message: string) =>
      new ProblemError('bad-input', message, [{ path: 'memberships', message }]);
    if (!roles.owner && studioIds.length === 0) throw refuse('Give a role in at least one studio.');
    if (new Set(studioIds).size < studioIds.length) throw refuse('Give one role a studio.');
    const names = await this.parts.repository.studioNames(studioIds);
    if (names.size < studioIds.length) throw refuse('One of these studios does not exist.');
    return names;
  }

  private invitation(
    personId: string,
    { email, owner, memberships }: InvitationFields,
    actor: Actor,
    names: ReadonlyMap<string, string>,
  ): NewInvitation {
    const { company, publicUrl, clock } = this.parts;
    const now = new Date(clock.now());
    const studios = memberships.map(({ studioId, role }) => ({ name: names.get(studioId) ?? '', role }));
    const mailOf = ({ token, tokenHash, expiresAt }: MadeLink) => ({
      messageId: `<link-${tokenHash.slice(0, 40)}@stillroom>`,
      recipient: email,
      ...invitationMail({
        company,
        invitedBy: actor.name,
        owner,
        studios,
        url: linkUrl(publicUrl, 'invitation', token),
        expiresAt,
      }),
      alertId: null,
      personId,
      at: now,
    });
    const audit = this.line(actor, 'invited', personId, undefined, { email, owner, memberships });
    return { personId, email, owner, memberships, invitedBy: actor.personId, now, mailOf, audit };
  }

  private line(actor: Actor, action: string, thingId: string, was: unknown, became: unknown) {
    const at = new Date(this.parts.auditClock.now());
    return { at, actor, studioId: null, action, thing: 'person', thingId, was, became };
  }
}

function studiosWith(person: Holdings, permission: 'people.read' | 'people.invite'): Set<string> {
  return new Set(
    person.memberships.filter(({ role }) => may(role, permission)).map(({ studioId }) => studioId),
  );
}

/** Owners give anything; a lead makes makers and viewers, in studios led by them. */
function mayGive(inviter: Holdings, { owner, memberships }: InvitationFields): void {
  if (inviter.owner) return;
  const fine =
    !owner &&
    memberships.every(
      ({ studioId, role }) => role !== 'lead' && may(roleIn(inviter, studioId), 'people.invite'),
    );
  if (!fine) {
    throw new ProblemError(
      'forbidden',
      'A lead may invite makers and viewers to the own studios. Ask the owner for anything else.',
    );
  }
}

/** A lead may invite again only where nothing is replaced that the lead could not have given. */
function mayReplace(inviter: Holdings, known: Person): void {
  const own = studiosWith(inviter, 'people.invite');
  const within = known.memberships.every(({ studioId, role }) => role !== 'lead' && own.has(studioId));
  if (known.owner || !within) {
    throw new ProblemError(
      'conflict',
      'Somebody else has invited this address already. Ask the owner to change the invitation.',
    );
  }
}

function isHere(inviter: Holdings): ProblemError {
  return new ProblemError(
    'conflict',
    inviter.owner
      ? 'This address belongs to somebody who is here already. Change their roles in the list of people.'
      : 'This address belongs to somebody who is here already. Ask the owner to change their roles.',
  );
}

function held({ owner, memberships, state }: Person) {
  return { owner, memberships, disabled: state === 'disabled' };
}
