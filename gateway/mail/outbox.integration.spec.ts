import { pino } from 'pino';
import { SMTPServer } from 'smtp-server';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { openTestDatabase, type TestDatabase } from '../database/test-database.js';
import { freePort } from '../intake/test-floor.js';
import { enqueueMail } from './enqueue-mail.js';
import { MailSender } from './mail-sender.js';
import { type OutgoingMail, OutboxWorker } from './outbox-worker.js';

const log = pino({ level: 'silent' });

describe('outbox', () => {
  let database: TestDatabase;
  let port: number;
  let server: SMTPServer | null = null;
  let received: string[] = [];
  /** Answers the next recipients with this code instead of taking the mail. */
  let refuseWith: number | null = null;
  let now = Date.parse('2026-05-04T12:00:00Z');
  let senders: MailSender[] = [];

  beforeAll(async () => {
    database = await openTestDatabase(new Date(now));
  });
  afterAll(() => database.close());
  beforeEach(async () => {
    await database.dataSource.query('DELETE FROM outbox');
    await database.dataSource.query('DELETE FROM lease');
    [received, refuseWith] = [[], null];
    port = await freePort();
    await startServer();
  });
  afterEach(async () => {
    for (const sender of senders) sender.close();
    senders = [];
    await stopServer();
  });

  async function startServer(): Promise<void> {
    const smtp = new SMTPServer({
      authOptional: true,
      disabledCommands: ['STARTTLS', 'AUTH'],
      onRcptTo: (_address, _session, done) =>
        done(refuseWith === null ? null : Object.assign(new Error('not now'), { responseCode: refuseWith })),
      onData: (stream, _session, done) => {
        let text = '';
        stream.on('data', (chunk: Buffer) => (text += chunk.toString()));
        stream.on('end', () => {
          received.push(/^Message-ID: (.*)$/im.exec(text)?.[1]?.trim() ?? text);
          done();
        });
      },
    });
    server = smtp;
    await new Promise<void>((resolve) => smtp.listen(port, '127.0.0.1', () => resolve()));
  }
  async function stopServer(): Promise<void> {
    const closing = server;
    server = null;
    if (closing) await new Promise<void>((resolve) => closing.close(() => resolve()));
  }

  const worker = (send?: (mail: OutgoingMail) => Promise<void>) => {
    const sender = new MailSender(`smtp://127.0.0.1:${port}`, 'Stillroom <stillroom@localhost>');
    senders.push(sender);
    return new OutboxWorker({
      dataSource: database.dataSource,
      send: send ?? ((mail) => sender.send(mail)),
      now: () => now,
      domainNow: () => now,
      log,
    });
  };
  const enqueue = (count: number) =>
    database.dataSource.transaction(async (manager) => {
      for (let index = 0; index < count; index++) {
        await enqueueMail(manager, {
          ...{
            messageId: `<mail-${index}@stillroom>`,
            recipient: 'ines@example.org',
            subject: 'Too\r\nwarm',
          },
          ...{ body: 'Loft: 26.1 °C', alertId: null, personId: null, at: new Date(now) },
        });
      }
    });
  const states = async () => {
    const rows = await database.dataSource.query<{ state: string; n: string }[]>(
      'SELECT state, COUNT(*) AS n FROM outbox GROUP BY state',
    );
    return Object.fromEntries(rows.map(({ state, n }) => [state, Number(n)]));
  };
  const expected = (count: number) =>
    Array.from({ length: count }, (_, index) => `<mail-${index}@stillroom>`);

  it('sends every mail once, with its own Message-ID', async () => {
    await enqueue(50);
    const one = worker();
    while ((await one.look()) > 0);
    expect([...received].sort()).toEqual(expected(50).sort());
    expect(await states()).toEqual({ sent: 50 });
  });

  it('killed between the server’s 250 and its own mark: nothing is missed, repeats are no more than kills', async () => {
    await enqueue(20);
    let kills = 0;
    for (let round = 0; round < 12 && (await states())['sent'] !== 20; round++) {
      const sender = new MailSender(`smtp://127.0.0.1:${port}`, 'stillroom@localhost');
      senders.push(sender);
      let sent = 0;
      let killed = () => undefined as void;
      const death = new Promise<void>((resolve) => (killed = resolve));
      const dying = worker(async (mail) => {
        await sender.send(mail);
        if (++sent < 4 || kills === 5) return;
        kills++;
        killed();
        // The process ends here: whatever it would do next never happens.
        await new Promise(() => undefined);
      });
      await Promise.race([dying.look(), death]);
      now += 60_000;
    }
    expect(kills).toBe(5);
    expect(new Set(received)).toEqual(new Set(expected(20)));
    expect(received.length - 20).toBeLessThanOrEqual(kills);
    expect(await states()).toEqual({ sent: 20 });
  });

  it('waits while the server is down and tries again later', async () => {
    await enqueue(3);
    await stopServer();
    const one = worker();
    await one.look();
    expect(await states()).toEqual({ waiting: 3 });
    await startServer();
    expect(await one.look()).toBe(0);
    now += 60_000;
    while ((await one.look()) > 0);
    expect(await states()).toEqual({ sent: 3 });
  });

  it('tries again after 4xx; after 5xx a mail is dead for everybody to see', async () => {
    await enqueue(2);
    const one = worker();
    refuseWith = 451;
    await one.look();
    expect(await states()).toEqual({ waiting: 2 });
    refuseWith = 550;
    now += 60_000;
    await one.look();
    expect(await states()).toEqual({ dead: 2 });
    const [row] = await database.dataSource.query<{ last_error: string }[]>(
      'SELECT last_error FROM outbox LIMIT 1',
    );
    expect(row?.last_error).toMatch(/not now/);
  });

  it('of two workers one sends; a leader stopped past its lease writes nothing any more', async () => {
    await enqueue(8);
    let release = () => undefined as void;
    const stalled = new Promise<void>((resolve) => (release = resolve));
    let stalledOnce = false;
    const first = worker(async () => {
      if (stalledOnce) return;
      stalledOnce = true;
      await stalled;
    });
    const second = worker();
    const looking = first.look();
    await expect.poll(() => stalledOnce).toBe(true);
    expect(await second.look()).toBe(0);
    now += 20_000;
    while ((await second.look()) > 0);
    expect(await states()).toEqual({ sent: 8 });
    const [before] = await database.dataSource.query<{ epochs: string }[]>(
      'SELECT GROUP_CONCAT(DISTINCT lease_epoch) AS epochs FROM outbox',
    );
    release();
    await looking;
    const [after] = await database.dataSource.query<{ epochs: string }[]>(
      'SELECT GROUP_CONCAT(DISTINCT lease_epoch) AS epochs FROM outbox',
    );
    expect(after).toEqual(before);
    expect(received).toHaveLength(8);
  });

  it('keeps line breaks out of header fields', async () => {
    await enqueue(1);
    const [row] = await database.dataSource.query<{ subject: string }[]>('SELECT subject FROM outbox');
    expect(row?.subject).toBe('Too warm');
  });
});
