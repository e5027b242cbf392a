import { closeSync, createReadStream, openSync, writeSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { createInterface } from 'node:readline';
import { demoReadings, demoScenario } from '#shared/contract/demo-scenario';
import { createLog } from './create-log.js';
import { createDataSource } from './database/data-source.js';
import { DemoFloor } from './demo/demo-floor.js';
import { signDemoTests } from './demo/demo-tests.js';
import { demoPastAlerts } from './demo/past-alerts.js';
import { bulkLoad } from './history/bulk-load.js';
import { readSettings } from './settings.js';

/**
 * Command: loads a demo scenario into an empty database. The readings go through the same parsing and rollups as live ones.
 * load-demo <scenario.jsonl>; the devices' secrets are written beside it.
 */
const file = process.argv[2];
if (file === undefined) {
  console.error('Say what to load: load-demo <scenario.jsonl>');
  process.exit(2);
}
const settings = readSettings(process.env);
const dataSource = createDataSource(settings.database);
await dataSource.initialize();
try {
  const lines = createInterface(createReadStream(file, 'utf8'))[Symbol.asyncIterator]();
  const first = await lines.next();
  if (first.done) throw new Error(`${file} is empty.`);
  const scenario = demoScenario.parse(JSON.parse(first.value));
  const now = Date.parse(scenario.now);
  const floor = new DemoFloor(dataSource, scenario);
  await floor.insert();
  const secrets = openSync(join(dirname(file), 'devices.json'), 'w', 0o600);
  writeSync(secrets, JSON.stringify(floor.devices));
  closeSync(secrets);
  let readings = 0;
  for (let line = await lines.next(); !line.done; line = await lines.next()) {
    const { device, payloads } = demoReadings.parse(JSON.parse(line.value));
    const past = { ...floor.sensor(device), payloads };
    const loaded = await bulkLoad(dataSource, past, now);
    if (loaded.faults.length > 0) throw new Error(`${device}: ${loaded.faults[0]}`);
    readings += loaded.readings;
  }
  console.log(`${readings} readings of ${Object.keys(floor.devices).length} sensors`);
  const log = createLog('error');
  await signDemoTests(dataSource, scenario, floor, log);
  console.log(`${await demoPastAlerts(dataSource, scenario, floor)} past alerts`);
} finally {
  await dataSource.destroy();
}
