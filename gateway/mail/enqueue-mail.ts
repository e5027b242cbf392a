import type { EntityManager } from 'typeorm';

export interface MailToSend {
  /** Stable and unique, e.g. <alert-…-raised-ines>@stillroom: a repeat is dropped by the database. */
  readonly messageId: string;
  readonly recipient: string;
  readonly subject: string;
  readonly body: string;
  readonly alertId: string | null;
  readonly personId: string | null;
  /** Not before this time. */
  readonly at: Date;
}

/** Puts a mail into the outbox within the caller's transaction; the worker sends it after the commit. */
export async function enqueueMail(manager: EntityManager, mail: MailToSend): Promise<void> {
  await manager.query(
    `INSERT INTO outbox (message_id, recipient, subject, body, alert_id, person_id, state, next_at, created_at) VALUES (?,?,?,?,?,?, 'waiting', ?, ?)
     ON DUPLICATE KEY UPDATE message_id = message_id`,
    [
      mail.messageId,
      oneLine(mail.recipient),
      oneLine(mail.subject),
      mail.body,
      mail.alertId,
      mail.personId,
      mail.at,
      mail.at,
    ],
  );
}

/** Header fields must not carry line breaks. */
function oneLine(text: string): string {
  return text
    .replace(/[\r\n]+/g, ' ')
    .trim()
    .slice(0, 300);
}
