import type { Logger } from 'pino';
import type { DataSource, EntityManager } from 'typeorm';
import { cellOf } from '#shared/cure/grid';
import type { CellsChanged, CommittedReading } from '../announcements.js';
import type { Feed } from '../feed.js';
import { rebuildRollups, stretchesOf } from './rollups.js';

export interface RollupWorkerParts {
  readonly dataSource: DataSource;
  readonly committed: Feed<readonly CommittedReading[]>;
  /** Told after the rollups of a room's cells were made anew. */
  readonly cells: Feed<CellsChanged>;
  readonly log: Logger;
}

interface SensorPlace {
  readonly roomId: string;
  readonly studioId: string;
  readonly timeZone: string;
}

interface Mark {
  readonly sensorNo: number;
  readonly bucket: number;
}

const MARKS_A_PASS = 3000;
const REST_MS = 1000;
const LOOK_EVERY_MS = 2000;

/**
 * Rolls up what the intake marked. The mark goes first, then the bucket is made anew from the readings, all in one transaction: a
 * reading that comes meanwhile sets its mark again. Marks of a gateway that died are found by looking now and then.
 */
export class RollupWorker {
  #timer: NodeJS.Timeout | null = null;
  #unlisten: (() => void) | null = null;
  #running: Promise<void> | null = null;
  #stopped = false;

  constructor(private readonly parts: RollupWorkerParts) {}

  start(): void {
    this.#unlisten = this.parts.committed.listen(() => this.#soon(REST_MS));
    this.#soon(0);
  }

  async stop(): Promise<void> {
    this.#stopped = true;
    this.#unlisten?.();
    if (this.#timer) clearTimeout(this.#timer);
    await this.#running;
  }

  /** Works until no mark is left. @throws Error of the database; marks not yet worked off stay */
  async drain(): Promise<void> {
    while ((await this.pass()) > 0);
  }

  /** Works off a share of the marks and announces the rooms' cells. @returns how many marks there were */
  async pass(): Promise<number> {
    const { marks, places } = await this.parts.dataSource.transaction('READ COMMITTED', async (manager) => {
      const rows = await manager.query<{ sensor_no: number; bucket: Date }[]>(
        `SELECT sensor_no, bucket FROM dirty_mark ORDER BY sensor_no, bucket LIMIT ${MARKS_A_PASS}`,
      );
      if (rows.length === 0) return { marks: [], places: new Map<number, SensorPlace>() };
      const found = rows.map((row): Mark => ({ sensorNo: row.sensor_no, bucket: row.bucket.getTime() }));
      await manager.query('DELETE FROM dirty_mark WHERE (sensor_no, bucket) IN (?)', [
        rows.map((row) => [row.sensor_no, row.bucket]),
      ]);
      const known = await placesOf(manager, found);
      await rebuildRollups(
        manager,
        stretchesOf(found, (sensorNo) => known.get(sensorNo)?.timeZone ?? 'UTC'),
      );
      return { marks: found, places: known };
    });
    this.#announce(marks, places);
    return marks.length;
  }

  #soon(ms: number): void {
    if (this.#timer !== null || this.#running !== null || this.#stopped) return;
    this.#timer = setTimeout(() => {
      this.#timer = null;
      this.#running = this.#work().finally(() => {
        this.#running = null;
        this.#soon(LOOK_EVERY_MS);
      });
    }, ms);
  }

  async #work(): Promise<void> {
    try {
      while (!this.#stopped && (await this.pass()) > 0)
        await new Promise((resolve) => setTimeout(resolve, REST_MS));
    } catch (error) {
      this.parts.log.warn({ err: error }, 'rolling up waits for the database');
    }
  }

  #announce(marks: readonly Mark[], places: ReadonlyMap<number, SensorPlace>): void {
    const changed = new Map<string, { roomId: string; studioId: string; fromCell: number; toCell: number }>();
    for (const { sensorNo, bucket } of marks) {
      const place = places.get(sensorNo);
      if (place === undefined) continue;
      const cell = cellOf(bucket);
      const known = changed.get(place.roomId);
      if (known === undefined) {
        changed.set(place.roomId, {
          roomId: place.roomId,
          studioId: place.studioId,
          fromCell: cell,
          toCell: cell,
        });
      } else {
        known.fromCell = Math.min(known.fromCell, cell);
        known.toCell = Math.max(known.toCell, cell);
      }
    }
    for (const change of changed.values()) this.parts.cells.announce(change);
  }
}

/** Where the marked sensors are, read in the same transaction: a time zone that changes meanwhile waits its turn. */
async function placesOf(manager: EntityManager, marks: readonly Mark[]): Promise<Map<number, SensorPlace>> {
  const rows = await manager.query<{ no: number; room_id: string; studio_id: string; time_zone: string }[]>(
    'SELECT s.no, s.room_id, s.studio_id, t.time_zone FROM sensor s JOIN studio t ON t.id = s.studio_id WHERE s.no IN (?) LOCK IN SHARE MODE',
    [[...new Set(marks.map((mark) => mark.sensorNo))]],
  );
  return new Map(
    rows.map((row) => [row.no, { roomId: row.room_id, studioId: row.studio_id, timeZone: row.time_zone }]),
  );
}
