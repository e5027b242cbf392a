import type { Logger } from 'pino';
import type { DataSource } from 'typeorm';
import { type DemoClock, FUTURE_TOLERANCE_MS } from '#shared/contract/telemetry';
import type { CommittedReading, LayoutChanged } from '../announcements.js';
import type { Clock } from '../clock.js';
import type { DatabaseAccess } from '../database/data-source.js';
import type { Feed } from '../feed.js';
import type { Settings } from '../settings.js';
import { Broker } from './broker.js';
import { type Device, DeviceRegistry } from './device-registry.js';
import { GroupCommit } from './group-commit.js';
import { HeardCounts } from './heard-counts.js';
import { parsePayload, type ParsedReading } from './payloads.js';
import {
  FUTURE_FLAG,
  type QuarantineRow,
  ReadingsDatabase,
  type ReadingRow,
  type StoredBatch,
} from './readings-database.js';

export interface IntakeParts {
  readonly dataSource: DataSource;
  readonly database: DatabaseAccess;
  readonly mqtt: Settings['mqtt'];
  readonly clock: Clock;
  readonly demo: { readonly simulatorSecret: string; readonly setClock: (clock: DemoClock) => void } | null;
  /** Told of readings that are in the database and had not been before. */
  readonly committed: Feed<readonly CommittedReading[]>;
  readonly layout: Feed<LayoutChanged>;
  readonly log: Logger;
}

/** Rows that may wait for the database before devices are turned away. */
const MOST_WAITING_ROWS = 100_000;
const DRAIN_MS = 8000;

/** Takes readings from devices: broker, parsing, checks, group commit, acknowledgement. */
export class Intake {
  readonly #registry: DeviceRegistry;
  readonly #database: ReadingsDatabase;
  readonly #commit: GroupCommit;
  readonly #broker: Broker;
  readonly #heard: HeardCounts;
  #devicesByNo = new Map<number, Device>();
  #unlisten: (() => void) | null = null;

  constructor(private readonly parts: IntakeParts) {
    this.#registry = new DeviceRegistry(parts.dataSource);
    this.#database = new ReadingsDatabase(parts.database);
    this.#heard = new HeardCounts(this.#database, parts.log);
    this.#commit = new GroupCommit({
      store: (rows, quarantine, again) => this.#database.store(rows, quarantine, again),
      committed: (batch, quarantine) => this.#announce(batch, quarantine),
      log: parts.log,
    });
    this.#broker = new Broker({
      settings: parts.mqtt,
      registry: this.#registry,
      demo: parts.demo,
      take: (device, topic, payload, done) => this.#take(device, topic, payload, done),
      full: () => this.#commit.depth >= MOST_WAITING_ROWS,
      log: parts.log,
    });
  }

  /** @throws Error when the database is not durable or the port cannot be listened on */
  async start(): Promise<void> {
    await this.#database.checkDurability();
    await this.#registry.load();
    this.#unlisten = this.parts.layout.listen(() => void this.reload());
    this.#heard.start();
    await this.#broker.start();
  }

  /** Takes no more messages and stores what it has. */
  async stop(): Promise<void> {
    this.#unlisten?.();
    await this.#broker.stop();
    await this.#commit.stop(DRAIN_MS);
    await this.#heard.stop();
    await this.#database.close();
  }

  /** Reads the enrolled devices again. */
  async reload(): Promise<void> {
    try {
      await this.#registry.load();
    } catch (error) {
      this.parts.log.error({ err: error }, 'devices could not be read again');
    }
  }

  get connectedDevices(): ReadonlySet<string> {
    return this.#broker.connectedDevices;
  }

  /** What waits for the database and how often groups had to be repeated. */
  health(): { waitingRows: number; repeatedGroups: number } {
    return { waitingRows: this.#commit.depth, repeatedGroups: this.#commit.repeatedGroups };
  }

  #take(device: Device, topic: string, payload: Buffer, done: () => void): void {
    const now = this.parts.clock.now();
    this.#devicesByNo.set(device.sensorNo, device);
    const asQuarantine = (reason: string): QuarantineRow => ({
      receivedAt: now,
      studioId: device.studioId,
      sensorId: device.sensorId,
      sensorNo: device.sensorNo,
      topic,
      payload,
      reason,
    });
    const { readings, faults } = parsePayload(payload, now);
    const quarantine = faults.map(asQuarantine);
    const rows: ReadingRow[] = [];
    for (const reading of readings) {
      const at = reading.at ?? now;
      if (at < now - device.acceptLateMs) {
        const days = Math.round(device.acceptLateMs / 86_400_000);
        quarantine.push(
          asQuarantine(
            `The reading of ${new Date(at).toISOString()} is older than the ${days} days this sensor's readings are taken for; raise that in its settings to take old recordings.`,
          ),
        );
        continue;
      }
      rows.push(toRow(device, reading, at, now));
    }
    const battery = readings.findLast((reading) => reading.battery !== null)?.battery;
    if (battery !== undefined && battery !== null) this.#heard.battery(device.sensorNo, battery);
    this.#commit.add({ rows, quarantine, asQuarantine, done });
  }

  #announce(batch: StoredBatch, quarantine: readonly QuarantineRow[]): void {
    this.#heard.count(batch, quarantine);
    if (batch.stored.length === 0) return;
    const committed = batch.stored.flatMap((row): CommittedReading[] => {
      const device = this.#devicesByNo.get(row.sensorNo);
      if (device === undefined) return [];
      return [
        {
          sensorNo: row.sensorNo,
          sensorId: device.sensorId,
          studioId: device.studioId,
          roomId: device.roomId,
          at: row.at,
          celsius: row.tMicro / 1e6,
          humidity: row.rhMicro === null ? null : row.rhMicro / 1e6,
          battery: this.#heard.lastBattery(row.sensorNo),
          future: (row.flags & FUTURE_FLAG) !== 0,
        },
      ];
    });
    this.parts.committed.announce(committed);
  }
}

/** A reading as the database keeps it: millionths, so that sums stay exact. */
export function toRow(
  device: { sensorNo: number },
  reading: ParsedReading,
  at: number,
  now: number,
): ReadingRow {
  return {
    sensorNo: device.sensorNo,
    at,
    receivedAt: now,
    tMicro: Math.round(reading.celsius * 1e6),
    rhMicro: reading.humidity === null ? null : Math.round(reading.humidity * 1e6),
    flags: at > now + FUTURE_TOLERANCE_MS ? FUTURE_FLAG : 0,
    sequence: reading.at === null ? reading.sequence : null,
  };
}
