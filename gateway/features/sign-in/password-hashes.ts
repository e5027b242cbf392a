import { createHash } from 'node:crypto';
import { createRequire } from 'node:module';
import { Worker } from 'node:worker_threads';
import { ProblemError } from '../../http/problem-error.js';

const COST = 12;
const AT_ONCE = 2;
const LONGEST_QUEUE = 100;

/** Hash of a password nobody knows, at the same cost: an unknown person takes as long as a known one. */
const NOBODY = '$2b$12$HWhEFZIKQ08YTwnJH2BhCOTAlVs5K4KNP.PF3AWFTpTdy.7Gx5esy';

/**
 * bcryptjs computes in slices of 100 ms on the thread that calls it; readings would wait for every sign-in. So it runs in
 * threads of its own. The source is a text because a thread starts from a file of plain JavaScript, which specs have not.
 */
const THREAD = `
  const { parentPort, workerData } = require('node:worker_threads');
  const bcrypt = require(workerData.bcryptjs);
  parentPort.on('message', ({ text, hash, cost }) => {
    parentPort.postMessage(hash === null ? bcrypt.hashSync(text, cost) : bcrypt.compareSync(text, hash));
  });`;

interface Job {
  readonly text: string;
  readonly hash: string | null;
  readonly cost: number;
  readonly resolve: (answer: string | boolean) => void;
  readonly reject: (error: unknown) => void;
}

/** bcrypt hashes of passwords: cost 12, at most two computed at once, the rest in a queue. */
export class PasswordHashes {
  readonly #waiting: Job[] = [];
  readonly #threads = new Set<Worker>();
  readonly #idle: Worker[] = [];

  /** @param cost logarithm of the rounds; less than 12 only where a spec needs many people */
  constructor(private readonly cost = COST) {}

  /** @throws ProblemError busy when too many hashes wait already */
  async hash(password: string): Promise<string> {
    return (await this.#run(password, null)) as string;
  }

  /** Whether the password belongs to the hash; without a hash false, after the same time. @throws ProblemError busy */
  async verify(password: string, hash: string | null): Promise<boolean> {
    const matches = (await this.#run(password, hash ?? NOBODY)) as boolean;
    return matches && hash !== null;
  }

  /** Ends the threads; hashes under way are rejected. */
  async stop(): Promise<void> {
    for (const job of this.#waiting.splice(0)) job.reject(new ProblemError('busy', STOPPING));
    await Promise.all([...this.#threads].map((thread) => thread.terminate()));
  }

  #run(password: string, hash: string | null): Promise<string | boolean> {
    if (this.#waiting.length >= LONGEST_QUEUE) {
      throw new ProblemError('busy', 'Many people are signing in just now. Try again in a minute.');
    }
    return new Promise((resolve, reject) => {
      this.#waiting.push({ text: preHash(password), hash, cost: this.cost, resolve, reject });
      this.#next();
    });
  }

  #next(): void {
    if (this.#waiting.length === 0) return;
    const thread = this.#idle.pop() ?? (this.#threads.size < AT_ONCE ? this.#startThread() : undefined);
    const job = thread ? this.#waiting.shift() : undefined;
    if (!thread || !job) return;
    const done = () => {
      thread.off('message', answered).off('exit', ended).off('error', failed);
      thread.unref();
    };
    const answered = (answer: string | boolean) => {
      done();
      this.#idle.push(thread);
      job.resolve(answer);
      this.#next();
    };
    const failed = (error: unknown) => {
      done();
      this.#threads.delete(thread);
      job.reject(error);
      this.#next();
    };
    const ended = () => failed(new ProblemError('busy', STOPPING));
    thread.on('message', answered).on('exit', ended).on('error', failed);
    thread.ref();
    const { text, cost } = job;
    thread.postMessage({ text, hash: job.hash, cost });
  }

  #startThread(): Worker {
    const bcryptjs = createRequire(import.meta.url).resolve('bcryptjs');
    const thread = new Worker(THREAD, { eval: true, workerData: { bcryptjs } });
    this.#threads.add(thread);
    return thread;
  }
}

const STOPPING = 'The gateway is stopping. Try again in a minute.';

/** bcrypt reads 72 bytes only; 44 characters of base64 stand for a password of any length, and hold no zero byte. */
function preHash(password: string): string {
  return createHash('sha256').update(password.normalize('NFC')).digest('base64');
}
