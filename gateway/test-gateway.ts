import { randomBytes, randomUUID } from 'node:crypto';
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Logger } from 'pino';
import type { StudioRole } from '#shared/contract/roles';
import { assemble, type Gateway } from './assemble.js';
import { systemClock } from './clock.js';
import { createLog } from './create-log.js';
import { openTestDatabase, type TestDatabase } from './database/test-database.js';
import { AccessTokens } from './features/sign-in/access-tokens.js';
import { readSettings, type Settings } from './settings.js';

/** A person of a test gateway, signed in. */
export interface TestPerson {
  readonly id: string;
  readonly email: string;
  readonly name: string;
  readonly sessionId: string;
  readonly token: string;
}

/** What an answer holds; specs say what they expect of it. */
export type Loose = ReturnType<typeof JSON.parse>;

export interface Answer {
  readonly status: number;
  /** The parsed body; null for none. */
  readonly body: Loose;
  readonly headers: Headers;
}

const SECRET = randomBytes(32).toString('base64url');

/** The whole gateway on a database of its own, on free ports, for integration specs. */
export class TestGateway {
  readonly #tokens = new AccessTokens(SECRET, systemClock);

  private constructor(
    readonly database: TestDatabase,
    readonly gateway: Gateway,
    readonly settings: Settings,
    private readonly folder: string,
  ) {}

  static async open(log: Logger = createLog('silent')): Promise<TestGateway> {
    const database = await openTestDatabase();
    const folder = mkdtempSync(join(tmpdir(), 'stillroom-gateway-'));
    mkdirSync(join(folder, 'web'));
    writeFileSync(
      join(folder, 'web/index.html'),
      '<!doctype html><title>Stillroom</title><body><sr-app></sr-app></body>',
    );
    writeFileSync(join(folder, 'outside.txt'), 'nobody may read this');
    const { host, port, name, user, password } = database.access;
    const given = readSettings({
      STILLROOM_COMPANY: 'Larkrise Candleworks',
      STILLROOM_DB_HOST: host,
      STILLROOM_DB_PORT: String(port),
      STILLROOM_DB_NAME: name,
      STILLROOM_DB_USER: user,
      STILLROOM_DB_PASSWORD: password,
      STILLROOM_JWT_SECRET: SECRET,
      STILLROOM_WEB_DIR: join(folder, 'web'),
    });
    const settings = { ...given, http: { ...given.http, port: 0 }, mqtt: { ...given.mqtt, port: 0 } };
    const gateway = assemble(settings, log);
    await gateway.start();
    return new TestGateway(database, gateway, settings, folder);
  }

  get url(): string {
    return this.gateway.url();
  }

  async close(): Promise<void> {
    await this.gateway.stop();
    await this.database.close();
    rmSync(this.folder, { recursive: true, force: true });
  }

  query<T = unknown>(sql: string, values: readonly unknown[] = []): Promise<T> {
    return this.database.dataSource.query<T>(sql, [...values]);
  }

  async addStudio(name: string, timeZone = 'Europe/Lisbon'): Promise<string> {
    const id = randomUUID();
    await this.query(
      `INSERT INTO studio (id, name, time_zone, unit, address, pressure_hpa, recipients, escalate_after_minutes) VALUES (?,?,?,'C','',1013,'[]',30)`,
      [id, name, timeZone],
    );
    this.gateway.feeds.layout.announce({ studioId: id, roomId: null });
    return id;
  }

  /** A person with an open session and an access token for it. */
  async addPerson(
    name: string,
    roles: { readonly owner?: boolean; readonly memberships?: Readonly<Record<string, StudioRole>> } = {},
  ): Promise<TestPerson> {
    const id = randomUUID();
    const email = `${name.toLowerCase().replaceAll(/[^a-z]+/g, '.')}.${id.slice(0, 6)}@larkrise.example`;
    await this.query(
      'INSERT INTO person (id, email, name, password_hash, owner, created_at) VALUES (?,?,?,?,?,?)',
      [id, email, name, 'no password fits this', roles.owner ? 1 : 0, new Date()],
    );
    for (const [studioId, role] of Object.entries(roles.memberships ?? {})) {
      await this.query('INSERT INTO membership (person_id, studio_id, role) VALUES (?,?,?)', [
        id,
        studioId,
        role,
      ]);
    }
    return { id, email, name, ...(await this.signIn(id)) };
  }

  /** Another session of a person. */
  async signIn(personId: string): Promise<{ sessionId: string; token: string }> {
    const sessionId = randomUUID();
    await this.query(
      `INSERT INTO session (id, person_id, user_agent, address, created_at, last_used_at) VALUES (?,?,'spec','127.0.0.1',?,?)`,
      [sessionId, personId, new Date(), new Date()],
    );
    const [row] = await this.query<{ v: number }[]>('SELECT token_version AS v FROM person WHERE id = ?', [
      personId,
    ]);
    const { token } = this.#tokens.issue({ personId, sessionId, tokenVersion: row?.v ?? 0 });
    return { sessionId, token };
  }

  /** Calls the API as a person, or as nobody. */
  async call(
    who: { readonly token: string } | null,
    method: string,
    path: string,
    body?: unknown,
    headers: Record<string, string> = {},
  ): Promise<Answer> {
    const response = await fetch(`${this.url}${path}`, {
      method,
      headers: {
        ...(who ? { Authorization: `Bearer ${who.token}` } : {}),
        ...(body === undefined ? {} : { 'Content-Type': 'application/json' }),
        ...headers,
      },
      ...(body === undefined ? {} : { body: typeof body === 'string' ? body : JSON.stringify(body) }),
    });
    const text = await response.text();
    const isJson = response.headers.get('content-type')?.includes('json') ?? false;
    return {
      status: response.status,
      body: text === '' ? null : isJson ? JSON.parse(text) : text,
      headers: response.headers,
    };
  }
}
