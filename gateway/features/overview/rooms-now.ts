import { dewPoint } from '#shared/air/moist-air';
import type { Ribbon, RoomNow } from '#shared/contract/overview';
import { CELLS_PER_DAY, cellStart } from '#shared/cure/grid';
import type { CommittedReading, LayoutChanged } from '../../announcements.js';
import type { Clock } from '../../clock.js';
import type { Feed } from '../../feed.js';
import type { HistoriesChanged, RoomCells, RoomHistories } from '../../history/room-histories.js';
import type { Estimates } from '../estimates/estimates.js';
import type { Standing } from '../estimates/standing.js';
import { type LocalDay, localDays } from '../rooms/local-days.js';
import type { LatestAir, LatestReadings } from './latest-readings.js';
import type { LatestReadingsRepository, RoomOfStudio } from './latest-readings-repository.js';
import { cellAgrees, type RoomBounds, type RoomState, stateOf } from './room-condition.js';

export interface RoomsNowParts {
  readonly repository: LatestReadingsRepository;
  readonly latest: LatestReadings;
  readonly cells: Pick<RoomCells, 'cells'>;
  readonly histories: RoomHistories;
  readonly estimates: Pick<Estimates, 'roomIsAt'>;
  readonly standing: Pick<Standing, 'heatLimit' | 'slippedHours'>;
  readonly clock: Clock;
  readonly failed: (error: unknown) => void;
}

interface Held {
  readonly state: RoomState;
  readonly since: number | null;
}

/** How every room is right now; kept from committed readings, ready to be put into a frame at any moment. */
export class RoomsNow {
  #rooms = new Map<string, RoomOfStudio>();
  readonly #held = new Map<string, Held>();
  readonly #peaks = new Map<string, { day: number; celsius: number }>();
  readonly #days = new Map<string, LocalDay>();
  #stopping: (() => void)[] = [];
  #reloadDue = false;
  #last: Promise<unknown> = Promise.resolve();

  constructor(private readonly parts: RoomsNowParts) {}

  /** Loads the newest readings of all rooms, then follows what is committed. */
  async start(
    readings: Feed<readonly CommittedReading[]>,
    historiesChanged: Feed<HistoriesChanged>,
    layout: Feed<LayoutChanged>,
  ): Promise<void> {
    this.#stopping = [
      readings.listen((committed) => this.#take(committed)),
      historiesChanged.listen((changed) => this.#look(changed.keys())),
      layout.listen(() => this.#reloadSoon()),
    ];
    await this.#inTurn(() => this.#load());
  }

  async stop(): Promise<void> {
    for (const stop of this.#stopping.splice(0)) stop();
    await this.settled();
  }

  /** Resolves when everything known to be due has been read. */
  async settled(): Promise<void> {
    await this.#last;
  }

  /** Rooms as they are now; rooms that do not exist are left out. */
  of(roomIds: Iterable<string>): RoomNow[] {
    const now = this.parts.clock.now();
    return [...roomIds].flatMap((roomId) => {
      const room = this.#rooms.get(roomId);
      return room ? [this.#roomNow(room, now)] : [];
    });
  }

  /** Ten-minute means of the last 24 hours. */
  ribbons(roomIds: Iterable<string>): { roomId: string; ribbon: Ribbon }[] {
    return this.ribbonsFrom(new Map([...roomIds].map((roomId) => [roomId, -Infinity])));
  }

  /** The same from the given cells on; rooms without a finished cell from there on are left out. */
  ribbonsFrom(fromCells: ReadonlyMap<string, number>): { roomId: string; ribbon: Ribbon }[] {
    const { histories } = this.parts;
    return [...fromCells].flatMap(([roomId, fromCell]) => {
      const first = Math.max(fromCell, histories.end - CELLS_PER_DAY);
      if (first >= histories.end) return [];
      const history = histories.peek(roomId);
      const celsius = Array.from({ length: histories.end - first }, (_, index) => {
        const value = history?.observed(first + index) ?? Number.NaN;
        return Number.isNaN(value) ? null : value;
      });
      return [{ roomId, ribbon: { from: new Date(cellStart(first)).toISOString(), celsius } }];
    });
  }

  #roomNow(room: RoomOfStudio, now: number): RoomNow {
    const { latest, standing } = this.parts;
    const air = latest.air(room.id, now);
    const bounds = this.#bounds(room);
    const { state, since } = this.#hold(room, air, bounds);
    const peak = this.#peaks.get(room.id);
    return {
      roomId: room.id,
      celsius: air?.celsius ?? null,
      humidity: air?.humidity ?? null,
      dewPoint: air === null || air.humidity === null ? null : dewPoint(air.celsius, air.humidity),
      at: air === null ? null : new Date(air.at).toISOString(),
      stale: air?.stale ?? true,
      condition: state === 'above-band' ? 'fine' : state,
      since: since === null ? null : new Date(since).toISOString(),
      heatLimit: bounds.heatLimit,
      peakToday: peak?.day === this.#today(room.timeZone, now).from ? peak.celsius : null,
      slippedHours: standing.slippedHours(room.id),
      battery: latest.battery(room.id),
    };
  }

  /** Without waxes that frost and without a limit of its own, a room is too warm above its band. */
  #bounds({ id, limits }: RoomOfStudio): RoomBounds {
    const { bandLow, bandHigh, humidityHigh, swingLimit } = limits;
    const heatLimit = this.parts.standing.heatLimit(id, limits.heatLimit) ?? bandHigh;
    return { bandLow, bandHigh, heatLimit, humidityHigh, swingLimit };
  }

  /** The present state and since when; a change is dated by the reading that brought it. */
  #hold(room: RoomOfStudio, air: LatestAir | null, bounds: RoomBounds): Held {
    const state = stateOf(air, bounds, this.#swing(room.id));
    const held = this.#held.get(room.id);
    if (held?.state === state) return held;
    const since = held ? (air?.at ?? null) : this.#sinceByHistory(room.id, state, air, bounds);
    const fresh = { state, since };
    this.#held.set(room.id, fresh);
    return fresh;
  }

  /** How far back the ten-minute means agree with the condition without a break. */
  #sinceByHistory(
    roomId: string,
    state: RoomState,
    air: LatestAir | null,
    bounds: RoomBounds,
    humidity: Float64Array | null = null,
  ): number | null {
    const history = this.parts.histories.peek(roomId);
    if (air === null) return null;
    let since = air.at;
    if (!history) return since;
    for (let cell = history.end - 1; cell >= history.origin; cell--) {
      const percent = humidity?.at(cell - history.end) ?? Number.NaN;
      const mean = {
        celsius: history.observed(cell),
        humidity: Number.isNaN(percent) ? null : percent,
      };
      if (Number.isNaN(mean.celsius) || cellAgrees(state, mean, bounds) !== true) break;
      since = Math.min(since, cellStart(cell));
    }
    return since;
  }

  #swing(roomId: string): number {
    const history = this.parts.histories.peek(roomId);
    if (!history) return 0;
    let [low, high] = [Infinity, -Infinity];
    for (let cell = Math.max(history.origin, history.end - CELLS_PER_DAY); cell < history.end; cell++) {
      const celsius = history.observed(cell);
      if (Number.isNaN(celsius)) continue;
      low = Math.min(low, celsius);
      high = Math.max(high, celsius);
    }
    return Math.max(0, high - low);
  }

