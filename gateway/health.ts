import type { DataSource } from 'typeorm';
import type { Clock } from './clock.js';
import type { Settings } from './settings.js';

export interface HealthParts {
  readonly settings: Pick<Settings, 'demo'>;
  readonly dataSource: Pick<DataSource, 'query'>;
  readonly clock: Clock;
}

export interface IntakeHealth {
  health(): { readonly waitingRows: number };
}

const PATIENCE_MS = 2000;
/** So many rows waiting mean that the database does not keep up. */
const MANY_ROWS = 50_000;

/** Whether the parts work, in words, without anything a stranger should not know. */
export class Health {
  constructor(
    private readonly parts: HealthParts,
    private readonly intake: IntakeHealth,
  ) {}

  async look(): Promise<{ ok: boolean; parts: Record<string, string> }> {
    const database = await this.answers();
    const { waitingRows } = this.intake.health();
    const { settings, clock } = this.parts;
    const behind = waitingRows >= MANY_ROWS;
    return {
      ok: database && !behind,
      parts: {
        database: database ? 'answers' : 'does not answer',
        intake: behind
          ? 'readings wait for the database'
          : waitingRows > 0
            ? 'is storing readings'
            : 'keeps up',
        // The simulator may be away without harm: time then runs on as it did last.
        ...(settings.demo
          ? { clock: `demo time ${new Date(clock.now()).toISOString()}, ${clock.speed()} times as fast` }
          : {}),
      },
    };
  }

  private async answers(): Promise<boolean> {
    let timer: NodeJS.Timeout | undefined;
    const late = new Promise<boolean>((resolve) => {
      timer = setTimeout(() => resolve(false), PATIENCE_MS);
    });
    const asked = this.parts.dataSource.query('SELECT 1').then(
      () => true,
      () => false,
    );
    const answered = await Promise.race([asked, late]);
    clearTimeout(timer);
    return answered;
  }
}
