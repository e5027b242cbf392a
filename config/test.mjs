import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import {
  checkDisk,
  checkNode,
  ensureDebianPackages,
  ensureNpmPackages,
  widenPath,
} from './set-up/packages.mjs';
import { run } from './set-up/run.mjs';
import { printFault, step } from './set-up/steps.mjs';

/**
 * npm test: installs what is missing and runs every check; the last line is "N passed, N failed".
 *   npm test -- lint | unit | integration | e2e     only these
 *   npm test -- e2e --grep "a viewer"               what follows goes to the runner
 */
const root = dirname(dirname(fileURLToPath(import.meta.url)));
const PARTS = ['lint', 'unit', 'integration', 'e2e'];
const given = process.argv.slice(2);
const parts = PARTS.includes(given[0]) ? [given[0]] : PARTS;
const rest = PARTS.includes(given[0]) ? given.slice(1) : given;
const bin = (path) => join(root, 'node_modules', path);
const reports = join(root, '.cache/test');
const total = { passed: 0, failed: 0 };

checkNode();
widenPath();
let stack = null;
process.on('exit', () => stack?.kill());
for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => process.exit(130));

try {
  checkDisk(root, 1500);
  await ensureNpmPackages(root);
  await ensureDebianPackages([
    { program: 'mariadbd', package: 'mariadb-server' },
    { program: 'mosquitto_pub', package: 'mosquitto-clients' },
    { program: 'chromium', package: 'chromium' },
    // Chromium draws nothing without at least one font of the system.
    { program: 'fc-list', package: 'fontconfig' },
  ]);
  rmSync(reports, { recursive: true, force: true });
  mkdirSync(reports, { recursive: true });
  if (parts.includes('lint')) await lint();
  if (parts.includes('unit')) await unit();
  if (parts.includes('integration')) {
    await vitest('integration tests (MariaDB, broker, sockets)', 'integration', ['--project', 'integration']);
  }
  if (parts.includes('e2e')) await endToEnd();
} catch (error) {
  printFault(error);
  total.failed++;
}
console.log(`${total.passed} passed, ${total.failed} failed`);
process.exit(total.failed === 0 ? 0 : 1);

async function lint() {
  const tsc = bin('typescript/bin/tsc');
  await check('format', [bin('prettier/bin/prettier.cjs'), '--check', '--log-level', 'warn', '.']);
  await check('lint', [
    bin('eslint/bin/eslint.js'),
    '--config',
    'config/eslint.config.mjs',
    '--max-warnings',
    '0',
    '.',
  ]);
  await check('who imports whom', [
    bin('dependency-cruiser/bin/dependency-cruise.mjs'),
    '--config',
    'config/dependency-cruiser.cjs',
    'shared',
    'gateway',
    'simulator',
    'web',
    'e2e',
  ]);
  await check('types of gateway, simulator and shared', [tsc, '-p', 'gateway', '--noEmit']);
  await check('types of the pages and their specs', [tsc, '-p', 'web/tsconfig.spec.json', '--noEmit']);
  await check('types of the end-to-end tests', [tsc, '-p', 'e2e', '--noEmit']);
  await check('types of the tool presets', [tsc, '-p', 'config', '--noEmit']);
}

async function unit() {
  await vitest('unit tests of shared, gateway and simulator', 'unit', [
    '--project',
    'shared',
    '--project',
    'gateway',
  ]);
  await runner('unit tests of the pages', join(reports, 'web.json'), [
    bin('@angular/cli/bin/ng.js'),
    'test',
    '--reporters=default',
    '--reporters=json',
    `--output-file=${join(reports, 'web.json')}`,
  ]);
}

async function endToEnd() {
  const { ensureBuilt } = await import('./set-up/build.mjs');
  const { Stack } = await import('./set-up/stack.mjs');
  const { freePorts } = await import('./set-up/ports.mjs');
  await ensureBuilt(root);
  const dataDir = mkdtempSync(join(tmpdir(), 'stillroom-e2e-'));
  const [http, mqtt, database, smtp, desk] = await freePorts(5);
  for (const name of Object.keys(process.env)) if (name.startsWith('STILLROOM_')) delete process.env[name];
  Object.assign(process.env, {
    STILLROOM_HTTP_PORT: String(http),
    STILLROOM_MQTT_PORT: String(mqtt),
    STILLROOM_DB_PORT: String(database),
    STILLROOM_SMTP_PORT: String(smtp),
    STILLROOM_DESK_PORT: String(desk),
  });
  stack = new Stack({ root, dataDir, demo: true, tell: (sentence) => console.log(sentence) });
  try {
    await stack.start();
    await runner(
      'end-to-end tests in Chromium',
      join(reports, 'e2e.json'),
      [bin('@playwright/test/cli.js'), 'test', '--config', 'config/playwright.config.ts', ...rest],
      { E2E_URL: stack.url, E2E_DESK_URL: stack.deskUrl, E2E_RUNNING_FILE: join(dataDir, 'running.json') },
    );
  } finally {
    await stack.stop();
    rmSync(dataDir, { recursive: true, force: true });
  }
}

/** One check without tests of its own counts as one. */
async function check(title, args) {
  try {
    await step(title, async () => void (await run('node', args, { cwd: root })));
    total.passed++;
  } catch (error) {
    printFault(error);
    total.failed++;
  }
}

function vitest(title, name, projects) {
  const report = join(reports, `${name}.json`);
  return runner(title, report, [
    bin('vitest/vitest.mjs'),
    'run',
    '--config',
    'config/vitest.config.ts',
    ...projects,
    '--reporter=default',
    '--reporter=json',
    `--outputFile.json=${report}`,
    ...rest,
  ]);
}

/** Runs a test runner with its output shown and adds up what its report says. */
async function runner(title, report, args, env = {}) {
  console.log(`  … ${title}`);
  let broken = false;
  await run('node', args, { cwd: root, env: { ...process.env, ...env }, show: true }).catch(
    () => (broken = true),
  );
  const counts = existsSync(report)
    ? countsOf(JSON.parse(readFileSync(report, 'utf8')))
    : { passed: 0, failed: 0 };
  // A runner that fails without a failed test (a file that does not load, say) must not look green.
  if (broken && counts.failed === 0) counts.failed = 1;
  total.passed += counts.passed;
  total.failed += counts.failed;
  console.log(
    `  ${counts.failed === 0 ? '✓' : '✗'} ${title}: ${counts.passed} passed, ${counts.failed} failed`,
  );
}

function countsOf(report) {
  if (report.stats) {
    return { passed: report.stats.expected, failed: report.stats.unexpected + report.stats.flaky };
  }
  return { passed: report.numPassedTests, failed: report.numFailedTests };
}
