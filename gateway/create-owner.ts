import { randomUUID } from 'node:crypto';
import { text } from 'node:stream/consumers';
import { parseArgs } from 'node:util';
import * as f from '#shared/contract/fields';
import { checkDatabase, connectPatiently } from './database/check-database.js';
import { createDataSource } from './database/data-source.js';
import { OwnerRepository } from './features/people/owner-repository.js';
import { linkUrl } from './features/sign-in/mailed-links.js';
import { PasswordHashes } from './features/sign-in/password-hashes.js';
import { refusalOf } from './features/sign-in/password-rules.js';
import { normalEmail } from './features/sign-in/sign-in.js';
import { readSettings, type Settings } from './settings.js';
import { StartFault, startFaultInWords } from './start-faults.js';

/**
 * Command: makes somebody an owner, also when nobody can sign in any more.
 *   --email ines@example.org   or STILLROOM_OWNER_EMAIL
 *   --name "Ines Marlow"       or STILLROOM_OWNER_NAME; asked for by the link when left out
 *   --password-stdin           takes the password from standard input instead of printing a link
 * Prints a link, good once, with which the owner chooses a password.
 */
interface Wanted {
  readonly email: string;
  readonly name: string | null;
  readonly passwordFromStdin: boolean;
}

function readWanted(): Wanted {
  const { values } = parseArgs({
    options: {
      email: { type: 'string' },
      name: { type: 'string' },
      'password-stdin': { type: 'boolean', default: false },
    },
  });
  const email = f.email.safeParse(values.email ?? process.env['STILLROOM_OWNER_EMAIL']);
  if (!email.success) throw new StartFault('Give the owner an address: --email ines@example.org');
  const given = values.name ?? process.env['STILLROOM_OWNER_NAME'];
  const name = given === undefined ? null : f.name.safeParse(given);
  if (name?.success === false)
    throw new StartFault('Give a name of 1 to 80 characters: --name "Ines Marlow"');
  return {
    email: normalEmail(email.data),
    name: name?.data ?? null,
    passwordFromStdin: values['password-stdin'],
  };
}

/** The password on standard input, hashed. @throws StartFault when it may not be used */
async function hashFromStdin(wanted: Wanted, company: string): Promise<string> {
  const password = (await text(process.stdin)).replace(/\r?\n$/, '');
  const parsed = f.password.safeParse(password);
  const refusal = parsed.success
    ? refusalOf(password, { company, name: wanted.name ?? '', email: wanted.email })
    : (parsed.error.issues[0]?.message ?? '');
  if (refusal !== null) throw new StartFault(`This password cannot be used. ${refusal}`);
  const hashes = new PasswordHashes();
  try {
    return await hashes.hash(password);
  } finally {
    await hashes.stop();
  }
}

async function createOwner(settings: Settings, wanted: Wanted): Promise<void> {
  const passwordHash = wanted.passwordFromStdin ? await hashFromStdin(wanted, settings.company) : null;
  const dataSource = createDataSource(settings.database, 2);
  try {
    await connectPatiently(dataSource, 10_000, () => undefined);
    await checkDatabase(dataSource);
    const made = await new OwnerRepository(dataSource).make({
      id: randomUUID(),
      email: wanted.email,
      name: wanted.name,
      passwordHash,
      now: new Date(),
    });
    console.log(
      made.link === null
        ? `${wanted.email} is an owner and can sign in at ${settings.http.publicUrl}`
        : `${wanted.email} is an owner. Choose the password here; the link works once, until ${made.link.expiresAt.toISOString()}:\n` +
            linkUrl(settings.http.publicUrl, made.link.kind, made.link.token),
    );
  } finally {
    if (dataSource.isInitialized) await dataSource.destroy();
  }
}

try {
  await createOwner(readSettings(process.env), readWanted());
} catch (error) {
  const known = (error as { code?: string }).code?.startsWith('ERR_PARSE_ARGS') ?? false;
  const words = known ? (error as Error).message : startFaultInWords(error);
  console.error(words ?? error);
  process.exitCode = words === null ? 1 : 2;
}
