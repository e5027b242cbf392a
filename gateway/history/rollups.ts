import type { EntityManager } from 'typeorm';
import { localDayStart, nextLocalDayStart } from './local-days.js';

/** Lengths of the rollups in minutes; 1440 stands for a local day of the studio. */
export const FIVE_MINUTES = 5;
export const HOUR = 60;
export const DAY = 1440;

const FIVE_MS = 300_000;
const HOUR_MS = 3_600_000;
/** Stretches rolled up by one statement. */
const STRETCHES_A_STATEMENT = 60;
const MICRO_FUTURE_FLAG = 1;

/** A stretch of one sensor's readings whose rollups are to be made anew; whole five-minute buckets, epoch ms. */
export interface DirtyStretch {
  readonly sensorNo: number;
  readonly from: number;
  /** Not included. */
  readonly to: number;
  readonly timeZone: string;
}

const COLUMNS = 'sensor_no, level, bucket, n, t_sum, t_min, t_max, rh_n, rh_sum, rh_min, rh_max';
const OVERWRITE = `ON DUPLICATE KEY UPDATE n = VALUES(n), t_sum = VALUES(t_sum), t_min = VALUES(t_min), t_max = VALUES(t_max),
  rh_n = VALUES(rh_n), rh_sum = VALUES(rh_sum), rh_min = VALUES(rh_min), rh_max = VALUES(rh_max)`;

const FROM_READINGS = `SELECT ? AS sensor_no, ${FIVE_MINUTES} AS level,
    FROM_UNIXTIME(FLOOR(UNIX_TIMESTAMP(at) / 300) * 300) AS bucket, COUNT(*), SUM(t_micro), MIN(t_micro), MAX(t_micro),
    COUNT(rh_micro), COALESCE(SUM(rh_micro), 0), MIN(rh_micro), MAX(rh_micro)
  FROM reading WHERE sensor_no = ? AND at >= ? AND at < ? AND flags & ${MICRO_FUTURE_FLAG} = 0 GROUP BY bucket`;

const FROM_FIVE_MINUTES = `SELECT ? AS sensor_no, ? AS level, ? AS bucket, SUM(n), SUM(t_sum), MIN(t_min), MAX(t_max), SUM(rh_n),
    SUM(rh_sum), MIN(rh_min), MAX(rh_max)
  FROM rollup WHERE sensor_no = ? AND level = ${FIVE_MINUTES} AND bucket >= ? AND bucket < ? HAVING SUM(n) > 0`;

/**
 * Makes the rollups of stretches anew: five minutes from the readings, hours and local days from the five minutes. Counts, sums,
 * minima and maxima of whole numbers, so nothing is rounded on the way. Readings with a doubtful time do not count.
 */
export async function rebuildRollups(
  manager: EntityManager,
  stretches: readonly DirtyStretch[],
): Promise<void> {
  await insertSelects(
    manager,
    FROM_READINGS,
    stretches.map(({ sensorNo, from, to }) => [sensorNo, sensorNo, new Date(from), new Date(to)]),
  );
  await insertSelects(manager, FROM_FIVE_MINUTES, longerBuckets(stretches));
}

/** The hours and local days that the stretches touch, each once. */
function longerBuckets(stretches: readonly DirtyStretch[]): unknown[][] {
  const buckets = new Map<string, unknown[]>();
  const add = (sensorNo: number, level: number, from: number, to: number) =>
    buckets.set(`${sensorNo}/${level}/${from}`, [
      sensorNo,
      level,
      new Date(from),
      sensorNo,
      new Date(from),
      new Date(to),
    ]);
  for (const { sensorNo, from, to, timeZone } of stretches) {
    for (let hour = Math.floor(from / HOUR_MS) * HOUR_MS; hour < to; hour += HOUR_MS) {
      add(sensorNo, HOUR, hour, hour + HOUR_MS);
    }
    for (let day = localDayStart(from, timeZone); day < to;) {
      const next = nextLocalDayStart(day, timeZone);
      add(sensorNo, DAY, day, next);
      day = next;
    }
  }
  return [...buckets.values()];
}

/** The same SELECT for many constant ranges in few statements: each one is a short range of the primary key. */
async function insertSelects(manager: EntityManager, select: string, values: unknown[][]): Promise<void> {
  for (let at = 0; at < values.length; at += STRETCHES_A_STATEMENT) {
    const part = values.slice(at, at + STRETCHES_A_STATEMENT);
    await manager.query(
      `INSERT INTO rollup (${COLUMNS}) SELECT * FROM (${part.map(() => `(${select})`).join(' UNION ALL ')}) AS part ${OVERWRITE}`,
      part.flat(),
    );
  }
}

/** Joins five-minute buckets of one sensor that follow each other. */
export function stretchesOf(
  marks: readonly { sensorNo: number; bucket: number }[],
  zoneOf: (sensorNo: number) => string,
): DirtyStretch[] {
  const sorted = [...marks].sort((a, b) => a.sensorNo - b.sensorNo || a.bucket - b.bucket);
  const stretches: { sensorNo: number; from: number; to: number; timeZone: string }[] = [];
  for (const { sensorNo, bucket } of sorted) {
    const last = stretches.at(-1);
    if (last?.sensorNo === sensorNo && last.to === bucket) last.to = bucket + FIVE_MS;
    else stretches.push({ sensorNo, from: bucket, to: bucket + FIVE_MS, timeZone: zoneOf(sensorNo) });
  }
  return stretches;
}
