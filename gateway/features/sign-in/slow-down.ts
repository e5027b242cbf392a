/** What to do with a try at signing in. */
export type Pace =
  { readonly kind: 'go'; readonly holdMs: number } | { readonly kind: 'wait'; readonly seconds: number };

const FREE_TRIES = 5;
const LONGEST_WAIT_S = 60;
const FREE_TRIES_OF_ACCOUNT = 15;
const HOLD_STEP_MS = 250;
const LONGEST_HOLD_MS = 3000;
const FORGET_MS = 15 * 60_000;
const MOST_KEYS = 20_000;

interface Tries {
  count: number;
  lastAt: number;
  goodFrom: number;
}

/**
 * Makes guessing slow without locking anybody out. One account tried from one address: five free tries, then a pause of 1, 2, 4 … 60 s
 * before the next. One account tried from many addresses: each answer is held back by up to 3 s, whoever asks. A quarter of an hour
 * without a failed try, or a right password, starts afresh. Kept in memory only.
 */
export class SlowDown {
  readonly #pairs = new Map<string, Tries>();
  readonly #accounts = new Map<string, Tries>();

  /** @param now milliseconds that never go back */
  constructor(private readonly now: () => number) {}

  /** Counts a try before its password is looked at, so that tries sent all at once are slowed as well. */
  begin(account: string, network: string): Pace {
    const now = this.now();
    const pair = triesOf(this.#pairs, `${account}\n${network}`, now);
    if (now < pair.goodFrom)
      return { kind: 'wait', seconds: Math.max(1, Math.ceil((pair.goodFrom - now) / 1000)) };
    count(pair, now);
    if (pair.count >= FREE_TRIES) {
      pair.goodFrom = now + 1000 * Math.min(LONGEST_WAIT_S, 2 ** Math.min(10, pair.count - FREE_TRIES));
    }
    const all = triesOf(this.#accounts, account, now);
    count(all, now);
    const beyond = Math.max(0, all.count - FREE_TRIES_OF_ACCOUNT);
    return { kind: 'go', holdMs: Math.min(LONGEST_HOLD_MS, HOLD_STEP_MS * beyond) };
  }

  /** Forgets the tries after the right password. */
  succeeded(account: string, network: string): void {
    this.#pairs.delete(`${account}\n${network}`);
    this.#accounts.delete(account);
  }
}

function count(tries: Tries, now: number): void {
  tries.count++;
  tries.lastAt = now;
}

function triesOf(all: Map<string, Tries>, key: string, now: number): Tries {
  const known = all.get(key);
  all.delete(key);
  const tries = known && now - known.lastAt < FORGET_MS ? known : { count: 0, lastAt: now, goodFrom: 0 };
  // Re-inserted last: the map's first keys are the ones not tried for longest.
  all.set(key, tries);
  if (all.size > MOST_KEYS) for (const oldest of all.keys()) if (all.size > MOST_KEYS) all.delete(oldest);
  return tries;
}
