import { cellOf } from '#shared/cure/grid';
import { LOOK_BACK } from '#shared/cure/gaps';
import { RoomHistory } from '#shared/cure/room-history';
import type { CellsChanged, LayoutChanged } from '../announcements.js';
import type { Clock } from '../clock.js';
import type { Feed } from '../feed.js';
import { type CellRun, emptyRun, type RoomSensor } from './room-cells-repository.js';

/** Where the histories read their cells; see RoomCellsRepository. */
export interface RoomCells {
  sensors(roomIds: readonly string[]): Promise<RoomSensor[]>;
  cells(roomIds: readonly string[], fromCell: number, toCell: number): Promise<Map<string, CellRun>>;
  lastCell(roomId: string, cell: number): Promise<number | null>;
}

/** Rooms whose histories gained or changed cells, each with the first cell that may read otherwise than before. */
export type HistoriesChanged = ReadonlyMap<string, number>;

export interface RoomHistoriesParts {
  readonly cells: RoomCells;
  readonly clock: Clock;
  /** Told once for everything that changed in one go. */
  readonly changed: Feed<HistoriesChanged>;
  /** Told when the database could not be read; what was due is tried again at the next tick. */
  readonly failed: (error: unknown) => void;
}

/** One room's history and what it was built from. */
interface Kept {
  readonly history: RoomHistory;
  /** Everything from this cell on is exactly what the whole past would give. */
  readonly neededFrom: number;
  /** Nothing was ever observed before the history's first cell. */
  readonly pastIsEmpty: boolean;
  readonly sensors: string;
}

const TICK_MS = 1000;

/**
 * The ten-minute histories of the rooms that somebody asks about, kept in memory and rebuilt from the database at any time.
 * Complete cells only: with the clock every finished cell joins, as a gap until its readings are rolled up.
 */
export class RoomHistories {
  readonly #kept = new Map<string, Kept>();
  /** Cells to read again, by room: from and to, both included. */
  readonly #stale = new Map<string, { from: number; to: number }>();
  /** Rooms to look at afresh; true: build anew even if the sensors are the same. */
  readonly #relaid = new Map<string, boolean>();
  #end: number;
  #last: Promise<unknown> = Promise.resolve();
  #refreshDue = false;
  #stopping: (() => void)[] = [];

  constructor(private readonly parts: RoomHistoriesParts) {
    this.#end = cellOf(parts.clock.now());
  }

  /** Follows committed readings and changed sensors, and the clock once a second. */
  start(cells: Feed<CellsChanged>, layout: Feed<LayoutChanged>): void {
    if (this.#kept.size === 0) this.#end = cellOf(this.parts.clock.now());
    const timer = setInterval(() => void this.tick().catch(this.parts.failed), TICK_MS);
    timer.unref();
    this.#stopping = [
      cells.listen((change) => this.cellsChanged(change)),
      layout.listen((change) => this.layoutChanged(change)),
      () => clearInterval(timer),
    ];
  }

