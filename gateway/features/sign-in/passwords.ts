import type { ReplyOf } from '#shared/contract/route';
import type { sessionRoutes } from '#shared/contract/session';
import type { PersonChanged } from '../../announcements.js';
import type { Clock } from '../../clock.js';
import type { SignedInPerson } from '../../http/actor.js';
import { ProblemError } from '../../http/problem-error.js';
import type { AuditLine } from '../audit/audit-lines.js';
import { linkUrl } from './mailed-links.js';
import type { PasswordHashes } from './password-hashes.js';
import { refusalOf } from './password-rules.js';
import type { GoodLink, PasswordsRepository } from './passwords-repository.js';
import { type MailText, passwordChangedMail, passwordMail } from './sign-in-mails.js';
import { type Account, type SessionsRepository } from './sessions-repository.js';
import { normalEmail, tooManyTries } from './sign-in.js';
import type { SlowDown } from './slow-down.js';
import { hashToken } from './token-hash.js';

export interface PasswordsParts {
  readonly repository: PasswordsRepository;
  readonly accounts: Pick<SessionsRepository, 'account'>;
  readonly hashes: PasswordHashes;
  readonly slowDown: SlowDown;
  /** The system's time. */
  readonly clock: Clock;
  /** The time audit lines carry. */
  readonly auditClock: Clock;
  readonly company: string;
  readonly publicUrl: string;
  readonly changed: (change: PersonChanged) => void;
  /** Told when a link could not be written; the visitor is not, or the answer would tell who is known. */
  readonly failed: (error: unknown) => void;
}

const LINKS_PER_HOUR = 3;

type Invitation = ReplyOf<typeof sessionRoutes.invitation>;

/** Changing, resetting and first setting of passwords. */
export class Passwords {
  readonly #sending = new Set<Promise<void>>();

  constructor(private readonly parts: PasswordsParts) {}

  /** @throws ProblemError bad-input for a wrong current or a refused new password, too-many-tries */
  async change(
    person: SignedInPerson,
    passwords: { current: string; next: string },
    address: string,
  ): Promise<void> {
    const { repository, hashes, slowDown } = this.parts;
    const pace = slowDown.begin(person.email, person.id);
    if (pace.kind === 'wait') throw tooManyTries(pace.seconds);
    const account = await repository.account(person.id);
    if (!account || !(await hashes.verify(passwords.current, account.passwordHash)))
      throw badInput('current', 'This is not your present password.');
    slowDown.succeeded(person.email, person.id);
    this.mustSuit('next', passwords.next, account, account.name);
    const passwordHash = await hashes.hash(passwords.next);
    const ended = await repository.change(
      {
        personId: person.id,
        passwordHash,
        now: this.now(),
        audit: this.line(account, address, 'changed the own password'),
        mail: this.changedMail(account),
      },
      person.sessionId,
    );
    for (const sessionId of ended)
      this.parts.changed({ personId: person.id, sessionId, reason: 'signed-out' });
  }

  /** Mails a link if the address is known. Returns at once and never tells. */
  forgot(email: string, address: string): void {
    const sending = this.sendPasswordLink(normalEmail(email), address)
      .catch(this.parts.failed)
      .finally(() => this.#sending.delete(sending));
    this.#sending.add(sending);
  }

  /** Resolves when every link asked for so far is in the outbox. */
  async settled(): Promise<void> {
    await Promise.all(this.#sending);
  }

  /** @throws ProblemError link-expired, bad-input for a refused password */
  async reset(token: string, password: string, address: string): Promise<void> {
    const { person } = await this.goodLink('password', token);
    this.mustSuit('password', password, person, person.name);
    const changed = await this.parts.repository.reset(
      {
        personId: person.id,
        passwordHash: await this.parts.hashes.hash(password),
        now: this.now(),
        audit: this.line(person, address, 'set a new password with a mailed link'),
        mail: this.changedMail(person),
      },
      hashToken(token),
    );
    if (!changed) throw linkExpired();
    this.parts.changed({ personId: person.id, sessionId: null, reason: 'signed-out' });
  }

  /** @throws ProblemError link-expired */
  async invitation(token: string): Promise<Invitation> {
    const { person, createdBy, studios } = await this.goodLink('invitation', token);
    const { company } = this.parts;
    return { company, email: person.email, invitedBy: createdBy ?? company, studios, owner: person.owner };
  }

  /** @throws ProblemError link-expired, bad-input for a refused password */
  async accept(token: string, name: string, password: string, address: string): Promise<void> {
    const { person } = await this.goodLink('invitation', token);
    this.mustSuit('password', password, person, name);
    const accepted = await this.parts.repository.accept(
      {
        personId: person.id,
        passwordHash: await this.parts.hashes.hash(password),
        now: this.now(),
        audit: this.line({ ...person, name }, address, 'accepted the invitation'),
        mail: null,
      },
      name,
      hashToken(token),
    );
    if (!accepted) throw linkExpired();
  }

  private async sendPasswordLink(email: string, address: string): Promise<void> {
    const { repository, accounts, company, publicUrl } = this.parts;
    const person = await accounts.account(email);
    if (!person || person.disabled || person.passwordHash === null) return;
    const now = this.now();
    const hourAgo = new Date(now.getTime() - 3_600_000);
    if ((await repository.linksSince(person.id, 'password', hourAgo)) >= LINKS_PER_HOUR) return;
    await repository.mailPasswordLink(
      person.id,
      now,
      ({ token, tokenHash, expiresAt }) => {
        const url = linkUrl(publicUrl, 'password', token);
        return this.mail(
          person,
          `link-${tokenHash.slice(0, 40)}`,
          passwordMail({ company, name: person.name, url, expiresAt }),
        );
      },
      this.line(person, address, 'asked for a password link'),
    );
  }

  private async goodLink(kind: 'password' | 'invitation', token: string): Promise<GoodLink> {
    const link = await this.parts.repository.goodLink(kind, hashToken(token), this.now());
    if (!link) throw linkExpired();
    return link;
  }

  private mustSuit(field: string, password: string, { email }: Account, name: string): void {
    const refusal = refusalOf(password, { company: this.parts.company, name, email });
    if (refusal) throw badInput(field, refusal);
  }

  private changedMail(person: Account) {
    const { company, publicUrl } = this.parts;
    const at = this.now();
    const text = passwordChangedMail({ company, name: person.name, at, url: publicUrl });
    return this.mail(person, `password-changed-${person.id}-${at.getTime()}`, text);
  }

  private mail(person: Account, id: string, text: MailText) {
    const messageId = `<${id}@stillroom>`;
    return {
      messageId,
      recipient: person.email,
      ...text,
      alertId: null,
      personId: person.id,
      at: this.now(),
    };
  }

  private line(person: Account, address: string, action: string): AuditLine {
    return {
      at: new Date(this.parts.auditClock.now()),
      actor: { personId: person.id, name: person.name, role: null, address },
      studioId: null,
      action,
      thing: 'person',
      thingId: person.id,
    };
  }

  private now(): Date {
    return new Date(this.parts.clock.now());
  }
}

function badInput(path: string, message: string): ProblemError {
  return new ProblemError('bad-input', message, [{ path, message }]);
}

function linkExpired(): ProblemError {
  return new ProblemError(
    'link-expired',
    'This link was used already or has run out. Ask for another; only the newest one works.',
  );
}
