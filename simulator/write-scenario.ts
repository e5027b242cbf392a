import { closeSync, openSync, writeSync } from 'node:fs';
import { demoPast, demoScenarioAt } from './scenario/scenario.js';

/** Command: writes the demo's story and its ninety days of readings to a file. --out <file> [--now <ISO time>] */
const option = (name: string) => {
  const at = process.argv.indexOf(name);
  return at < 0 ? undefined : process.argv[at + 1];
};
const out = option('--out');
if (out === undefined) {
  console.error('Say where to: write-scenario --out <file>');
  process.exit(2);
}
const now = Date.parse(option('--now') ?? new Date().toISOString());
const file = openSync(out, 'w', 0o600);
const line = (value: unknown) => writeSync(file, `${JSON.stringify(value)}\n`);
line(demoScenarioAt(now));
for (const past of demoPast(now)) line(past);
closeSync(file);