  /** Stops following and waits for what is under way. */
  async stop(): Promise<void> {
    for (const stop of this.#stopping.splice(0)) stop();
    await this.settled();
  }

  /** Cell after the last one of every history in memory. */
  get end(): number {
    return this.#end;
  }

  /** The history of a room if it is in memory. */
  peek(roomId: string): RoomHistory | null {
    return this.#kept.get(roomId)?.history ?? null;
  }

  /**
   * Loads histories of rooms so that they are right from the given cells on, as if the whole past were in memory: each begins
   * 14 days before its cell, or 14 days before the silence in which that cell lies.
   */
  async need(fromCells: ReadonlyMap<string, number>): Promise<void> {
    const lacking = () =>
      [...fromCells].filter(([roomId, from]) => (this.#kept.get(roomId)?.neededFrom ?? Infinity) > from);
    if (lacking().length === 0) return;
    await this.#inTurn(async () => {
      for (const [roomId, from] of lacking()) await this.#load(roomId, from);
    });
  }

  /** Reads the named cells again before long; changes that come together are read together. */
  cellsChanged({ roomId, fromCell, toCell }: CellsChanged): void {
    const kept = this.#kept.get(roomId);
    if (!kept) return;
    if (fromCell < kept.history.origin && kept.pastIsEmpty) this.#relaid.set(roomId, true);
    this.#markStale(roomId, fromCell, toCell);
    this.#refreshSoon();
  }

  /** Rebuilds rooms whose sensors, their trust or their offsets are no longer what the history was made from. */
  layoutChanged({ roomId }: LayoutChanged): void {
    const rooms = roomId === null ? [...this.#kept.keys()] : [roomId];
    for (const room of rooms)
      if (this.#kept.has(room)) this.#relaid.set(room, this.#relaid.get(room) ?? false);
    if (this.#relaid.size > 0) this.#refreshSoon();
  }

  /** Lets the histories go on to the last complete cell. */
  tick(): Promise<void> {
    return this.#telling(async (changed) => {
      const end = cellOf(this.parts.clock.now());
      if (end < this.#end) {
        // The clock was set back: what had been history is not yet.
        this.#end = end;
        for (const roomId of [...this.#kept.keys()]) await this.#reload(roomId, changed);
      } else if (end > this.#end) {
        const from = this.#end;
        const runs = await this.parts.cells.cells([...this.#kept.keys()], from, end);
        for (const [roomId, { history }] of this.#kept) {
          changed.set(roomId, startOfSilence(history, from));
          setCells(history, runs.get(roomId) ?? emptyRun(from, end - from));
          history.advanceTo(end);
        }
        this.#end = end;
      }
      await this.#refresh(changed);
    });
  }

  /** Resolves when everything known to be due has been done. */
  async settled(): Promise<void> {
    let last: Promise<unknown>;
    do {
      last = this.#last;
      await last;
    } while (last !== this.#last);
  }

  #markStale(roomId: string, from: number, to: number): void {
    const stale = this.#stale.get(roomId);
    this.#stale.set(roomId, {
      from: Math.min(from, stale?.from ?? from),
      to: Math.max(to, stale?.to ?? to),
    });
  }

  #refreshSoon(): void {
    if (this.#refreshDue) return;
    this.#refreshDue = true;
    void this.#telling((changed) => {
      this.#refreshDue = false;
      return this.#refresh(changed);
    }).catch(this.parts.failed);
  }

  async #refresh(changed: Map<string, number>): Promise<void> {
    const sensors = await this.#sensorsOf([...this.#relaid.keys()]);
    for (const [roomId, anew] of [...this.#relaid]) {
      const kept = this.#kept.get(roomId);
      if (kept && (anew || kept.sensors !== sensors.get(roomId))) await this.#reload(roomId, changed);
      this.#relaid.delete(roomId);
    }
    for (const [roomId, { from, to }] of [...this.#stale]) {
      this.#stale.delete(roomId);
      try {
        await this.#readAgain(roomId, from, to, changed);
      } catch (error) {
        this.#markStale(roomId, from, to);
        throw error;
      }
    }
  }

  async #readAgain(roomId: string, from: number, to: number, changed: Map<string, number>): Promise<void> {
    const history = this.peek(roomId);
    if (!history) return;
    const [first, end] = [Math.max(from, history.origin), Math.min(to + 1, history.end)];
    if (first >= end) return;
    const run = (await this.parts.cells.cells([roomId], first, end)).get(roomId);
    const firstChange = run ? setCells(history, run) : null;
    if (firstChange === null) return;
    const affected = startOfSilence(history, firstChange);
    changed.set(roomId, Math.min(affected, changed.get(roomId) ?? affected));
  }

  async #reload(roomId: string, changed: Map<string, number>): Promise<void> {
    const kept = this.#kept.get(roomId);
    if (!kept) return;
    await this.#load(roomId, kept.neededFrom);
    changed.set(roomId, -Infinity);
  }

  async #load(roomId: string, neededFrom: number): Promise<void> {
    const { cells } = this.parts;
    const sensors = (await this.#sensorsOf([roomId])).get(roomId) ?? '';
    const lastBefore = await cells.lastCell(roomId, neededFrom);
    // The silence in which the needed cell lies begins after the last reading before it and is filled from the 14 days before.
    const silenceFrom = lastBefore === null ? neededFrom : lastBefore + 1;
    const origin = Math.min(neededFrom, silenceFrom, this.#end) - LOOK_BACK;
    const history = new RoomHistory(origin);
    const run = (await cells.cells([roomId], origin, this.#end)).get(roomId);
    if (run) setCells(history, run);
    history.advanceTo(this.#end);
    this.#kept.set(roomId, { history, neededFrom, pastIsEmpty: lastBefore === null, sensors });
  }

  async #sensorsOf(roomIds: readonly string[]): Promise<Map<string, string>> {
    const sensors = await this.parts.cells.sensors(roomIds);
    return new Map(
      roomIds.map((roomId) => [roomId, signature(sensors.filter((sensor) => sensor.roomId === roomId))]),
    );
  }

  /** Runs a task in its turn and then tells what it changed, even if it failed half way. */
  #telling(task: (changed: Map<string, number>) => Promise<void>): Promise<void> {
    return this.#inTurn(async () => {
      const changed = new Map<string, number>();
      try {
        await task(changed);
      } finally {
        if (changed.size > 0) this.parts.changed.announce(changed);
      }
    });
  }

  /** Runs one thing after the other, so that what is read last from the database is also what is set last. */
  #inTurn<T>(task: () => Promise<T>): Promise<T> {
    const result = this.#last.then(task);
    this.#last = result.catch(() => undefined);
    return result;
  }
}

/** Sets the cells of a run; returns the first that was not so before, or null. */
function setCells(history: RoomHistory, run: CellRun): number | null {
  let firstChange: number | null = null;
  run.celsius.forEach((celsius, index) => {
    const cell = run.fromCell + index;
    if (cell < history.end && Object.is(history.observed(cell), celsius)) return;
    firstChange ??= cell;
    history.set(cell, Number.isNaN(celsius) ? null : celsius);
  });
  return firstChange;
}

/** The first cell of the silence just before a cell, or the cell itself: how a silence is filled depends on its end. */
function startOfSilence(history: RoomHistory, cell: number): number {
  let first = cell;
  while (first > history.origin && Number.isNaN(history.observed(first - 1))) first--;
  return first;
}

function signature(sensors: readonly RoomSensor[]): string {
  return JSON.stringify(sensors.map(({ no, offsetCelsius, retiredAt }) => [no, offsetCelsius, retiredAt]));
}
