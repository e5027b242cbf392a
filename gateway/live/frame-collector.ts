import type { LiveFrame } from '#shared/contract/live';
import type { RoomNow } from '#shared/contract/overview';
import type { Clock } from '../clock.js';
import type { Audience } from './audience.js';
import type { FrameSource } from './frame-source.js';

/** What changed in a studio since its last frame. */
interface Pending {
  readonly rooms: Set<string>;
  /** First changed cell by room. */
  readonly ribbons: Map<string, number>;
  readonly batches: Set<string>;
  readonly alerts: Set<string>;
}

const nothingYet = (): Pending => ({
  rooms: new Set(),
  ribbons: new Map(),
  batches: new Set(),
  alerts: new Set(),
});

/** Gathers what changed, studio by studio, and makes one frame of it for each audience. */
export class FrameCollector {
  readonly #pending = new Map<string, Pending>();
  readonly #seq = new Map<string, number>();
  /** Rooms as they were last sent or looked at. */
  readonly #lastNow = new Map<string, string>();

  constructor(
    private readonly source: FrameSource,
    private readonly clock: Clock,
  ) {}

  roomChanged(studioId: string, roomId: string): void {
    this.#of(studioId).rooms.add(roomId);
  }

  ribbonChanged(studioId: string, roomId: string, fromCell: number): void {
    const { ribbons, rooms } = this.#of(studioId);
    ribbons.set(roomId, Math.min(fromCell, ribbons.get(roomId) ?? Infinity));
    rooms.add(roomId);
  }

  batchesChanged(studioId: string, batchIds: readonly string[]): void {
    const { batches } = this.#of(studioId);
    for (const id of batchIds) batches.add(id);
  }

  alertChanged(studioId: string, alertId: string): void {
    this.#of(studioId).alerts.add(alertId);
  }

  /** Number of the last frame that an audience of a studio was sent. */
  seq(studioId: string, audience: Audience): number {
    return this.#seq.get(`${studioId} ${audience}`) ?? 0;
  }

  /** Forgets what changed where nobody looks: whoever comes loads the overview first. */
  forget(studioId: string): void {
    this.#pending.delete(studioId);
  }

  /** Marks rooms that read otherwise than when last sent, though nothing told: falling silent makes no noise. */
  async lookOver(studioId: string, roomIds: readonly string[]): Promise<void> {
    for (const now of await this.source.roomNow(roomIds)) {
      if (this.#lastNow.get(now.roomId) !== JSON.stringify(now)) this.roomChanged(studioId, now.roomId);
    }
  }

  /**
   * Frames of what changed in a studio, for those audiences to whom it says something; their numbers are given here.
   * When the source fails, everything stays due.
   */
  async frames(
    studioId: string,
    audiences: readonly Audience[],
  ): Promise<{ audience: Audience; frame: LiveFrame }[]> {
    const pending = this.#pending.get(studioId);
    if (!pending || audiences.length === 0) return [];
    this.#pending.delete(studioId);
    try {
      const contents = await this.#contents(pending, audiences);
      return contents
        .filter(({ frame }) => saysSomething(frame))
        .map(({ audience, frame }) => {
          const seq = this.seq(studioId, audience) + 1;
          this.#seq.set(`${studioId} ${audience}`, seq);
          return {
            audience,
            frame: { studioId, seq, at: new Date(this.clock.now()).toISOString(), ...frame },
          };
        });
    } catch (error) {
      this.#putBack(studioId, pending);
      throw error;
    }
  }

  async #contents(pending: Pending, audiences: readonly Audience[]) {
    // The alerts a studio's viewers must not see still change how its rooms look.
    const alerts = pending.alerts.size > 0 ? await this.source.alerts([...pending.alerts]) : [];
    for (const { roomId } of alerts) if (roomId !== null) pending.rooms.add(roomId);
    const rooms = pending.rooms.size > 0 ? await this.source.roomNow([...pending.rooms]) : [];
    this.#remember(rooms);
    const ribbons = pending.ribbons.size > 0 ? await this.source.ribbons(pending.ribbons) : [];
    const ids = [...pending.batches];
    return Promise.all(
      audiences.map(async (audience) => {
        const forViewer = audience === 'viewers';
        const batches = ids.length > 0 ? await this.source.cards(ids, forViewer) : [];
        const curing = new Set(batches.map(({ id }) => id));
        const goneBatches = ids.filter((id) => !curing.has(id));
        return {
          audience,
          frame: { rooms, ribbons, batches, goneBatches, alerts: forViewer ? [] : alerts },
        };
      }),
    );
  }

  #remember(rooms: readonly RoomNow[]): void {
    for (const now of rooms) this.#lastNow.set(now.roomId, JSON.stringify(now));
  }

  #putBack(studioId: string, old: Pending): void {
    for (const roomId of old.rooms) this.roomChanged(studioId, roomId);
    for (const [roomId, fromCell] of old.ribbons) this.ribbonChanged(studioId, roomId, fromCell);
    this.batchesChanged(studioId, [...old.batches]);
    for (const alertId of old.alerts) this.alertChanged(studioId, alertId);
  }

  #of(studioId: string): Pending {
    let pending = this.#pending.get(studioId);
    if (!pending) {
      pending = nothingYet();
      this.#pending.set(studioId, pending);
    }
    return pending;
  }
}

function saysSomething(frame: Omit<LiveFrame, 'studioId' | 'seq' | 'at'>): boolean {
  return Object.values(frame).some((part) => part.length > 0);
}
