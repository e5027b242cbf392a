import { spawn } from 'node:child_process';
import { closeSync, existsSync, mkdirSync, openSync, readFileSync, renameSync, statSync } from 'node:fs';
import { dirname } from 'node:path';

const LOG_LIMIT = 20e6;
const FIRST_WAIT_MS = 100;
const LONGEST_WAIT_MS = 5000;

/** A program of ours that is started again when it ends by itself; its output goes into a log file. */
export class Supervised {
  #child = null;
  #stopping = false;
  #wait = FIRST_WAIT_MS;
  #timer = null;

  /**
   * @param {{ name: string, command: string, args: string[], env: Record<string, string>, cwd: string, logFile: string,
   *   tell: (sentence: string) => void }} options
   */
  constructor(options) {
    this.options = options;
  }

  get pid() {
    return this.#child?.pid ?? null;
  }

  get running() {
    return this.#child !== null;
  }

  start() {
    const { command, args, env, cwd, logFile } = this.options;
    mkdirSync(dirname(logFile), { recursive: true });
    if (existsSync(logFile) && statSync(logFile).size > LOG_LIMIT) renameSync(logFile, `${logFile}.1`);
    const log = openSync(logFile, 'a');
    const startedAt = performance.now();
    // A group of its own: Ctrl-C reaches only the starter, which then stops everything in order.
    const child = spawn(command, args, { cwd, env, stdio: ['ignore', log, log], detached: true });
    closeSync(log);
    this.#child = child;
    child.once('error', () => undefined);
    child.once('close', (code, signal) => {
      this.#child = null;
      if (this.#stopping) return;
      if (performance.now() - startedAt > 30_000) this.#wait = FIRST_WAIT_MS;
      this.options.tell(
        `${this.options.name} ended (${signal ?? code}); starting it again in ${(this.#wait / 1000).toFixed(1)} s. Its log: ${logFile}`,
      );
      this.#timer = setTimeout(() => this.start(), this.#wait);
      this.#wait = Math.min(this.#wait * 2, LONGEST_WAIT_MS);
    });
  }

  /** Asks the program to end and waits; after `patience` ms it is killed. */
  async stop(patience = 10_000) {
    this.#stopping = true;
    clearTimeout(this.#timer);
    const child = this.#child;
    if (!child) return;
    const gone = new Promise((resolve) => child.once('close', resolve));
    child.kill('SIGTERM');
    const timer = setTimeout(() => child.kill('SIGKILL'), patience);
    await gone;
    clearTimeout(timer);
  }

  kill() {
    this.#stopping = true;
    clearTimeout(this.#timer);
    this.#child?.kill('SIGKILL');
  }

  lastLog(lines = 15) {
    if (!existsSync(this.options.logFile)) return '';
    return readFileSync(this.options.logFile, 'utf8').trimEnd().split('\n').slice(-lines).join('\n');
  }
}
