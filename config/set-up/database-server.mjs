import { spawn, spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir, userInfo } from 'node:os';
import { join } from 'node:path';
import mysql from 'mysql2/promise';

const asRoot = process.getuid?.() === 0;
const rootFlag = asRoot ? ['--user=root'] : [];

/**
 * Our own MariaDB on loopback with its own data folder; never the one Debian may have started.
 * Durable by default (a commit is on disk before it is acknowledged).
 */
export class DatabaseServer {
  #process = null;
  #stopping = false;

  /** @param {{ dataDir: string, port: number, extraFlags?: string[] }} options */
  constructor(options) {
    this.options = options;
    const socket = join(options.dataDir, 's.sock');
    // A socket path has room for 107 bytes only.
    this.socket = socket.length < 100 ? socket : join(mkdtempSync(join(tmpdir(), 'sr-')), 's.sock');
    this.pidFile = join(options.dataDir, 'mariadbd.pid');
    this.logFile = join(options.dataDir, 'mariadbd.log');
  }

  get pid() {
    return this.#process?.pid ?? null;
  }

  /** True once the data folder has been laid out by mariadb-install-db. */
  isInstalled() {
    return existsSync(join(this.options.dataDir, 'mysql'));
  }

  /** Lays out the data folder; does nothing when it is there. */
  install() {
    if (this.isInstalled()) return;
    mkdirSync(this.options.dataDir, { recursive: true });
    const done = spawnSync(
      'mariadb-install-db',
      [
        '--no-defaults',
        ...rootFlag,
        `--datadir=${this.options.dataDir}`,
        '--auth-root-authentication-method=socket',
        `--auth-root-socket-user=${userInfo().username}`,
        '--skip-test-db',
      ],
      { encoding: 'utf8' },
    );
    if (done.error) throw done.error;
    if (done.status !== 0)
      throw new Error(`mariadb-install-db failed:\n${`${done.stdout}\n${done.stderr}`.trim().slice(-2000)}`);
  }

  /** Pid of a server that already runs on this data folder, or null. */
  runningPid() {
    if (!existsSync(this.pidFile)) return null;
    const pid = Number(readFileSync(this.pidFile, 'utf8').trim());
    try {
      const name = readFileSync(`/proc/${pid}/comm`, 'utf8').trim();
      return name.startsWith('mariadbd') ? pid : null;
    } catch {
      return null;
    }
  }

  /** Starts the server and waits until its own socket answers. `exited` is told when it ends by itself. */
  async start(exited = () => undefined) {
    this.#stopping = false;
    const { dataDir, port, extraFlags = [] } = this.options;
    const child = spawn(
      'mariadbd',
      [
        '--no-defaults',
        ...rootFlag,
        `--datadir=${dataDir}`,
        `--socket=${this.socket}`,
        `--pid-file=${this.pidFile}`,
        `--log-error=${this.logFile}`,
        `--port=${port}`,
        '--bind-address=127.0.0.1',
        '--skip-name-resolve',
        '--character-set-server=utf8mb4',
        '--collation-server=utf8mb4_unicode_ci',
        '--sql-mode=STRICT_ALL_TABLES,NO_ZERO_DATE,NO_ZERO_IN_DATE,ERROR_FOR_DIVISION_BY_ZERO,NO_ENGINE_SUBSTITUTION,ONLY_FULL_GROUP_BY',
        '--default-time-zone=+00:00',
        '--innodb-flush-log-at-trx-commit=1',
        '--innodb-buffer-pool-size=256M',
        '--innodb-log-file-size=64M',
        '--innodb-flush-method=O_DIRECT',
        '--max-allowed-packet=16M',
        '--max-connections=200',
        ...extraFlags,
      ],
      // A group of its own: Ctrl-C reaches only the starter, which stops the database last.
      { stdio: 'ignore', detached: true },
    );
    this.#process = child;
    let ended = null;
    child.once('error', (error) => (ended = error));
    child.once('exit', (code, signal) => {
      ended ??= new Error(`MariaDB ended (${signal ?? code}). Its log: ${this.logFile}\n${this.lastLog()}`);
      if (!this.#stopping) exited();
    });
    const until = Date.now() + 60_000;
    while (ended === null) {
      try {
        const connection = await this.asAdministrator();
        await connection.end();
        return;
      } catch (error) {
        if (Date.now() > until) {
          this.kill();
          throw new Error(
            `MariaDB did not answer within a minute. Its log: ${this.logFile}\n${this.lastLog()}`,
            {
              cause: error,
            },
          );
        }
        await new Promise((resolve) => setTimeout(resolve, 100));
      }
    }
    throw ended;
  }

  /** Connection of the administrator over the server's own socket. */
  asAdministrator() {
    return mysql.createConnection({
      socketPath: this.socket,
      user: userInfo().username,
      multipleStatements: true,
    });
  }

  /** Creates the database and its two accounts: one that may change tables, one that may only read and write rows. */
  async createDatabase({ name, ownerUser, ownerPassword, appUser, appPassword }) {
    const connection = await this.asAdministrator();
    try {
      const esc = (value) => connection.escape(value);
      await connection.query(`CREATE DATABASE IF NOT EXISTS \`${name}\``);
      for (const [user, password] of [
        [ownerUser, ownerPassword],
        [appUser, appPassword],
      ]) {
        await connection.query(
          `CREATE USER IF NOT EXISTS ${esc(user)}@'127.0.0.1' IDENTIFIED BY ${esc(password)}; ALTER USER ${esc(user)}@'127.0.0.1' IDENTIFIED BY ${esc(password)}`,
        );
      }
      await connection.query(`GRANT ALL ON \`${name}\`.* TO ${esc(ownerUser)}@'127.0.0.1'`);
      await connection.query(
        `GRANT SELECT, INSERT, UPDATE, DELETE, CREATE TEMPORARY TABLES ON \`${name}\`.* TO ${esc(appUser)}@'127.0.0.1'`,
      );
    } finally {
      await connection.end();
    }
  }

  lastLog() {
    if (!existsSync(this.logFile)) return '';
    return readFileSync(this.logFile, 'utf8').split('\n').slice(-12).join('\n');
  }

  /** Stops the server and waits for its end; kills it when it takes longer than 20 s. */
  async stop() {
    this.#stopping = true;
    const child = this.#process;
    if (!child || child.exitCode !== null || child.signalCode !== null) return;
    const gone = new Promise((resolve) => child.once('exit', resolve));
    child.kill('SIGTERM');
    const timer = setTimeout(() => child.kill('SIGKILL'), 20_000);
    await gone;
    clearTimeout(timer);
  }

  kill() {
    this.#stopping = true;
    this.#process?.kill('SIGKILL');
  }

  /** Removes the whole data folder; the server must be stopped. */
  remove() {
    rmSync(this.options.dataDir, { recursive: true, force: true });
  }
}