  #take(committed: readonly CommittedReading[]): void {
    const counted = this.parts.latest.take(committed);
    const now = this.parts.clock.now();
    for (const { roomId, at, celsius } of counted) {
      const room = this.#rooms.get(roomId);
      if (!room) continue;
      const today = this.#today(room.timeZone, now);
      if (at < today.from || at >= today.to) continue;
      this.#raisePeak(roomId, today.from, celsius);
    }
    this.#look(new Set(counted.map(({ roomId }) => roomId)));
  }

  #raisePeak(roomId: string, day: number, celsius: number): void {
    const peak = this.#peaks.get(roomId);
    if (peak?.day !== day || celsius > peak.celsius) this.#peaks.set(roomId, { day, celsius });
  }

  /** Dates changes of condition, and tells the estimates how warm what stands there has it. */
  #look(roomIds: Iterable<string>): void {
    const now = this.parts.clock.now();
    for (const roomId of roomIds) {
      const room = this.#rooms.get(roomId);
      if (!room) continue;
      const air = this.parts.latest.air(roomId, now);
      this.#hold(room, air, this.#bounds(room));
      this.parts.estimates.roomIsAt(roomId, air === null || air.stale ? null : air.celsius);
    }
  }

  #today(timeZone: string, now: number): LocalDay {
    const known = this.#days.get(timeZone);
    if (known && now >= known.from && now < known.to) return known;
    const [today] = localDays(now, now + 1, timeZone);
    if (!today) throw new Error(`No local day at ${now} in ${timeZone}.`);
    this.#days.set(timeZone, today);
    return today;
  }

  #reloadSoon(): void {
    if (this.#reloadDue) return;
    this.#reloadDue = true;
    void this.#inTurn(() => {
      this.#reloadDue = false;
      return this.#load();
    }).catch(this.parts.failed);
  }

  async #load(): Promise<void> {
    const { repository, latest, histories, cells, clock } = this.parts;
    const rooms = await repository.rooms();
    const relaid = await latest.load();
    const from = histories.end - CELLS_PER_DAY;
    await histories.need(new Map(rooms.map(({ id }) => [id, from])));
    const before = this.#rooms;
    const added = rooms.filter(({ id }) => !before.has(id)).map(({ id }) => id);
    const recent = await cells.cells(added, from, histories.end);
    this.#rooms = new Map(rooms.map((room) => [room.id, room]));
    for (const id of relaid) this.#peaks.delete(id);
    await this.#loadPeaks(rooms);
    const now = clock.now();
    for (const id of added) {
      const room = this.#rooms.get(id);
      if (!room) continue;
      const [air, bounds] = [latest.air(id, now), this.#bounds(room)];
      const state = stateOf(air, bounds, this.#swing(id));
      const humidity = recent.get(id)?.humidity ?? null;
      this.#held.set(id, {
        state,
        since: this.#sinceByHistory(id, state, air, bounds, humidity),
      });
    }
    this.#look(this.#rooms.keys());
  }

  async #loadPeaks(rooms: readonly RoomOfStudio[]): Promise<void> {
    const now = this.parts.clock.now();
    for (const timeZone of new Set(rooms.map((room) => room.timeZone))) {
      const day = this.#today(timeZone, now).from;
      const ids = rooms.filter((room) => room.timeZone === timeZone).map(({ id }) => id);
      for (const [roomId, celsius] of await this.parts.latest.peaks(ids, day))
        this.#raisePeak(roomId, day, celsius);
    }
  }

  #inTurn<T>(task: () => Promise<T>): Promise<T> {
    const result = this.#last.then(task);
    this.#last = result.catch(() => undefined);
    return result;
  }
}
