import { randomUUID } from 'node:crypto';
import type { BatchCard } from '#shared/contract/batches';
import { WAX_FAMILY_DEFAULTS, type WaxFamilyName } from '#shared/cure/wax-families';
import { CELL_MS, cellStart } from '#shared/cure/grid';
import type { CureKinetics } from '#shared/cure/kinetics';
import type { BatchesChanged, CellsChanged, LayoutChanged } from '../../announcements.js';
import { openTestDatabase, type TestDatabase } from '../../database/test-database.js';
import { Feed } from '../../feed.js';
import { type HistoriesChanged, RoomHistories } from '../../history/room-histories.js';
import { RoomCellsRepository } from '../../history/room-cells-repository.js';
import type { Actor } from '../../http/actor.js';
import { BatchFactsRepository } from './batch-facts-repository.js';
import { Estimates } from './estimates.js';

/** Monday noon, aligned to a cell. */
export const NOON = Date.parse('2026-05-04T12:00:00Z');
export const HOUR = 3_600_000;
export const DAY = 24 * HOUR;

export interface TestRoom {
  readonly id: string;
  readonly studioId: string;
  /** From the top. */
  readonly shelfIds: readonly string[];
}

export interface TestSensor {
  readonly no: number;
  readonly id: string;
  readonly room: TestRoom;
}

/** A temperature for each cell; null for silence. */
export type Course = (cell: number) => number | null;

/** A database with a studio to build rooms, sensors, recordings and batches in, and the estimates over it. */
export class TestFloor {
  readonly clock = { at: NOON, now: () => this.clock.at, speed: () => 1 };
  readonly cellsChanged = new Feed<CellsChanged>(fail);
  readonly layoutChanged = new Feed<LayoutChanged>(fail);
  readonly batchesChanged = new Feed<BatchesChanged>(fail);
  histories!: RoomHistories;
  estimates!: Estimates;
  studioId!: string;
  #serial = 0;

  private constructor(readonly database: TestDatabase) {}

  static async open(): Promise<TestFloor> {
    const floor = new TestFloor(await openTestDatabase(new Date(NOON)));
    floor.studioId = await floor.addStudio('Larkrise West', 'Europe/Lisbon');
    await floor.restart();
    return floor;
  }

  async close(): Promise<void> {
    await this.#stop();
    await this.database.close();
  }

