/** Our own MariaDB on loopback with its own data folder. */
export declare class DatabaseServer {
  constructor(options: { dataDir: string; port: number; extraFlags?: string[] });
  readonly options: { dataDir: string; port: number };
  readonly socket: string;
  get pid(): number | null;
  install(): void;
  start(exited?: () => void): Promise<void>;
  createDatabase(names: {
    name: string;
    ownerUser: string;
    ownerPassword: string;
    appUser: string;
    appPassword: string;
  }): Promise<void>;
  stop(): Promise<void>;
  kill(): void;
  remove(): void;
}
