import { type ParsedMail, simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';

/** A mail that was received. */
export interface ReceivedMail {
  readonly id: number;
  readonly at: string;
  readonly to: string;
  readonly from: string;
  readonly subject: string;
  readonly text: string;
  readonly messageId: string;
}

const MOST_KEPT = 500;
const LARGEST_BYTES = 1_000_000;

/** A mail server for the demo: takes every mail, delivers none, shows all. */
export class Mailbox {
  #mails: ReceivedMail[] = [];
  #next = 1;
  #server: SMTPServer | null = null;

  /** Newest first. */
  get mails(): readonly ReceivedMail[] {
    return this.#mails;
  }

  clear(): void {
    this.#mails = [];
  }

  start(port: number): Promise<void> {
    const server = new SMTPServer({
      authOptional: true,
      disabledCommands: ['STARTTLS', 'AUTH'],
      size: LARGEST_BYTES,
      onData: (stream, session, done) => {
        simpleParser(stream)
          .then((mail) => {
            this.#keep(mail, session.envelope.rcptTo.map(({ address }) => address).join(', '));
            done();
          })
          .catch((error: unknown) => done(error instanceof Error ? error : new Error(String(error))));
      },
    });
    this.#server = server;
    return new Promise((resolve, reject) => {
      server.once('error', reject);
      server.listen(port, '127.0.0.1', () => {
        server.off('error', reject);
        server.on('error', () => undefined);
        resolve();
      });
    });
  }

  stop(): Promise<void> {
    return new Promise((resolve) => (this.#server ? this.#server.close(() => resolve()) : resolve()));
  }

  #keep(mail: ParsedMail, to: string): void {
    this.#mails = [
      {
        id: this.#next++,
        at: new Date().toISOString(),
        to,
        from: mail.from?.text ?? '',
        subject: mail.subject ?? '',
        text: mail.text ?? '',
        messageId: mail.messageId ?? '',
      },
      ...this.#mails,
    ].slice(0, MOST_KEPT);
  }
}
