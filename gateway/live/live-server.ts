import type { IncomingMessage, Server as HttpServer } from 'node:http';
import type { Logger } from 'pino';
import { Server } from 'socket.io';
import { z } from 'zod';
import * as f from '#shared/contract/fields';
import type { LiveWelcome, goodbye } from '#shared/contract/live';
import type { Holdings } from '#shared/contract/roles';
import type { NoticeWritten, PersonChanged } from '../announcements.js';
import type { Clock } from '../clock.js';
import type { SignedInPerson } from '../http/actor.js';
import { ProblemError } from '../http/problem-error.js';
import { AUDIENCES, type Audience, audienceOf, ofPerson, ofStudio } from './audience.js';
import type { FrameCollector } from './frame-collector.js';
import {
  type LiveIo,
  type LiveServerSocket,
  PacketAllowance,
  dropConnection,
  waitingBytes,
} from './live-socket.js';
import { RecentChanges } from './recent-changes.js';
import type { StudioRooms } from './room-directory.js';

export interface LiveServerParts {
  readonly http: HttpServer;
  readonly allowedOrigins: () => readonly string[];
  /** @throws ProblemError when the token is not good */
  readonly authenticate: (token: string) => Promise<{ person: SignedInPerson; expiresAt: number }>;
  readonly collector: FrameCollector;
  readonly directory: StudioRooms;
  /** The time frames carry. */
  readonly clock: Clock;
  /** The time tokens end by. */
  readonly systemClock: Clock;
  readonly log: Logger;
  /** Time between frames of a studio. */
  readonly everyMs?: number;
  /** A client that lets more than this wait unread is dropped. */
  readonly mostWaitingBytes?: number;
}

const LARGEST_MESSAGE = 8 * 1024;
const PACKETS = { burst: 30, aSecond: 3 };
const MOST_SOCKETS_OF_PERSON = 40;
const LOOK_OVER_TICKS = 5;
const LONGEST_TIMER_MS = 2 ** 31 - 1;

const handshakeToken = z.string().min(1).max(4096);
type GoodbyeReason = z.infer<typeof goodbye>['reason'];

/** The live connection: who may join is decided here, what is sent comes from the collector. */
export class LiveServer {
  readonly #io: LiveIo;
  readonly #changes = new RecentChanges();
  readonly #relaid = new Set<string>();
  #timer: NodeJS.Timeout | undefined;
  #ticks = 0;
  #speed: number;
  #ticking: Promise<void> = Promise.resolve();
  #busy = false;
  #stopping = false;

