import { effect, inject, Injectable, signal, untracked } from '@angular/core';
import type { LiveFrame, LiveWelcome, ServerToClient } from '#shared/contract/live';
import type { overviewRoutes } from '#shared/contract/overview';
import { Announcer } from '../announcer/announcer';
import { Api } from '../api/api';
import { sentenceOf } from '../api/api-error';
import { NoticesStore } from '../notices/notices-store';
import { Session } from '../session/session';
import { StudioClock } from '../time/studio-clock';
import { type LiveSocket, OPEN_LIVE_SOCKET } from './live-socket';
import type { RoomLive } from './room-live';
import { StudioLive } from './studio-live';

export type Connection =
  | { readonly state: 'connecting' }
  | { readonly state: 'live' }
  /** `since` in epoch ms of this device. */
  | { readonly state: 'lost'; readonly since: number };

const RECONNECT_MS = 1000;
const LAYOUT_PAUSE_MS = 300;

/**
 * Every own studio as it is now. Starts from the overview, is kept up by frames, loads the overview again after a
 * hole in their numbers, and recovers a lost connection by itself.
 */
@Injectable({ providedIn: 'root' })
export class LiveStore {
  private readonly api = inject(Api);
  private readonly session = inject(Session);
  private readonly notices = inject(NoticesStore);
  private readonly announcer = inject(Announcer);
  private readonly clock = inject(StudioClock);
  private readonly open = inject(OPEN_LIVE_SOCKET);

  private readonly writableStudios = signal<readonly StudioLive[]>([]);
  private readonly writableLoaded = signal(false);
  private readonly writableFault = signal<string | null>(null);
  private readonly writableConnection = signal<Connection>({ state: 'connecting' });

  /** Own studios in the order of the company. */
  readonly studios = this.writableStudios.asReadonly();
  /** True from the first overview on. */
  readonly loaded = this.writableLoaded.asReadonly();
  /** The sentence to show when the overview could not be loaded, or null. */
  readonly fault = this.writableFault.asReadonly();
  readonly connection = this.writableConnection.asReadonly();

  private socket: LiveSocket | null = null;
  /** Counts starts and stops, so that an answer to an earlier run is recognised. */
  private run = 0;
  private active = false;
  private loading: Promise<void> | null = null;
  /** Last frame seen of each studio. */
  private readonly seen = new Map<string, number>();
  /** Frames that arrive while an overview is on its way. */
  private waiting: LiveFrame[] = [];
  private timer: ReturnType<typeof setTimeout> | undefined;
  private layoutTimer: ReturnType<typeof setTimeout> | undefined;

  constructor() {
    effect(() => {
      const token = this.session.accessToken();
      if (token !== null && this.socket?.connected) {
        this.socket.emit('token', token, (taken) => {
          if (!taken) this.reconnect();
        });
      }
    });
    addEventListener('offline', () => this.lose());
    addEventListener('online', () => {
      if (this.active && this.writableConnection().state === 'lost') this.reconnect();
    });
  }

  /** Loads the overview and keeps it live until `stop`. */
  async start(): Promise<void> {
    const run = ++this.run;
    this.active = true;
    this.writableConnection.set({ state: 'connecting' });
    void this.reload();
    void this.notices.load().catch(() => undefined);
    const socket = await this.open(() => this.session.freshToken());
    if (run !== this.run) return;
    this.socket = socket;
    this.listen(socket);
    socket.connect();
  }

  /** Ends the connection and forgets everything. */
  stop(): void {
    this.run++;
    this.active = false;
    clearTimeout(this.timer);
    clearTimeout(this.layoutTimer);
    this.socket?.removeAllListeners();
    this.socket?.disconnect();
    this.socket = null;
    this.seen.clear();
    this.waiting = [];
    this.writableStudios.set([]);
    this.writableLoaded.set(false);
    this.writableFault.set(null);
    this.notices.clear();
  }

  /** Loads the overview anew. Never throws; a failure shows in `fault`. */
  reload(): Promise<void> {
    this.loading ??= this.loadOverview().finally(() => {
      this.loading = null;
    });
    return this.loading;
  }

  /** A studio by its id; follows changes when read inside a computed. */
  studio(studioId: string): StudioLive | undefined {
    return this.writableStudios().find((studio) => studio.id === studioId);
  }

