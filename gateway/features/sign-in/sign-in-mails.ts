import { DateTime } from 'luxon';

/** A mail's subject and text; plain text only. */
export interface MailText {
  readonly subject: string;
  readonly body: string;
}

export interface InvitationFacts {
  readonly company: string;
  readonly invitedBy: string;
  readonly owner: boolean;
  readonly studios: readonly { readonly name: string; readonly role: string }[];
  readonly url: string;
  readonly expiresAt: Date;
}

/** "Ines Marlow invites you to Larkrise Candleworks on Stillroom": who, what for, the link, until when. */
export function invitationMail(facts: InvitationFacts): MailText {
  const roles = facts.owner
    ? 'As owner you will see every studio.'
    : facts.studios.map(({ name, role }) => `  ${name}: ${role}`).join('\n');
  return {
    subject: `${facts.invitedBy} invites you to ${facts.company} on Stillroom`,
    body: lines(
      `${facts.invitedBy} invites you to ${facts.company} on Stillroom, which watches the cure rooms and says when each batch is ready.`,
      roles,
      `Open this link, give your name and choose a password:\n${facts.url}`,
      `The link works once, until ${dayAndTime(facts.expiresAt)}. After that, ask ${facts.invitedBy} for another.`,
      'You did not expect this? Then do nothing: without the link nobody can use your address.',
    ),
  };
}

/** The link for a forgotten password. */
export function passwordMail(facts: {
  company: string;
  name: string;
  url: string;
  expiresAt: Date;
}): MailText {
  return {
    subject: `A new password for ${facts.company} on Stillroom`,
    body: lines(
      `Hello ${facts.name},`,
      `somebody asked for a new password for this address. Choose it here:\n${facts.url}`,
      `The link works once, until ${dayAndTime(facts.expiresAt)}. Choosing a new password signs you out everywhere.`,
      'It was not you? Then do nothing: your password stays as it is.',
    ),
  };
}

/** Told after every change of a password, so that a change by somebody else is noticed. */
export function passwordChangedMail(facts: {
  company: string;
  name: string;
  at: Date;
  url: string;
}): MailText {
  return {
    subject: `Your password for ${facts.company} on Stillroom was changed`,
    body: lines(
      `Hello ${facts.name},`,
      `your password was changed at ${dayAndTime(facts.at)}. Other devices were signed out.`,
      `It was not you? Choose a new one at once: ${facts.url}/forgot-password – and tell the owner.`,
    ),
  };
}

function lines(...paragraphs: string[]): string {
  return `${paragraphs.filter((paragraph) => paragraph !== '').join('\n\n')}\n`;
}

/** In UTC: the gateway does not know where the reader is. */
function dayAndTime(at: Date): string {
  return DateTime.fromJSDate(at, { zone: 'utc' }).setLocale('en-GB').toFormat("d MMMM yyyy, HH:mm 'UTC'");
}
