import { randomUUID } from 'node:crypto';
import type { Logger } from 'pino';
import type { DataSource } from 'typeorm';
import type { DemoScenario } from '#shared/contract/demo-scenario';
import { BatchFactsRepository } from '../features/estimates/batch-facts-repository.js';
import { Estimates } from '../features/estimates/estimates.js';
import { Feed } from '../feed.js';
import { RoomCellsRepository } from '../history/room-cells-repository.js';
import { RoomHistories } from '../history/room-histories.js';
import type { DemoFloor } from './demo-floor.js';

/** Signs the wick tests of the story with the hardening and cure age the loaded readings give at the time. */
export async function signDemoTests(
  dataSource: DataSource,
  scenario: DemoScenario,
  floor: DemoFloor,
  log: Logger,
): Promise<void> {
  const now = Date.parse(scenario.now);
  const clock = { now: () => now, speed: () => 1 };
  const failed = (error: unknown) => log.error({ err: error }, 'loading the demo');
  const histories = new RoomHistories({
    cells: new RoomCellsRepository(dataSource),
    clock,
    changed: new Feed(failed),
    failed,
  });
  const facts = new BatchFactsRepository(dataSource);
  const estimates = new Estimates({ facts, histories, clock, changed: new Feed(failed), failed });
  for (const batch of scenario.batches) {
    for (const test of batch.tests) {
      const batchId = floor.id('batch', batch.code);
      const age = await estimates.ageAt(batchId, Date.parse(test.at));
      if (age === null) continue;
      await dataSource.query(
        'INSERT INTO burn_verdict (id, batch_id, design_id, at, passed, note, signed_by, hardening_at_test, cure_age_days) VALUES (?)',
        [
          [
            ...[
              randomUUID(),
              batchId,
              floor.id('design', batch.design),
              new Date(test.at),
              test.passed ? 1 : 0,
            ],
            ...[test.note, floor.id('person', test.signedBy), age.hardening, age.cureAgeDays],
          ],
        ],
      );
    }
  }
}
