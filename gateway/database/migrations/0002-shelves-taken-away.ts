import type { MigrationInterface, QueryRunner } from 'typeorm';

/** A shelf that held batches once keeps its row when it is taken away: the stays of the past point at it. */
export class ShelvesTakenAway1764633600000 implements MigrationInterface {
  readonly name = 'ShelvesTakenAway1764633600000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query('ALTER TABLE shelf ADD COLUMN IF NOT EXISTS taken_away_at DATETIME(3) NULL');
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('ALTER TABLE shelf DROP COLUMN IF EXISTS taken_away_at');
  }
}
