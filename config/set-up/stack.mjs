import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { DatabaseServer } from './database-server.mjs';
import { checkDisk } from './packages.mjs';
import { checkPorts } from './ports.mjs';
import { run } from './run.mjs';
import { loadSettingsFile } from './settings-file.mjs';
import { SetUpError, step } from './steps.mjs';
import { Supervised } from './supervised.mjs';

const NODE_ARGS = ['--conditions=compiled', '--enable-source-maps'];
const SPACE_NEEDED_MB = 700;
const DEFAULT_PORTS = {
  STILLROOM_HTTP_PORT: { port: 4310, what: 'the pages' },
  STILLROOM_MQTT_PORT: { port: 1883, what: 'the MQTT broker' },
  STILLROOM_DB_PORT: { port: 33061, what: 'the database' },
  STILLROOM_SMTP_PORT: { port: 4325, what: 'the demo mailbox', demo: true },
  STILLROOM_DESK_PORT: { port: 4320, what: 'the demo desk', demo: true },
};

/** One whole Stillroom on this machine: database, gateway with its broker, and in the demo the simulator. */
export class Stack {
  #database;
  #gateway = null;
  #simulator = null;
  #stopping = false;
  #noted = false;

  /** @param {{ root: string, dataDir: string, demo: boolean, tell: (sentence: string) => void }} options */
  constructor(options) {
    this.root = options.root;
    this.dataDir = resolve(options.root, options.dataDir);
    this.tell = options.tell;
    this.env = this.#environment(options.demo);
    this.demo = this.env.STILLROOM_DEMO === '1';
    this.#database = new DatabaseServer({
      dataDir: join(this.dataDir, 'db'),
      port: Number(this.env.STILLROOM_DB_PORT),
    });
  }

  get url() {
    return this.env.STILLROOM_PUBLIC_URL ?? `http://127.0.0.1:${this.env.STILLROOM_HTTP_PORT}`;
  }

  get deskUrl() {
    return this.env.STILLROOM_DESK_URL;
  }

  /** Process ids of the parts that run, for faults on purpose. */
  get pids() {
    return {
      database: this.#database.pid,
      gateway: this.#gateway?.pid ?? null,
      simulator: this.#simulator?.pid ?? null,
    };
  }

  /** Starts every part in order. @throws SetUpError with what to do; whatever had started is stopped again */
  async start() {
    try {
      await this.#start();
    } catch (error) {
      await this.stop();
      throw error;
    }
  }

  async #start() {
    mkdirSync(this.dataDir, { recursive: true });
    checkDisk(this.dataDir, SPACE_NEEDED_MB);
    this.#endLeftovers();
    await checkPorts(
      Object.entries(DEFAULT_PORTS)
        .filter(([, { demo }]) => !demo || this.demo)
        .map(([variable, { what }]) => ({ variable, what, port: Number(this.env[variable]) })),
    );
    await this.#startDatabase();
    await step(
      'bringing the tables up to date',
      async () => void (await this.#runServer('gateway/migrate.js')),
    );
    if (this.demo && !existsSync(this.#seededMark)) {
      await step('loading the demo: three studios, ninety days of readings', () => this.#loadDemo());
    }
    await step('gateway with its MQTT broker', () => this.#startGateway());
    if (this.demo) await step('simulator, mailbox and demo desk', () => this.#startSimulator());
  }

  /** Stops every part, the database last. Can be called at any time, more than once. */
  async stop() {
    this.#stopping = true;
    await this.#simulator?.stop();
    await this.#gateway?.stop(15_000);
    await this.#database.stop();
    if (this.#noted) rmSync(this.#runFile, { force: true });
  }

  /** For the last moment of this process only: ends everything at once. */
  kill() {
    this.#stopping = true;
    this.#simulator?.kill();
    this.#gateway?.kill();
    this.#database.kill();
  }

  /** Removes the demo's database and the simulator's memory; settings and secrets stay. */
  async resetDemo() {
    if (existsSync(join(this.dataDir, 'settings.env')) && !this.demo) {
      throw new SetUpError(`${this.dataDir} holds your own data, not the demo; it was left untouched.`);
    }
    this.#endLeftovers();
    for (const name of ['db', 'simulator', 'demo-loaded'])
      rmSync(join(this.dataDir, name), { recursive: true, force: true });
  }

  get #seededMark() {
    return join(this.dataDir, 'demo-loaded');
  }

  get #runFile() {
    return join(this.dataDir, 'running.json');
  }

  #environment(demo) {
    const settings = loadSettingsFile(this.dataDir, { demo });
    const ports = Object.fromEntries(
      Object.entries(DEFAULT_PORTS).map(([name, { port }]) => [name, settings[name] ?? String(port)]),
    );
    const all = {
      STILLROOM_DB_NAME: 'stillroom',
      STILLROOM_DB_USER: 'stillroom_app',
      STILLROOM_DB_OWNER_USER: 'stillroom_owner',
      STILLROOM_WEB_DIR: join(this.root, 'dist/web'),
      ...ports,
      ...settings,
      STILLROOM_DATA_DIR: this.dataDir,
    };
    if (all.STILLROOM_DEMO === '1') {
      all.STILLROOM_SMTP_URL ??= `smtp://127.0.0.1:${all.STILLROOM_SMTP_PORT}`;
      all.STILLROOM_DESK_URL ??= `http://127.0.0.1:${all.STILLROOM_DESK_PORT}`;
    }
    return all;
  }

  #childEnv() {
    return { ...process.env, ...this.env };
  }

  async #startDatabase() {
    const database = this.#database;
    if (!database.isInstalled()) await step('laying out the data folder', async () => database.install());
    await step('MariaDB on loopback', async () => {
      try {
        await database.start(() => this.#databaseEnded());
      } catch (error) {
        throw new SetUpError(
          `The database in ${database.options.dataDir} could not be opened.\n${error.message}\n` +
            (this.demo
              ? 'If the folder is damaged, npm run demo:reset starts the demo over.'
              : 'If the folder is damaged, move it away and put your last backup in its place; nothing in it was changed.'),
        );
      }
      await database.createDatabase({
        name: this.env.STILLROOM_DB_NAME,
        ownerUser: this.env.STILLROOM_DB_OWNER_USER,
        ownerPassword: this.env.STILLROOM_DB_OWNER_PASSWORD,
        appUser: this.env.STILLROOM_DB_USER,
        appPassword: this.env.STILLROOM_DB_PASSWORD,
      });
      this.#noteRunning();
    });
  }

  #databaseEnded() {
    if (this.#stopping) return;
    this.tell(`MariaDB ended; starting it again. Its log: ${this.#database.logFile}`);
    this.#database
      .start(() => this.#databaseEnded())
      .then(
        () => this.#noteRunning(),
        (error) => {
          this.tell(error.message);
          setTimeout(() => this.#databaseEnded(), 2000);
        },
      );
  }

  #runServer(file, args = []) {
    return run('node', [...NODE_ARGS, join(this.root, 'dist/server', file), ...args], {
      cwd: this.root,
      env: this.#childEnv(),
    });
  }

  async #loadDemo() {
    const folder = join(this.dataDir, 'simulator');
    mkdirSync(folder, { recursive: true });
    await this.#runServer('simulator/write-scenario.js', ['--out', join(folder, 'scenario.jsonl')]);
    await this.#runServer('gateway/load-demo.js', [join(folder, 'scenario.jsonl')]);
    writeFileSync(this.#seededMark, '');
  }

  #supervised(name, file) {
    return new Supervised({
      name,
      command: process.execPath,
      args: [...NODE_ARGS, join(this.root, 'dist/server', file)],
      cwd: this.root,
      env: this.#childEnv(),
      logFile: join(this.dataDir, 'logs', `${name}.log`),
      tell: (sentence) => {
        this.tell(sentence);
        this.#noteRunning();
      },
    });
  }

  async #startGateway() {
    this.#gateway = this.#supervised('gateway', 'gateway/main.js');
    this.#gateway.start();
    await this.#waitFor(this.#gateway, `${this.localUrl}/api/health`);
    this.#noteRunning();
  }

  get localUrl() {
    return `http://127.0.0.1:${this.env.STILLROOM_HTTP_PORT}`;
  }

  async #startSimulator() {
    this.#simulator = this.#supervised('simulator', 'simulator/main.js');
    this.#simulator.start();
    await this.#waitFor(this.#simulator, `http://127.0.0.1:${this.env.STILLROOM_DESK_PORT}/desk/api/clock`);
    this.#noteRunning();
  }

  /** Waits until an address answers well; gives up when the program has died or after a minute. */
  async #waitFor(program, url) {
    const until = performance.now() + 60_000;
    while (program.running && performance.now() < until) {
      const answer = await fetch(url).catch(() => null);
      if (answer?.ok) return;
      await new Promise((resolve) => setTimeout(resolve, 100));
    }
    throw new SetUpError(
      `The ${program.options.name} did not come up. The end of its log:\n${program.lastLog()}`,
    );
  }

  /** Notes who runs, so that a later start can find parts whose starter was killed. */
  #noteRunning() {
    this.#noted = true;
    writeFileSync(this.#runFile, JSON.stringify({ starter: process.pid, url: this.url, ...this.pids }));
  }

  /** @throws SetUpError when a living starter already runs this data folder */
  checkNotRunning() {
    const noted = this.#running();
    if (noted.starter !== process.pid && commandOf(noted.starter).includes('config/')) {
      throw new SetUpError(
        `Stillroom already runs with this data folder (process ${noted.starter}): ${noted.url}\nStop it with Ctrl-C in its window first.`,
      );
    }
  }

  #running() {
    if (!existsSync(this.#runFile)) return {};
    try {
      return JSON.parse(readFileSync(this.#runFile, 'utf8'));
    } catch {
      return {};
    }
  }

  /** Ends parts whose starter was killed. @throws SetUpError when the starter lives */
  #endLeftovers() {
    this.checkNotRunning();
    const noted = this.#running();
    for (const [part, mark] of [
      ['simulator', 'dist/server/'],
      ['gateway', 'dist/server/'],
      ['database', 'mariadbd'],
    ]) {
      if (commandOf(noted[part]).includes(mark))
        process.kill(noted[part], part === 'database' ? 'SIGTERM' : 'SIGKILL');
    }
    const deadline = Date.now() + 20_000;
    while (commandOf(noted.database).includes('mariadbd') && Date.now() < deadline) {
      Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, 100);
    }
    rmSync(this.#runFile, { force: true });
  }
}

/** Command line of a process, or an empty text when it does not exist. */
function commandOf(pid) {
  try {
    return pid ? readFileSync(`/proc/${pid}/cmdline`, 'utf8') : '';
  } catch {
    return '';
  }
}
