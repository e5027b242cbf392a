import { createTransport, type Transporter } from 'nodemailer';
import type { OutgoingMail } from './outbox-worker.js';

const TIMEOUT_MS = 10_000;

/** Hands mails to a mail server by SMTP. */
export class MailSender {
  readonly #transport: Transporter;

  /** @param smtpUrl smtp:// or smtps:// with user and password where needed */
  constructor(
    smtpUrl: string,
    private readonly from: string,
  ) {
    this.#transport = createTransport({
      url: smtpUrl,
      pool: true,
      maxConnections: 2,
      connectionTimeout: TIMEOUT_MS,
      greetingTimeout: TIMEOUT_MS,
      socketTimeout: TIMEOUT_MS,
    });
  }

  /** @throws the mail server's refusal, with `responseCode` */
  async send(mail: OutgoingMail): Promise<void> {
    await this.#transport.sendMail({
      from: this.from,
      to: mail.recipient,
      subject: mail.subject,
      text: mail.body,
      messageId: mail.messageId,
    });
  }

  close(): void {
    this.#transport.close();
  }
}
