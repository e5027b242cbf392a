import { spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { loadSettingsFile } from './set-up/settings-file.mjs';

/**
 * npm run owner -- --email you@example.org --name "Your name": makes somebody an owner of the Stillroom that runs from this folder.
 * With --password-stdin the password is read from standard input; without it a link is printed that works once.
 */
const root = dirname(dirname(fileURLToPath(import.meta.url)));
const dataDir = resolve(root, process.env['STILLROOM_DATA_DIR'] ?? '.stillroom');
const program = join(root, 'dist/server/gateway/create-owner.js');

if (!existsSync(join(dataDir, 'settings.env')) || !existsSync(program)) {
  console.error('Start Stillroom first, in another window:  npm start -- --without-demo');
  process.exit(2);
}
const child = spawn(process.execPath, ['--conditions=compiled', program, ...process.argv.slice(2)], {
  cwd: root,
  env: { ...process.env, ...loadSettingsFile(dataDir, { demo: false }) },
  stdio: 'inherit',
});
child.once('close', (code) => {
  process.exitCode = code ?? 1;
});
