import type { Logger } from 'pino';
import {
  FUTURE_FLAG,
  type QuarantineRow,
  type ReadingsDatabase,
  type StoredBatch,
} from './readings-database.js';

interface Counts {
  at: number | null;
  battery: number | null;
  future: number;
  conflicts: number;
  quarantined: number;
}

const EVERY_MS = 3000;

/**
 * When each sensor was last heard and what was counted of it, kept in memory and written every few seconds: it is for the eye,
 * the readings themselves are the truth.
 */
export class HeardCounts {
  #counts = new Map<number, Counts>();
  readonly #batteries = new Map<number, number>();
  #timer: NodeJS.Timeout | null = null;

  constructor(
    private readonly database: Pick<ReadingsDatabase, 'noteHeard'>,
    private readonly log: Logger,
  ) {}

  start(): void {
    this.#timer = setInterval(() => void this.flush(), EVERY_MS);
    this.#timer.unref();
  }

  async stop(): Promise<void> {
    if (this.#timer) clearInterval(this.#timer);
    await this.flush();
  }

  battery(sensorNo: number, percent: number): void {
    this.#batteries.set(sensorNo, percent);
    this.#of(sensorNo).battery = percent;
  }

  lastBattery(sensorNo: number): number | null {
    return this.#batteries.get(sensorNo) ?? null;
  }

  count(batch: StoredBatch, quarantine: readonly QuarantineRow[]): void {
    for (const row of batch.stored) {
      const counts = this.#of(row.sensorNo);
      if ((row.flags & FUTURE_FLAG) !== 0) counts.future++;
      else counts.at = Math.max(counts.at ?? 0, row.at);
    }
    for (const row of batch.conflicts) this.#of(row.sensorNo).conflicts++;
    for (const row of quarantine) if (row.sensorNo !== null) this.#of(row.sensorNo).quarantined++;
  }

  /** Writes what has gathered; after a failure it is kept for the next time. */
  async flush(): Promise<void> {
    const counts = this.#counts;
    if (counts.size === 0) return;
    this.#counts = new Map();
    try {
      await this.database.noteHeard([...counts].map(([sensorNo, count]) => ({ sensorNo, ...count })));
    } catch (error) {
      this.log.warn({ err: error }, 'what was heard of sensors could not be noted');
      for (const [sensorNo, count] of counts) {
        const newer = this.#of(sensorNo);
        newer.at = Math.max(newer.at ?? 0, count.at ?? 0) || null;
        newer.battery ??= count.battery;
        newer.future += count.future;
        newer.conflicts += count.conflicts;
        newer.quarantined += count.quarantined;
      }
    }
  }

  #of(sensorNo: number): Counts {
    const known = this.#counts.get(sensorNo);
    if (known) return known;
    const fresh: Counts = { at: null, battery: null, future: 0, conflicts: 0, quarantined: 0 };
    this.#counts.set(sensorNo, fresh);
    return fresh;
  }
}