  constructor(private readonly parts: LiveServerParts) {
    this.#speed = parts.clock.speed();
    this.#io = new Server({
      transports: ['websocket'],
      serveClient: false,
      maxHttpBufferSize: LARGEST_MESSAGE,
      connectTimeout: 10_000,
      allowRequest: (request, decide) => decide(null, this.#mayConnect(request)),
    });
    this.#io.use((socket, next) => {
      this.#admit(socket).then(
        () => next(),
        (error: unknown) => next(refusal(error)),
      );
    });
    this.#io.on('connection', (socket) => this.#welcome(socket));
  }

  /** Takes connections on the web server and begins to send. */
  async start(): Promise<void> {
    await this.parts.directory.reload();
    this.#io.attach(this.parts.http);
    this.#io.engine.on('connection', (conn: LiveServerSocket['conn']) => this.#watch(conn));
    this.#timer = setInterval(() => this.#tickSoon(), this.parts.everyMs ?? 1000);
  }

  /** Says goodbye and closes every connection; the web server itself is left alone. */
  async stop(): Promise<void> {
    this.#stopping = true;
    clearInterval(this.#timer);
    await this.#ticking;
    for (const socket of this.#io.sockets.sockets.values()) this.#cut(socket, 'gateway-stopping');
    this.#io.disconnectSockets(true);
    this.#io.engine?.close();
  }

  /** Open connections. */
  get size(): number {
    return this.#io.sockets.sockets.size;
  }

  /** Cuts the connections of a person, or of one of their sessions. */
  personChanged(change: PersonChanged): void {
    this.#changes.add(change);
    for (const socket of this.#io.sockets.sockets.values()) {
      const { person } = socket.data;
      if (person.id !== change.personId) continue;
      if (change.sessionId === null || change.sessionId === person.sessionId)
        this.#cut(socket, change.reason);
    }
  }

  /** Rooms, racks, sensors or the studio itself changed: told with the next frame. */
  layoutChanged(studioId: string): void {
    this.#relaid.add(studioId);
  }

  noticeWritten({ personId, notice }: NoticeWritten): void {
    this.#io.to(ofPerson(personId)).emit('notice', notice);
  }

  #mayConnect(request: IncomingMessage): boolean {
    const { origin } = request.headers;
    // Browsers always name the origin; what is no browser cannot be made to connect by another site.
    return !this.#stopping && (origin === undefined || this.parts.allowedOrigins().includes(origin));
  }

  #watch(conn: LiveServerSocket['conn']): void {
    const allowance = new PacketAllowance(PACKETS.burst, PACKETS.aSecond, () => performance.now());
    conn.on('packet', () => {
      if (allowance.take()) return;
      this.parts.log.warn({ address: conn.remoteAddress }, 'a live connection sent too much and was closed');
      dropConnection(conn);
    });
  }

  async #admit(socket: LiveServerSocket): Promise<void> {
    const changesSeen = this.#changes.count;
    const token = handshakeToken.safeParse(socket.handshake.auth['token']);
    if (!token.success) throw new ProblemError('sign-in-needed', 'Sign in first.');
    const { person, expiresAt } = await this.parts.authenticate(token.data);
    const open = this.#io.sockets.adapter.rooms.get(ofPerson(person.id))?.size ?? 0;
    if (open >= MOST_SOCKETS_OF_PERSON) {
      throw new ProblemError('too-many-tries', 'Stillroom is open in very many windows. Close some of them.');
    }
    socket.data = { person, expiresAt, changesSeen, expiry: undefined };
  }

  #welcome(socket: LiveServerSocket): void {
    const { person, changesSeen } = socket.data;
    // Roles that changed while they were being read: nobody was there yet to be cut.
    const change = this.#changes.since(changesSeen, person);
    if (change) return this.#cut(socket, change);
    void socket.join(ofPerson(person.id));
    for (const studioId of this.parts.directory.studios()) this.#join(socket, studioId);
    this.#cutAtExpiry(socket);
    socket.on('disconnect', () => clearTimeout(socket.data.expiry));
    socket.on('token', (token, done) => {
      void this.#renew(socket, token).then((taken) => answer(done, taken));
    });
    socket.on('resync', (studioId, done) => answer(done, this.#resync(socket, studioId)));
    socket.emit('welcome', this.#snapshot(person, this.parts.directory.studios()));
  }

  #join(socket: LiveServerSocket, studioId: string): void {
    const audience = audienceOf(socket.data.person, studioId);
    if (audience) void socket.join(ofStudio(studioId, audience));
  }

  #snapshot(person: Holdings, studioIds: readonly string[]): LiveWelcome {
    const { collector, clock } = this.parts;
    const studios = studioIds.flatMap((studioId) => {
      const audience = audienceOf(person, studioId);
      return audience ? [{ studioId, seq: collector.seq(studioId, audience) }] : [];
    });
    return { at: new Date(clock.now()).toISOString(), studios, domainSpeed: clock.speed() };
  }

  #resync(socket: LiveServerSocket, studioId: unknown): LiveWelcome | null {
    const id = f.id.safeParse(studioId);
    if (!id.success || !this.parts.directory.studios().includes(id.data)) return null;
    if (!audienceOf(socket.data.person, id.data)) return null;
    return this.#snapshot(socket.data.person, [id.data]);
  }

  /** Takes a fresh token of the same session. */
  async #renew(socket: LiveServerSocket, token: unknown): Promise<boolean> {
    const given = handshakeToken.safeParse(token);
    if (!given.success) return false;
    try {
      const { person, expiresAt } = await this.parts.authenticate(given.data);
      if (person.sessionId !== socket.data.person.sessionId || !socket.connected) return false;
      socket.data.expiresAt = Math.max(expiresAt, socket.data.expiresAt);
      this.#cutAtExpiry(socket);
      return true;
    } catch {
      return false;
    }
  }

  #cutAtExpiry(socket: LiveServerSocket): void {
    clearTimeout(socket.data.expiry);
    const left = Math.max(0, socket.data.expiresAt - this.parts.systemClock.now());
    socket.data.expiry = setTimeout(() => this.#cut(socket, 'expired'), Math.min(left, LONGEST_TIMER_MS));
    socket.data.expiry.unref();
  }

  #cut(socket: LiveServerSocket, reason: GoodbyeReason): void {
    clearTimeout(socket.data.expiry);
    socket.emit('goodbye', { reason });
    socket.disconnect(true);
  }

  /** One tick at a time; a slow one swallows those that fall due meanwhile. */
  #tickSoon(): void {
    if (this.#busy) return;
    this.#busy = true;
    this.#ticking = this.#tick()
      .catch((error: unknown) => this.parts.log.error({ err: error }, 'live frames could not be made'))
      .finally(() => (this.#busy = false));
  }

  async #tick(): Promise<void> {
    this.#dropStalled();
    this.#tellSpeed();
    await this.#tellLayout();
    const lookOver = ++this.#ticks % LOOK_OVER_TICKS === 0;
    const { collector, directory } = this.parts;
    for (const studioId of directory.studios()) {
      const audiences = AUDIENCES.filter((audience) => this.#isHeard(studioId, audience));
      if (audiences.length === 0) {
        collector.forget(studioId);
        continue;
      }
      if (lookOver) await collector.lookOver(studioId, directory.roomsOf(studioId));
      for (const { audience, frame } of await collector.frames(studioId, audiences))
        this.#io.to(ofStudio(studioId, audience)).emit('frame', frame);
    }
  }

  #isHeard(studioId: string, audience: Audience): boolean {
    return (this.#io.sockets.adapter.rooms.get(ofStudio(studioId, audience))?.size ?? 0) > 0;
  }

  #dropStalled(): void {
    const most = this.parts.mostWaitingBytes ?? 1_000_000;
    for (const socket of this.#io.sockets.sockets.values()) {
      if (waitingBytes(socket.conn) <= most) continue;
      this.parts.log.warn(
        { personId: socket.data.person.id },
        'a live connection did not read and was closed; the page comes back by itself',
      );
      dropConnection(socket.conn);
    }
  }

  /** The demo runs at another speed: pages tell the time by it. */
  #tellSpeed(): void {
    const speed = this.parts.clock.speed();
    if (speed === this.#speed) return;
    this.#speed = speed;
    for (const socket of this.#io.sockets.sockets.values())
      socket.emit('welcome', this.#snapshot(socket.data.person, this.parts.directory.studios()));
  }

  async #tellLayout(): Promise<void> {
    if (this.#relaid.size === 0) return;
    const relaid = [...this.#relaid];
    await this.parts.directory.reload();
    for (const studioId of relaid) this.#relaid.delete(studioId);
    // A new studio is every owner's at once; joining again changes nothing. Others come to it by a change of role.
    for (const socket of this.#io.sockets.sockets.values())
      for (const studioId of this.parts.directory.studios()) this.#join(socket, studioId);
    for (const studioId of relaid) {
      for (const audience of AUDIENCES)
        this.#io.to(ofStudio(studioId, audience)).emit('layout', { studioId });
    }
  }
}

/** Clients may leave the callback out or send something else in its place. */
function answer<T>(done: unknown, value: T): void {
  if (typeof done === 'function') (done as (value: T) => void)(value);
}

function refusal(error: unknown): Error {
  const known = error instanceof ProblemError ? error : null;
  const refused: Error & { data?: { code: string } } = new Error(
    known?.detail ?? 'The live connection could not be opened. It is tried again.',
  );
  refused.data = { code: known?.code ?? 'internal' };
  return refused;
}
