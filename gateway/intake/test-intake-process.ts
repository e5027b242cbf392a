import { pino } from 'pino';
import type { CommittedReading } from '../announcements.js';
import { systemClock } from '../clock.js';
import { createDataSource } from '../database/data-source.js';
import { Feed } from '../feed.js';
import { RollupWorker } from '../history/rollup-worker.js';
import { Intake } from './intake.js';

/** The intake alone in a process of its own, to be killed by specs and measured by the bench. */
const setting = (name: string) => process.env[name] ?? '';
const access = {
  host: '127.0.0.1',
  port: Number(setting('SPEC_DB_PORT')),
  name: setting('SPEC_DB_NAME'),
  user: setting('SPEC_DB_USER'),
  password: setting('SPEC_DB_PASSWORD'),
};
const log = pino({ level: process.env['SPEC_LOG'] ?? 'silent' });
const dataSource = createDataSource(access);
for (;;) {
  try {
    await dataSource.initialize();
    break;
  } catch {
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}
const committed = new Feed<readonly CommittedReading[]>();
const intake = new Intake({
  dataSource,
  database: access,
  mqtt: { host: '127.0.0.1', port: Number(setting('SPEC_MQTT_PORT')), tls: null },
  clock: systemClock,
  demo: null,
  committed,
  layout: new Feed(),
  log,
});
await intake.start();
new RollupWorker({ dataSource, committed, cells: new Feed(), log }).start();
process.on('message', () => process.send?.({ rss: process.memoryUsage().rss, ...intake.health() }));
process.send?.('ready');
