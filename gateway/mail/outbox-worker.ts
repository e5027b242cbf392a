import { randomUUID } from 'node:crypto';
import type { Logger } from 'pino';
import type { DataSource, EntityManager } from 'typeorm';

/** A mail of the outbox on its way out. */
export interface OutgoingMail {
  readonly messageId: string;
  readonly recipient: string;
  readonly subject: string;
  readonly body: string;
}

export interface OutboxWorkerParts {
  readonly dataSource: DataSource;
  /** Hands a mail to the mail server. @throws with `responseCode` when the server refused it */
  readonly send: (mail: OutgoingMail) => Promise<void>;
  /** The system's time. */
  readonly now: () => number;
  /** The domain's time, for the story of an alert. */
  readonly domainNow: () => number;
  /** Told after a mail about an alert went out or was given up. */
  readonly told?: (alertId: string) => void;
  readonly log: Logger;
}

interface Waiting {
  readonly id: string;
  readonly message_id: string;
  readonly recipient: string;
  readonly subject: string;
  readonly body: string;
  readonly alert_id: string | null;
  readonly attempts: number;
}

const LEASE = 'mail';
const LEASE_MS = 15_000;
const LOOK_EVERY_MS = 500;
const MAILS_A_LOOK = 20;
const FIRST_RETRY_MS = 5000;
const LONGEST_RETRY_MS = 15 * 60_000;
/** After this many tries (about two hours) a mail is given up, visibly. */
const MOST_ATTEMPTS = 14;

/**
 * Sends what stands in the outbox. Of several workers only the holder of the lease sends; the lease's epoch is a fencing
 * token: a worker that was stopped past its lease can mark nothing any more. A mail that was accepted but not yet marked when the
 * worker died goes out again with the same Message-ID.
 */
export class OutboxWorker {
  readonly #holder = randomUUID();
  #epoch: string | null = null;
  #timer: NodeJS.Timeout | null = null;
  #turn: Promise<void> = Promise.resolve();
  #stopped = false;

  constructor(private readonly parts: OutboxWorkerParts) {}

  start(): void {
    this.#soon();
  }

  async stop(): Promise<void> {
    this.#stopped = true;
    if (this.#timer) clearTimeout(this.#timer);
    await this.#turn;
  }

  /** One look: takes or renews the lease and sends what is due. @returns how many mails went out */
  async look(): Promise<number> {
    if (!(await this.#holdLease())) return 0;
    const waiting = await this.parts.dataSource.query<Waiting[]>(
      `SELECT id, message_id, recipient, subject, body, alert_id, attempts FROM outbox
       WHERE state = 'waiting' AND next_at <= ? ORDER BY next_at, id LIMIT ${MAILS_A_LOOK}`,
      [new Date(this.parts.now())],
    );
    let sent = 0;
    for (const mail of waiting) {
      if (!(await this.#holdLease())) return sent;
      if (await this.#one(mail)) sent++;
    }
    return sent;
  }

  async #one(mail: Waiting): Promise<boolean> {
    try {
      await this.parts.send({
        messageId: mail.message_id,
        recipient: mail.recipient,
        subject: mail.subject,
        body: mail.body,
      });
    } catch (error) {
      await this.#failed(mail, error);
      return false;
    }
    return this.#mark(
      mail,
      "state = 'sent', sent_at = ?, attempts = attempts + 1",
      [new Date(this.parts.now())],
      {
        what: 'mailed',
        note: `To ${mail.recipient}`,
      },
    );
  }

  async #failed(mail: Waiting, error: unknown): Promise<void> {
    const text = (error instanceof Error ? error.message : String(error)).slice(0, 500);
    const { responseCode } = error as { responseCode?: number };
    const attempts = mail.attempts + 1;
    const givenUp = (responseCode !== undefined && responseCode >= 500) || attempts >= MOST_ATTEMPTS;
    this.parts.log.warn(
      { recipient: mail.recipient, attempts, givenUp, err: error },
      'a mail could not be sent',
    );
    if (givenUp) {
      await this.#mark(mail, "state = 'dead', last_error = ?, attempts = ?", [text, attempts], {
        what: 'mail-failed',
        note: `To ${mail.recipient}: ${text}`,
      });
      return;
    }
    const wait = Math.min(LONGEST_RETRY_MS, FIRST_RETRY_MS * 2 ** mail.attempts);
    const values = [new Date(this.parts.now() + wait), text, attempts];
    await this.#mark(mail, 'next_at = ?, last_error = ?, attempts = ?', values, null);
  }

  /** Marks a mail, unless the lease has gone to another worker meanwhile. */
  async #mark(
    mail: Waiting,
    set: string,
    values: unknown[],
    step: { what: 'mailed' | 'mail-failed'; note: string } | null,
  ): Promise<boolean> {
    const marked = await this.parts.dataSource.transaction(async (manager) => {
      const result = await manager.query<{ affectedRows: number }>(
        `UPDATE outbox SET ${set}, lease_epoch = ? WHERE id = ? AND state = 'waiting'
         AND EXISTS (SELECT 1 FROM lease WHERE name = ? AND holder = ? AND epoch = ?)`,
        [...values, this.#epoch, mail.id, LEASE, this.#holder, this.#epoch],
      );
      if (result.affectedRows !== 1) return false;
      if (step !== null && mail.alert_id !== null) await this.#noteStep(manager, mail.alert_id, step);
      return true;
    });
    if (marked && step !== null && mail.alert_id !== null) this.parts.told?.(mail.alert_id);
    return marked;
  }

  async #noteStep(
    manager: EntityManager,
    alertId: string,
    step: { what: string; note: string },
  ): Promise<void> {
    await manager.query(
      'INSERT INTO alert_step (alert_id, at, what, who, note, value) VALUES (?, ?, ?, NULL, ?, NULL)',
      [alertId, new Date(this.parts.domainNow()), step.what, step.note],
    );
  }

  async #holdLease(): Promise<boolean> {
    const now = this.parts.now();
    const { dataSource } = this.parts;
    if (this.#epoch !== null) {
      const renewed = await dataSource.query<{ affectedRows: number }>(
        'UPDATE lease SET expires_at = ? WHERE name = ? AND holder = ? AND epoch = ? AND expires_at > ?',
        [new Date(now + LEASE_MS), LEASE, this.#holder, this.#epoch, new Date(now)],
      );
      if (renewed.affectedRows === 1) return true;
      this.#epoch = null;
    }
    await dataSource.query(
      `INSERT INTO lease (name, holder, epoch, expires_at) VALUES (?, ?, 1, ?)
       ON DUPLICATE KEY UPDATE epoch = IF(expires_at <= ?, epoch + 1, epoch), holder = IF(expires_at <= ?, VALUES(holder), holder),
         expires_at = IF(expires_at <= ?, VALUES(expires_at), expires_at)`,
      [LEASE, this.#holder, new Date(now + LEASE_MS), ...Array<Date>(3).fill(new Date(now))],
    );
    const [row] = await dataSource.query<{ holder: string; epoch: string }[]>(
      'SELECT holder, epoch FROM lease WHERE name = ?',
      [LEASE],
    );
    if (row?.holder !== this.#holder) return false;
    this.#epoch = String(row.epoch);
    return true;
  }

  #soon(): void {
    if (this.#stopped) return;
    this.#timer = setTimeout(() => {
      this.#turn = this.look()
        .then(() => undefined)
        .catch((error: unknown) => this.parts.log.warn({ err: error }, 'mail waits for the database'))
        .finally(() => this.#soon());
    }, LOOK_EVERY_MS);
    this.#timer.unref();
  }
}