  /** Begins again with nothing but the database, as after a restart of the gateway. */
  async restart(historiesChanged = new Feed<HistoriesChanged>(fail)): Promise<void> {
    await this.#stop();
    ({ histories: this.histories, estimates: this.estimates } = await this.#begin(
      historiesChanged,
      this.batchesChanged,
    ));
  }

  /** What a gateway started just now says of the studio's batches, while the running one goes on. */
  async freshCards(studioId = this.studioId): Promise<BatchCard[]> {
    const { histories, estimates } = await this.#begin(new Feed(fail), new Feed(fail));
    const cards = estimates.cardsOfStudio(studioId, false);
    await histories.stop();
    await estimates.stop();
    return cards;
  }

  async #begin(historiesChanged: Feed<HistoriesChanged>, batchesChanged: Feed<BatchesChanged>) {
    const { dataSource } = this.database;
    const histories = new RoomHistories({
      cells: new RoomCellsRepository(dataSource),
      clock: this.clock,
      changed: historiesChanged,
      failed: fail,
    });
    const estimates = new Estimates({
      facts: new BatchFactsRepository(dataSource),
      histories,
      clock: this.clock,
      changed: batchesChanged,
      failed: fail,
    });
    histories.start(this.cellsChanged, this.layoutChanged);
    await estimates.start(historiesChanged, this.layoutChanged);
    return { histories, estimates };
  }

  async #stop(): Promise<void> {
    await this.histories?.stop();
    await this.estimates?.stop();
  }

  /** Lets time pass and everything that follows from it happen. */
  async pass(ms: number): Promise<void> {
    this.clock.at += ms;
    await this.histories.tick();
    await this.settled();
  }

  async settled(): Promise<void> {
    await this.histories.settled();
    await this.estimates.settled();
  }

  async addStudio(name: string, timeZone: string): Promise<string> {
    const id = randomUUID();
    await this.sql(
      `INSERT INTO studio (id, name, time_zone, unit, address, pressure_hpa, recipients, escalate_after_minutes, position) VALUES (?,?,?,'C','',1013.25,'[]',30,?)`,
      [id, name, timeZone, this.#serial++],
    );
    return id;
  }

  async addRoom(studioId = this.studioId, shelves = 3, capacity = 40): Promise<TestRoom> {
    const id = randomUUID();
    const rackId = randomUUID();
    const number = this.#serial++;
    await this.sql(
      `INSERT INTO room (id, studio_id, name, position, band_low, band_high, heat_limit, humidity_high, swing_limit, slip_days, notes) VALUES (?,?,?,?,18,24,NULL,65,6,3,'')`,
      [id, studioId, `Room ${number}`, number],
    );
    await this.sql('INSERT INTO rack (id, studio_id, room_id, name, position) VALUES (?,?,?,?,?)', [
      rackId,
      studioId,
      id,
      `Rack ${number}`,
      number,
    ]);
    const shelfIds = Array.from({ length: shelves }, () => randomUUID());
    for (const [index, shelfId] of shelfIds.entries())
      await this.sql('INSERT INTO shelf (id, rack_id, position, capacity) VALUES (?,?,?,?)', [
        shelfId,
        rackId,
        index + 1,
        capacity,
      ]);
    return { id, studioId, shelfIds };
  }

  async addSensor(room: TestRoom, offsetCelsius = 0, trusted = true): Promise<TestSensor> {
    const id = randomUUID();
    const result = await this.sql<{ insertId: number | string }>(
      `INSERT INTO sensor (id, studio_id, room_id, name, device_id, secret_hash, trusted, offset_celsius) VALUES (?,?,?,?,?,?,?,?)`,
      [
        id,
        room.studioId,
        room.id,
        `Sensor ${this.#serial}`,
        `device-${this.#serial++}`,
        'x'.repeat(64),
        trusted,
        offsetCelsius,
      ],
    );
    return { no: Number(result.insertId), id, room };
  }

  /** Writes five-minute rollups, two readings in each, for the cells [fromCell, toCell) and announces them. */
  async record(
    sensor: TestSensor,
    fromCell: number,
    toCell: number,
    course: Course,
    humidity = 52,
  ): Promise<void> {
    const rows: unknown[][] = [];
    for (let cell = fromCell; cell < toCell; cell++) {
      const celsius = course(cell);
      if (celsius === null) continue;
      for (const half of [0, 1]) {
        // The two halves lie a little apart; their mean is the course's value.
        const micro = Math.round((celsius + (half === 0 ? -0.1 : 0.1)) * 1e6);
        const rh = Math.round(humidity * 1e6);
        const bucket = new Date(cellStart(cell) + (half * CELL_MS) / 2);
        rows.push([sensor.no, 5, bucket, 2, 2 * micro, micro - 50_000, micro + 50_000, 2, 2 * rh, rh, rh]);
      }
    }
    for (let at = 0; at < rows.length; at += 2000)
      await this.sql(
        'INSERT INTO rollup (sensor_no, level, bucket, n, t_sum, t_min, t_max, rh_n, rh_sum, rh_min, rh_max) VALUES ? ON DUPLICATE KEY UPDATE n = VALUES(n), t_sum = VALUES(t_sum), t_min = VALUES(t_min), t_max = VALUES(t_max)',
        [rows.slice(at, at + 2000)],
      );
    const { id: roomId, studioId } = sensor.room;
    this.cellsChanged.announce({ roomId, studioId, fromCell, toCell: toCell - 1 });
    await this.settled();
  }

  /** A design on a new wax of a family, with a passed test on record unless told otherwise. */
  async addDesign(
    family: WaxFamilyName,
    change: Partial<CureKinetics> = {},
    tested = true,
  ): Promise<{ id: string; waxId: string; kinetics: CureKinetics }> {
    const kinetics = { ...WAX_FAMILY_DEFAULTS[family].kinetics, ...change };
    const [waxId, id] = [randomUUID(), randomUUID()];
    const number = this.#serial++;
    await this.sql(
      'INSERT INTO wax (id, name, family, kinetics, pour_low, pour_high, provenance) VALUES (?,?,?,?,55,65,?)',
      [waxId, `Wax ${number}`, family, JSON.stringify(kinetics), 'test data'],
    );
    await this.sql(
      'INSERT INTO design (id, name, wax_id, fragrance_id, load_percent_of_wax, wick, vessel, vessel_diameter_mm, fill_grams) VALUES (?,?,?,NULL,8,?,?,75,220)',
      [id, `Design ${number}`, waxId, 'CD 12', 'Tumbler'],
    );
    if (tested) {
      const earlier = await this.addBatch(id, NOON - 90 * DAY, []);
      await this.sql(`UPDATE batch SET status = 'dispatched', ended_at = ? WHERE id = ?`, [
        new Date(NOON - 70 * DAY),
        earlier,
      ]);
      await this.sql(
        `INSERT INTO burn_verdict (id, batch_id, design_id, at, passed, note, signed_by, hardening_at_test, cure_age_days) VALUES (?,?,?,?,1,'',?,0.9,14)`,
        [randomUUID(), earlier, id, new Date(NOON - 75 * DAY), randomUUID()],
      );
    }
    return { id, waxId, kinetics };
  }

  /** A curing batch with its stays, written straight into the database; call `restart` or `batchesTouched` afterwards. */
  async addBatch(
    designId: string,
    pouredAt: number,
    stays: readonly { room: TestRoom; from: number; to: number | null; shelf?: number }[],
    studioId = this.studioId,
  ): Promise<string> {
    const id = randomUUID();
    await this.sql(
      `INSERT INTO batch (id, studio_id, code, design_id, vessels, poured_at, wax_grams, fragrance_grams, status, notes) VALUES (?,?,?,?,12,?,2444.4,195.6,'curing','')`,
      [id, studioId, `T-${this.#serial++}`, designId, new Date(pouredAt)],
    );
    for (const { room, from, to, shelf } of stays)
      await this.sql(
        'INSERT INTO stay (id, batch_id, shelf_id, room_id, from_at, to_at) VALUES (?,?,?,?,?,?)',
        [
          randomUUID(),
          id,
          room.shelfIds[shelf ?? 0],
          room.id,
          new Date(from),
          to === null ? null : new Date(to),
        ],
      );
    return id;
  }

  async actor(role: Actor['role'] = 'lead', name = 'Ines Sampaio'): Promise<Actor> {
    const personId = randomUUID();
    await this.sql('INSERT INTO person (id, email, name, created_at) VALUES (?,?,?,?)', [
      personId,
      `person-${this.#serial++}@example.org`,
      name,
      new Date(NOON),
    ]);
    return { personId, name, role, address: '127.0.0.1' };
  }

  sql<T = unknown>(statement: string, values: readonly unknown[] = []): Promise<T> {
    return this.database.dataSource.query<T>(statement, [...values]);
  }
}

function fail(error: unknown): void {
  throw error;
}
