import { type ChildProcess, spawn } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { once } from 'node:events';
import { type AddressInfo, createServer } from 'node:net';
import { io } from 'socket.io-client';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { createConnection } from 'mysql2/promise';
import { userInfo } from 'node:os';
import { inject } from 'vitest';
import { openTestDatabase, type TestDatabase } from './database/test-database.js';
import type { Loose } from './test-gateway.js';

describe('the gateway as a program', () => {
  let database: TestDatabase;
  let settings: Record<string, string>;
  const children: ChildProcess[] = [];

  beforeAll(async () => {
    database = await openTestDatabase();
    const { host, port, name, user, password } = database.access;
    settings = {
      STILLROOM_DB_HOST: host,
      STILLROOM_DB_PORT: String(port),
      STILLROOM_DB_NAME: name,
      STILLROOM_DB_USER: user,
      STILLROOM_DB_PASSWORD: password,
      STILLROOM_JWT_SECRET: randomBytes(32).toString('base64url'),
      STILLROOM_HTTP_PORT: String(await freePort()),
      STILLROOM_MQTT_PORT: String(await freePort()),
    };
  });
  afterEach(async () => {
    for (const child of children.splice(0)) if (child.exitCode === null) child.kill('SIGKILL');
  });
  afterAll(() => database.close());

  /** Starts a command of the gateway; what it prints can be read while it runs. */
  function run(file: string, env: Record<string, string>, args: string[] = []) {
    const child = spawn(process.execPath, ['--import', 'tsx', file, ...args], {
      env: { PATH: process.env['PATH'], TSX_TSCONFIG_PATH: 'gateway/tsconfig.json', ...env },
      stdio: ['pipe', 'pipe', 'pipe'],
    });
    children.push(child);
    const out = { text: '' };
    child.stdout.on('data', (chunk: Buffer) => (out.text += chunk.toString()));
    child.stderr.on('data', (chunk: Buffer) => (out.text += chunk.toString()));
    const ended = once(child, 'close').then(([code]) => code as number | null);
    return { child, out, ended };
  }

  const pages = () => `http://127.0.0.1:${settings['STILLROOM_HTTP_PORT']}`;
  const up = async () => (await fetch(`${pages()}/api/health`).catch(() => null))?.status;

  it('starts, answers, lets owners be made, and stops cleanly on SIGTERM with its connections told', async () => {
    const gateway = run('gateway/main.ts', settings);
    await expect.poll(up, { timeout: 20_000 }).toBe(200);

    const password = 'copper kettle by noon';
    const made = run('gateway/create-owner.ts', settings, [
      '--email',
      'Olive@Larkrise.example',
      '--name',
      'Olive Owner',
      '--password-stdin',
    ]);
    made.child.stdin.end(`${password}\n`);
    expect([await made.ended, made.out.text]).toEqual([0, expect.stringContaining('can sign in')]);
    const signedIn = await post('/api/sign-in', { email: 'olive@larkrise.example', password });
    expect(signedIn.me).toMatchObject({ owner: true, name: 'Olive Owner' });

    const socket = io(pages(), {
      transports: ['websocket'],
      reconnection: false,
      auth: { token: signedIn.accessToken },
    });
    await new Promise((resolve) => socket.once('welcome', resolve));
    const goodbye = new Promise((resolve) => socket.once('goodbye', resolve));
    const stoppedAt = performance.now();
    gateway.child.kill('SIGTERM');
    expect(await goodbye).toEqual({ reason: 'gateway-stopping' });
    expect(await gateway.ended).toBe(0);
    expect(performance.now() - stoppedAt).toBeLessThan(10_000);
    expect(gateway.out.text).toContain('"msg":"stopped"');
    for (const secret of [settings['STILLROOM_JWT_SECRET']!, password, signedIn.accessToken])
      expect(gateway.out.text).not.toContain(secret);
    socket.disconnect();
  });

  it('makes an owner with a link that works once', async () => {
    const gateway = run('gateway/main.ts', settings);
    await expect.poll(up, { timeout: 20_000 }).toBe(200);
    const made = run('gateway/create-owner.ts', {
      ...settings,
      STILLROOM_OWNER_EMAIL: 'otto@larkrise.example',
    });
    expect(await made.ended).toBe(0);
    const token = /\/invitation\/([\w-]{43})/.exec(made.out.text)![1]!;
    expect(
      await post(`/api/invitations/${token}/accept`, { name: 'Otto Owner', password: 'amber shelf at dusk' }),
    ).toBeNull();
    expect(
      (await post('/api/sign-in', { email: 'otto@larkrise.example', password: 'amber shelf at dusk' })).me
        .owner,
    ).toBe(true);
    const again = run('gateway/create-owner.ts', settings, ['--email', 'otto@larkrise.example']);
    expect(await again.ended).toBe(0);
    expect(again.out.text).toMatch(/\/reset-password\/[\w-]{43}/);
    gateway.child.kill('SIGINT');
    expect(await gateway.ended).toBe(0);
  });

  it('names every setting that is missing or wrong and ends with 2', async () => {
    const { STILLROOM_DB_PASSWORD: _password, ...rest } = settings;
    const started = run('gateway/main.ts', {
      ...rest,
      STILLROOM_HTTP_PORT: 'eighty',
      STILLROOM_JWT_SECRET: 'short',
    });
    expect(await started.ended).toBe(2);
    for (const name of ['STILLROOM_DB_PASSWORD', 'STILLROOM_HTTP_PORT', 'STILLROOM_JWT_SECRET'])
      expect(started.out.text).toContain(name);
    expect(started.out.text).not.toContain('    at ');
  });

  it.each(['STILLROOM_HTTP_PORT', 'STILLROOM_MQTT_PORT'])(
    'says in a sentence when the port of %s is taken',
    async (variable) => {
      const other = createServer().listen(Number(settings[variable]), '127.0.0.1');
      await once(other, 'listening');
      const started = run('gateway/main.ts', settings);
      expect(await started.ended).toBe(2);
      expect(started.out.text).toContain(
        `Port ${settings[variable]} on 127.0.0.1 is taken by another program.`,
      );
      expect(started.out.text).toContain(variable);
      other.close();
      await once(other, 'close');
    },
  );

  it('refuses a database with a wrong password, and one without tables', async () => {
    const wrong = run('gateway/main.ts', { ...settings, STILLROOM_DB_PASSWORD: 'wrong' });
    expect(await wrong.ended).toBe(2);
    expect(wrong.out.text).toContain('STILLROOM_DB_PASSWORD');
    const empty = await emptyDatabase(database.access.user);
    const started = run('gateway/main.ts', { ...settings, STILLROOM_DB_NAME: empty.name });
    expect(await started.ended).toBe(2);
    expect(started.out.text).toContain('Run gateway/migrate first');
    await empty.drop();
  });

  it('refuses a bad address, a weak password and an unknown flag for an owner', async () => {
    const bad = run('gateway/create-owner.ts', settings, ['--email', 'nonsense']);
    expect([await bad.ended, bad.out.text]).toEqual([2, expect.stringContaining('--email ines@example.org')]);
    const weak = run('gateway/create-owner.ts', settings, [
      '--email',
      'ines@larkrise.example',
      '--password-stdin',
    ]);
    weak.child.stdin.end('stillroom1\n');
    expect([await weak.ended, weak.out.text]).toEqual([2, expect.stringContaining('guessed first')]);
    const unknown = run('gateway/create-owner.ts', settings, ['--mail', 'x']);
    expect([await unknown.ended, unknown.out.text]).toEqual([2, expect.stringContaining('--mail')]);
  });

  async function post(path: string, body: object): Promise<Loose> {
    const response = await fetch(`${pages()}${path}`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify(body),
    });
    const text = await response.text();
    return text === '' ? null : JSON.parse(text);
  }
});

async function freePort(): Promise<number> {
  const probe = createServer().listen(0, '127.0.0.1');
  await once(probe, 'listening');
  const { port } = probe.address() as AddressInfo;
  probe.close();
  await once(probe, 'close');
  return port;
}

/** A database without tables that an account may use. */
async function emptyDatabase(user: string): Promise<{ name: string; drop: () => Promise<void> }> {
  const name = `spec_${randomBytes(6).toString('hex')}`;
  const administrator = await createConnection({
    socketPath: inject('database').socket,
    user: userInfo().username,
    multipleStatements: true,
  });
  await administrator.query(
    `CREATE DATABASE ${name}; GRANT SELECT, INSERT, UPDATE, DELETE ON ${name}.* TO '${user}'@'127.0.0.1'`,
  );
  return {
    name,
    async drop() {
      await administrator.query(`DROP DATABASE ${name}`);
      await administrator.end();
    },
  };
}
