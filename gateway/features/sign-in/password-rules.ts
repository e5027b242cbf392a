import { COMMON_PASSWORDS, RUNS } from './common-passwords.js';

/** Whose password it is to be; words of these make bad secrets. */
export interface PasswordOwner {
  readonly company: string;
  readonly name: string;
  readonly email: string;
}

/** A password this long is not refused for being made of one of the words. */
const LONG = 20;

/**
 * Why a password is refused, as a sentence, or null if it may be used. Length is checked by the contract (8 to 200 characters);
 * there are no rules of composition and no forced change.
 */
export function refusalOf(password: string, owner: PasswordOwner): string | null {
  const plain = password.normalize('NFKC').toLowerCase();
  if (new Set(plain).size < 4) return 'This repeats the same few characters. Use several words instead.';
  if (walksAlongRuns(plain))
    return 'This only walks along the keyboard or counts. Use several words instead.';
  const cores = coresOf(plain);
  if (cores.some((core) => COMMON_PASSWORDS.has(core))) {
    return 'This is one of the passwords that are tried first. Use several words instead.';
  }
  const own = ownWords(owner);
  if (plain.length < LONG && cores.some((core) => own.has(core))) {
    return 'Your name, your address, the company and Stillroom are guessed first. Use several other words.';
  }
  return null;
}

/** What is left of a password without the digits and signs people put around or between, also with 0, 1, 3 … read as letters. */
function coresOf(plain: string): string[] {
  const trimmed = plain.replace(/^[^\p{L}]+|[^\p{L}]+$/gu, '');
  const letters = plain.replace(/[^\p{L}]/gu, '');
  const spelled = [...plain.replace(/^[^\p{L}@$]+|[^\p{L}@$]+$/gu, '')]
    .map((sign) => LOOKS_LIKE[sign] ?? sign)
    .join('');
  return [trimmed, letters, spelled].flatMap((core) => [core, halfOf(core)]);
}

const LOOKS_LIKE: Readonly<Record<string, string>> = {
  '0': 'o',
  '1': 'i',
  '!': 'i',
  '3': 'e',
  '4': 'a',
  '@': 'a',
  '5': 's',
  $: 's',
  '7': 't',
};

/** The half of a word written twice ("candlecandle"), else the word. */
function halfOf(core: string): string {
  const half = core.slice(0, core.length / 2);
  return half !== '' && half + half === core ? half : core;
}

function walksAlongRuns(plain: string): boolean {
  const steps = plain.replace(/[^\p{L}\p{N}]/gu, '');
  let rest = steps;
  let pieces = 0;
  while (rest.length >= 3) {
    const length = longestRun(rest);
    if (length < 3) return false;
    rest = rest.slice(length);
    pieces++;
  }
  return pieces > 0 && pieces <= 3;
}

function longestRun(text: string): number {
  let best = 0;
  for (const run of RUNS.flatMap((row) => [row, [...row].reverse().join('')])) {
    let length = best + 1;
    while (length <= text.length && run.includes(text.slice(0, length))) best = length++;
  }
  return best;
}

function ownWords({ company, name, email }: PasswordOwner): Set<string> {
  const words = [company, name, email.split('@')[0] ?? '', email.split('@')[1]?.split('.')[0] ?? '']
    .flatMap((text) => [text, ...text.split(/[^\p{L}\p{N}]+/u)])
    .map((word) => word.normalize('NFKC').toLowerCase())
    .flatMap((word) => [word, word.replace(/[^\p{L}]/gu, '')])
    .filter((word) => word.length >= 4);
  return new Set(['stillroom', ...words]);
}
