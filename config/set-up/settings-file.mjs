import { randomBytes } from 'node:crypto';
import { chmodSync, existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { SetUpError } from './steps.mjs';

const secret = () => randomBytes(32).toString('base64url');

/**
 * Settings of one data folder: made on the first start with fresh secrets, read again ever after.
 * What stands in the environment wins over the file.
 */
export function loadSettingsFile(dataDir, { demo }) {
  const file = join(dataDir, 'settings.env');
  const isNew = !existsSync(file);
  if (isNew) {
    mkdirSync(dataDir, { recursive: true });
    const lines = [
      '# Made by the first start. Secrets: keep this file to yourself.',
      `STILLROOM_DEMO=${demo ? 1 : 0}`,
      ...(demo ? ['STILLROOM_COMPANY=Larkrise Candleworks'] : []),
      `STILLROOM_DB_PASSWORD=${secret()}`,
      `STILLROOM_DB_OWNER_PASSWORD=${secret()}`,
      `STILLROOM_JWT_SECRET=${secret()}`,
      ...(demo ? [`STILLROOM_SIMULATOR_SECRET=${secret()}`] : []),
    ];
    writeFileSync(file, `${lines.join('\n')}\n`, { mode: 0o600 });
    chmodSync(file, 0o600);
  }
  const fromFile = {};
  for (const [number, line] of readFileSync(file, 'utf8').split('\n').entries()) {
    if (line.trim() === '' || line.startsWith('#')) continue;
    const at = line.indexOf('=');
    if (at < 1) throw new SetUpError(`Line ${number + 1} of ${file} is not NAME=value: ${line}`);
    fromFile[line.slice(0, at).trim()] = line.slice(at + 1).trim();
  }
  const given = Object.fromEntries(
    Object.entries(process.env).filter(([name, value]) => name.startsWith('STILLROOM_') && value !== ''),
  );
  return { ...fromFile, ...given };
}
