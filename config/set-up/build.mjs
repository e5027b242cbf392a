import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { run } from './run.mjs';
import { step } from './steps.mjs';

const SERVER_SOURCES = [
  'gateway',
  'shared',
  'simulator',
  'tsconfig.json',
  'package-lock.json',
  'package.json',
];
const WEB_SOURCES = ['web', 'shared', 'angular.json', 'tsconfig.json', 'package-lock.json', 'package.json'];

/** Builds the servers (dist/server) and the pages (dist/web) when their sources have changed since the last build. */
export async function ensureBuilt(root) {
  const server = stampOf(root, SERVER_SOURCES);
  const web = stampOf(root, WEB_SOURCES);
  if (!isCurrent(root, 'server', server)) {
    await step('building the gateway and the simulator', async () => {
      rmSync(join(root, 'dist/server'), { recursive: true, force: true });
      rmSync(join(root, '.cache/server-build.tsbuildinfo'), { force: true });
      await run('node', ['node_modules/typescript/bin/tsc', '-p', 'gateway/tsconfig.build.json'], {
        cwd: root,
      });
      keepStamp(root, 'server', server);
    });
  }
  if (!isCurrent(root, 'web', web)) {
    await step('building the pages', async () => {
      await run('node', ['node_modules/@angular/cli/bin/ng.js', 'build', '--progress=false'], {
        cwd: root,
        env: { ...process.env, NG_CLI_ANALYTICS: 'false', CI: '1' },
      });
      keepStamp(root, 'web', web);
    });
  }
}

function isCurrent(root, part, stamp) {
  const file = join(root, 'dist', `${part}.stamp`);
  return existsSync(file) && existsSync(join(root, 'dist', part)) && readFileSync(file, 'utf8') === stamp;
}

function keepStamp(root, part, stamp) {
  mkdirSync(join(root, 'dist'), { recursive: true });
  writeFileSync(join(root, 'dist', `${part}.stamp`), stamp);
}

/** Hash over names and contents of the sources; specs do not count. */
function stampOf(root, sources) {
  const hash = createHash('sha256');
  const visit = (path) => {
    const full = join(root, path);
    if (!existsSync(full)) return;
    let names;
    try {
      names = readdirSync(full).sort();
    } catch {
      hash.update(path).update(readFileSync(full));
      return;
    }
    for (const name of names) if (!name.endsWith('.spec.ts') && name !== 'fixtures') visit(`${path}/${name}`);
  };
  for (const source of sources) visit(source);
  return hash.digest('hex');
}