  /** A room by its id, in whichever own studio. */
  room(roomId: string): { readonly studio: StudioLive; readonly room: RoomLive } | undefined {
    for (const studio of this.writableStudios()) {
      const room = studio.rooms().find((one) => one.id === roomId);
      if (room) return { studio, room };
    }
    return undefined;
  }

  private async loadOverview(): Promise<void> {
    const run = this.run;
    try {
      const overview = await this.api.call<typeof overviewRoutes.walls>('GET', '/api/overview');
      if (run !== this.run) return;
      const known = new Map(untracked(this.writableStudios).map((studio) => [studio.id, studio]));
      this.writableStudios.set(
        overview.studios.map((wall) => {
          const studio = known.get(wall.studio.id);
          studio?.takeWall(wall);
          return studio ?? new StudioLive(wall);
        }),
      );
      this.clock.align(Date.parse(overview.at));
      this.writableLoaded.set(true);
      this.writableFault.set(null);
      for (const frame of this.waiting.splice(0)) this.lay(frame);
    } catch (error) {
      if (run === this.run) this.writableFault.set(sentenceOf(error));
    }
  }

  private listen(socket: LiveSocket): void {
    const handlers: ServerToClient = {
      welcome: (welcome) => this.welcomed(welcome),
      frame: (frame) => this.arrived(frame),
      notice: (notice) => this.notices.arrived(notice),
      layout: () => {
        clearTimeout(this.layoutTimer);
        this.layoutTimer = setTimeout(() => void this.reload(), LAYOUT_PAUSE_MS);
      },
      goodbye: ({ reason }) => {
        if (reason === 'signed-out') this.session.end('signed-out');
        else if (reason === 'role-changed') void this.session.refresh('role-changed');
      },
    };
    for (const [name, handler] of Object.entries(handlers)) {
      socket.on(name as keyof ServerToClient, handler as never);
    }
    socket.on('disconnect', (reason) => {
      this.lost();
      // The library comes back by itself except when the gateway itself closed the connection.
      if (reason === 'io server disconnect') this.reconnectSoon();
    });
    socket.on('connect_error', () => {
      this.lost();
      if (!socket.active) void this.session.refresh().then((signedIn) => signedIn && this.reconnectSoon());
    });
  }

  private welcomed(welcome: LiveWelcome): void {
    const wasLost = this.writableConnection().state === 'lost';
    this.seen.clear();
    for (const { studioId, seq } of welcome.studios) this.seen.set(studioId, seq);
    this.clock.align(Date.parse(welcome.at), welcome.domainSpeed);
    this.writableConnection.set({ state: 'live' });
    if (wasLost) this.announcer.say('The connection is back; figures are live again.');
    void this.loadAfresh();
  }

  /** An overview asked for before the welcome may miss what happened in between. */
  private async loadAfresh(): Promise<void> {
    await this.loading;
    await this.reload();
  }

  private arrived(frame: LiveFrame): void {
    const last = this.seen.get(frame.studioId);
    if (last !== undefined && frame.seq <= last) return;
    this.clock.align(Date.parse(frame.at));
    const hole = last === undefined || frame.seq > last + 1;
    this.seen.set(frame.studioId, frame.seq);
    if (this.loading) this.waiting.push(frame);
    else this.lay(frame);
    if (hole) this.resync(frame.studioId);
  }

  private lay(frame: LiveFrame): void {
    this.studio(frame.studioId)?.takeFrame(frame);
  }

  private resync(studioId: string): void {
    this.socket?.emit('resync', studioId, (welcome) => {
      if (welcome) void this.loadAfresh();
    });
  }

  private lost(): void {
    if (this.writableConnection().state === 'lost') return;
    this.writableConnection.set({ state: 'lost', since: Date.now() });
    this.announcer.interrupt('The connection is lost. Figures are the last known.');
  }

  private lose(): void {
    if (!this.active || !this.socket) return;
    this.lost();
    this.socket.disconnect();
  }

  private reconnectSoon(): void {
    clearTimeout(this.timer);
    this.timer = setTimeout(() => this.reconnect(), RECONNECT_MS);
  }

  private reconnect(): void {
    if (!this.socket || !this.session.signedIn()) return;
    this.socket.disconnect();
    this.socket.connect();
  }
}
