import type { EntityManager } from 'typeorm';
import { DAY, HOUR } from './rollups.js';

/**
 * Forgets the daily rollups of a studio whose local days now begin at other moments, and marks every hour with readings, so that
 * the worker makes the days anew. Belongs into the transaction that changes the time zone.
 */
export async function remakeStudioDays(manager: EntityManager, studioId: string): Promise<void> {
  await manager.query(
    'DELETE r FROM rollup r JOIN sensor s ON s.no = r.sensor_no WHERE s.studio_id = ? AND r.level = ?',
    [studioId, DAY],
  );
  await manager.query(
    `INSERT INTO dirty_mark (sensor_no, bucket) SELECT r.sensor_no, r.bucket FROM rollup r JOIN sensor s ON s.no = r.sensor_no
     WHERE s.studio_id = ? AND r.level = ? ON DUPLICATE KEY UPDATE dirty_mark.bucket = dirty_mark.bucket`,
    [studioId, HOUR],
  );
}
