import { createHash } from 'node:crypto';
import { accessSync, constants, existsSync, readFileSync, statfsSync, writeFileSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { run } from './run.mjs';
import { SetUpError, step } from './steps.mjs';

const OLDEST_NODE = [20, 19];

/** @throws SetUpError when this Node is too old */
export function checkNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major < OLDEST_NODE[0] || (major === OLDEST_NODE[0] && minor < OLDEST_NODE[1])) {
    throw new SetUpError(
      `Stillroom needs Node ${OLDEST_NODE.join('.')} or newer; this is ${process.versions.node}. Install a newer Node and start again.`,
    );
  }
}

/** @throws SetUpError when less than `megabytes` are free where `folder` lies */
export function checkDisk(folder, megabytes) {
  const { bavail, bsize } = statfsSync(folder);
  const free = Math.floor((bavail * bsize) / 1e6);
  if (free < megabytes) {
    throw new SetUpError(
      `The disk that holds ${folder} has ${free} MB left; ${megabytes} MB are needed. Free some space and start again.`,
    );
  }
}

/** Installs the npm packages of the lock file when they are missing or the lock file has changed. */
export async function ensureNpmPackages(root) {
  const wanted = createHash('sha256')
    .update(readFileSync(join(root, 'package-lock.json')))
    .digest('hex');
  const mark = join(root, 'node_modules', '.stillroom-lock');
  if (existsSync(mark) && readFileSync(mark, 'utf8') === wanted) return;
  await step('npm packages', async () => {
    try {
      await run('npm', ['ci', '--ignore-scripts', '--no-audit', '--no-fund'], { cwd: root });
    } catch (error) {
      throw new SetUpError(
        `The npm packages could not be installed. Check the connection to your npm registry (npm ping) and that ${root} may be written, then start again.\n${error.message}`,
      );
    }
    writeFileSync(mark, wanted);
  });
}

/** Debian keeps servers in /usr/sbin, which an ordinary user's PATH may lack. */
export function widenPath() {
  process.env['PATH'] = `${process.env['PATH'] ?? ''}${delimiter}/usr/sbin${delimiter}/sbin`;
}

/** @returns whether a program is on the PATH */
export function hasProgram(name) {
  return (process.env['PATH'] ?? '').split(delimiter).some((folder) => {
    try {
      accessSync(join(folder, name), constants.X_OK);
      return true;
    } catch {
      return false;
    }
  });
}

/**
 * Installs the Debian packages whose programs are missing.
 * @param {readonly { program: string, package: string }[]} wanted
 * @throws SetUpError when there is no right to install, with the command to ask somebody else to run
 */
export async function ensureDebianPackages(wanted) {
  const missing = wanted.filter(({ program }) => !hasProgram(program)).map((entry) => entry.package);
  if (missing.length === 0) return;
  const byHand = `apt-get install --no-install-recommends ${missing.join(' ')}`;
  if (!hasProgram('apt-get')) {
    throw new SetUpError(
      `These are needed and this machine has no apt-get: ${missing.join(', ')}. Install them and start again.`,
    );
  }
  const asRoot = process.getuid?.() === 0;
  if (!asRoot && !hasProgram('sudo')) {
    throw new SetUpError(
      `${missing.join(', ')} must be installed, and you are neither root nor have sudo. Ask an administrator to run:\n  ${byHand}`,
    );
  }
  const [command, ...before] = asRoot ? ['apt-get'] : ['sudo', 'apt-get'];
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  await step(`Debian packages ${missing.join(', ')}`, async () => {
    const install = () =>
      run(command, [...before, 'install', '-y', '-q', '--no-install-recommends', ...missing], { env });
    try {
      await run(command, [...before, 'update', '-q'], { env });
      await install();
    } catch (error) {
      throw new SetUpError(
        `The Debian packages could not be installed. As an administrator run:\n  ${byHand}\n${error.message}`,
      );
    }
    const still = wanted.filter(({ program }) => !hasProgram(program)).map((entry) => entry.program);
    if (still.length > 0)
      throw new SetUpError(`After the installation these programs are still missing: ${still.join(', ')}.`);
  });
}
