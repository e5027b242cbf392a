import type { DataSource } from 'typeorm';
import { parsePayload } from '../intake/payloads.js';
import { toRow } from '../intake/intake.js';
import type { ReadingRow } from '../intake/readings-database.js';
import { rebuildRollups } from './rollups.js';

const FIVE_MS = 300_000;
const ROWS_A_STATEMENT = 2000;

/** A sensor's past to be loaded: payloads as the sensor would have sent them, oldest first. */
export interface SensorPast {
  readonly sensorNo: number;
  readonly timeZone: string;
  readonly payloads: Iterable<string>;
}

/** What loading a past came to. */
export interface Loaded {
  readonly readings: number;
  /** Why payloads were not taken. */
  readonly faults: readonly string[];
}

/**
 * Loads a sensor's past in bulk through the same parsing and rollups as live readings. Not for a running gateway's live sensors:
 * nothing is announced. Loading the same past twice changes nothing.
 */
export async function bulkLoad(dataSource: DataSource, past: SensorPast, now: number): Promise<Loaded> {
  const encoder = new TextEncoder();
  const faults: string[] = [];
  let rows: ReadingRow[] = [];
  let [first, last, readings] = [Infinity, -Infinity, 0];
  const flush = async () => {
    if (rows.length === 0) return;
    await dataSource.query(
      'INSERT INTO reading (sensor_no, at, received_at, t_micro, rh_micro, flags) VALUES ? ON DUPLICATE KEY UPDATE sensor_no = VALUES(sensor_no)',
      [
        rows.map((row) => [
          row.sensorNo,
          new Date(row.at),
          new Date(row.receivedAt),
          row.tMicro,
          row.rhMicro,
          row.flags,
        ]),
      ],
    );
    rows = [];
  };
  for (const payload of past.payloads) {
    const parsed = parsePayload(encoder.encode(payload), now);
    faults.push(...parsed.faults);
    for (const reading of parsed.readings) {
      const at = reading.at ?? now;
      rows.push(toRow(past, reading, at, now));
      [first, last, readings] = [Math.min(first, at), Math.max(last, at), readings + 1];
    }
    if (rows.length >= ROWS_A_STATEMENT) await flush();
  }
  await flush();
  if (readings > 0) {
    await dataSource.transaction('READ COMMITTED', (manager) =>
      rebuildRollups(manager, [
        {
          sensorNo: past.sensorNo,
          from: Math.floor(first / FIVE_MS) * FIVE_MS,
          to: Math.floor(last / FIVE_MS) * FIVE_MS + FIVE_MS,
          timeZone: past.timeZone,
        },
      ]),
    );
  }
  return { readings, faults };
}
