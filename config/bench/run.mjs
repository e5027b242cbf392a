import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { ensureDebianPackages, ensureNpmPackages, widenPath } from '../set-up/packages.mjs';
import { run } from '../set-up/run.mjs';
import { printFault } from '../set-up/steps.mjs';

/** npm run bench: measures speed on this machine; figures and ratios within one run, no pass or fail. */
const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
const BENCHES = ['estimates', 'intake'];
const wanted = process.argv.slice(2);
try {
  widenPath();
  await ensureNpmPackages(root);
  await ensureDebianPackages([{ program: 'mariadbd', package: 'mariadb-server' }]);
  for (const bench of BENCHES.filter((name) => wanted.length === 0 || wanted.includes(name))) {
    console.log(`\n${bench}`);
    await run('node', ['--import', 'tsx', join(root, `config/bench/${bench}.ts`)], {
      cwd: root,
      env: { ...process.env, TSX_TSCONFIG_PATH: join(root, 'gateway/tsconfig.json') },
      show: true,
    });
  }
} catch (error) {
  printFault(error);
  process.exitCode = 1;
}
