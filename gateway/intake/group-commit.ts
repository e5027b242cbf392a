import type { Logger } from 'pino';
import type { QuarantineRow, ReadingRow, StoredBatch } from './readings-database.js';

/** One message waiting to be stored; `done` is called once, after the commit or when it can never be stored. */
export interface PendingMessage {
  readonly rows: readonly ReadingRow[];
  readonly quarantine: readonly QuarantineRow[];
  /** What the message becomes when the database refuses its rows for good. */
  readonly asQuarantine: (reason: string) => QuarantineRow;
  readonly done: () => void;
}

export interface GroupCommitParts {
  /** `again`: the same group was sent before and its fate is unknown. */
  readonly store: (
    rows: readonly ReadingRow[],
    quarantine: readonly QuarantineRow[],
    again: boolean,
  ) => Promise<StoredBatch>;
  readonly committed: (batch: StoredBatch, quarantine: readonly QuarantineRow[]) => void;
  readonly log: Logger;
  readonly wait?: (ms: number) => Promise<void>;
}

const LINGER_MS = 4;
const LARGEST_BATCH_ROWS = 500;
const FIRST_WAIT_MS = 50;
const LONGEST_WAIT_MS = 1000;

/**
 * Stores messages in groups, one transaction at a time and in the order of receipt. While the database is away messages wait; a
 * group is repeated until it is in, so a lost answer to COMMIT does no harm. A row the database refuses is found by halving
 * the group and put into quarantine; the rest is stored.
 */
export class GroupCommit {
  readonly #waiting: PendingMessage[] = [];
  #waitingRows = 0;
  #running = false;
  #stopped = false;
  #idle: Promise<void> = Promise.resolve();
  #repeatedGroups = 0;

  constructor(private readonly parts: GroupCommitParts) {}

  /** Rows that wait or are being stored. */
  get depth(): number {
    return this.#waitingRows;
  }

  /** Groups that had to be sent again after a fault. */
  get repeatedGroups(): number {
    return this.#repeatedGroups;
  }

  add(message: PendingMessage): void {
    this.#waiting.push(message);
    this.#waitingRows += weightOf(message);
    if (this.#running || this.#stopped) return;
    this.#running = true;
    this.#idle = this.#run();
  }

  /** Takes nothing more; waits up to `patience` ms until what waits is stored. */
  async stop(patience: number): Promise<void> {
    const late = new Promise<void>((resolve) => setTimeout(resolve, patience).unref());
    await Promise.race([this.#idle, late]);
    this.#stopped = true;
  }

  async #run(): Promise<void> {
    await this.#wait(LINGER_MS);
    while (this.#waiting.length > 0 && !this.#stopped) await this.#storeUntilIn(this.#take());
    this.#running = false;
  }

  #take(): PendingMessage[] {
    let rows = 0;
    let count = 0;
    for (const message of this.#waiting) {
      rows += weightOf(message);
      if (count > 0 && rows > LARGEST_BATCH_ROWS) break;
      count++;
    }
    return this.#waiting.splice(0, count);
  }

  async #storeUntilIn(group: PendingMessage[]): Promise<void> {
    let wait = FIRST_WAIT_MS;
    let again = false;
    while (!this.#stopped) {
      try {
        const quarantine = group.flatMap((message) => message.quarantine);
        const rows = group.flatMap((message) => message.rows);
        const batch = await this.parts.store(rows, quarantine, again);
        this.parts.committed(batch, quarantine);
        this.#finish(group);
        return;
      } catch (error) {
        if (isRefusal(error)) return this.#findRefused(group, error);
        this.#repeatedGroups++;
        again = true;
        if (isCollision(error)) continue;
        if (wait === FIRST_WAIT_MS)
          this.parts.log.warn({ err: error, waiting: this.depth }, 'readings wait for the database');
        await this.#wait(wait);
        wait = Math.min(wait * 2, LONGEST_WAIT_MS);
      }
    }
  }

  async #findRefused(group: PendingMessage[], error: unknown): Promise<void> {
    const [only] = group;
    if (only !== undefined && group.length === 1) {
      const reason = `The database refused this message: ${error instanceof Error ? error.message : String(error)}`;
      this.parts.log.error({ err: error }, 'a message was refused by the database');
      return this.#storeUntilIn([{ ...only, rows: [], quarantine: [only.asQuarantine(reason)] }]);
    }
    const middle = group.length >> 1;
    await this.#storeUntilIn(group.slice(0, middle));
    await this.#storeUntilIn(group.slice(middle));
  }

  #finish(group: readonly PendingMessage[]): void {
    for (const message of group) {
      this.#waitingRows -= weightOf(message);
      message.done();
    }
  }

  #wait(ms: number): Promise<void> {
    return this.parts.wait?.(ms) ?? new Promise((resolve) => setTimeout(resolve, ms));
  }
}

function weightOf(message: PendingMessage): number {
  return message.rows.length + message.quarantine.length || 1;
}

/** Two transactions met: the server undid ours, it may be sent again at once. */
function isCollision(error: unknown): boolean {
  const { errno } = error as { errno?: number };
  return errno === 1213 || errno === 1205;
}

/** The data itself cannot be stored (SQLSTATE classes 22 and 23): sending it again would not help. */
function isRefusal(error: unknown): boolean {
  const { sqlState } = error as { sqlState?: string };
  return sqlState?.startsWith('22') === true || sqlState?.startsWith('23') === true;
}
