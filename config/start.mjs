import { dirname } from 'node:path';
import { fileURLToPath } from 'node:url';
import { checkNode, ensureDebianPackages, ensureNpmPackages, widenPath } from './set-up/packages.mjs';
import { printFault } from './set-up/steps.mjs';

/**
 * npm start: installs what is missing, builds, starts everything and stays until Ctrl-C.
 *   --without-demo   an empty Stillroom of your own instead of the demo
 *   --reset-demo     starts the demo over
 */
const root = dirname(dirname(fileURLToPath(import.meta.url)));
const flags = new Set(process.argv.slice(2));
const dataDir = process.env['STILLROOM_DATA_DIR'] ?? '.stillroom';
const startedAt = performance.now();
let stack = null;
let stopping = false;

async function stop(signal) {
  if (stopping) {
    console.log('\nStopping at once.');
    stack?.kill();
    process.exit(1);
  }
  stopping = true;
  console.log(`\n${signal}: stopping. Once more to stop at once.`);
  await stack?.stop();
  console.log('Stopped. Everything is kept.');
  process.exit(0);
}

try {
  for (const flag of flags) {
    if (!['--without-demo', '--reset-demo'].includes(flag)) {
      console.error(`npm start knows --without-demo and --reset-demo, not ${flag}.`);
      process.exit(2);
    }
  }
  checkNode();
  widenPath();
  await ensureNpmPackages(root);
  await ensureDebianPackages([{ program: 'mariadbd', package: 'mariadb-server' }]);
  const { ensureBuilt } = await import('./set-up/build.mjs');
  const { Stack } = await import('./set-up/stack.mjs');
  stack = new Stack({
    root,
    dataDir,
    demo: !flags.has('--without-demo'),
    tell: (sentence) => console.log(sentence),
  });
  process.on('SIGINT', () => void stop('Ctrl-C'));
  process.on('SIGTERM', () => void stop('SIGTERM'));
  process.on('SIGHUP', () => void stop('SIGHUP'));
  process.on('exit', () => stack.kill());
  stack.checkNotRunning();
  if (flags.has('--reset-demo')) await stack.resetDemo();
  await ensureBuilt(root);
  await stack.start();
  console.log(
    `\nStillroom runs after ${((performance.now() - startedAt) / 1000).toFixed(0)} s:  ${stack.url}`,
  );
  if (stack.demo) {
    const { DEMO_SIGN_INS } = await import('../dist/server/shared/contract/demo-sign-ins.js');
    console.log(`Demo desk (mailbox, speed, faults):  ${stack.deskUrl}\n\nDemo sign-ins:`);
    for (const { email, password, what } of DEMO_SIGN_INS) console.log(`  ${email}  ${password}   ${what}`);
  } else {
    console.log(
      'Create the first owner in another window:  npm run owner -- --email you@example.org --name "Your name"',
    );
  }
  console.log('\nCtrl-C stops everything.');
} catch (error) {
  printFault(error);
  process.exitCode = 1;
  if (stack) await stack.stop();
  process.exit(1);
}
