import { once } from 'node:events';
import { type Server as HttpServer, createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { Logger } from 'pino';
import type { DataSource } from 'typeorm';
import { ALL_ROUTES } from '#shared/contract/all-routes';
import { assembleAlerts, assembleWatch } from './assemble-alerts.js';
import { assembleDoors, type Doors } from './assemble-doors.js';
import { assembleFloor, type Floor } from './assemble-floor.js';
import { AdjustableClock, type Clock, systemClock } from './clock.js';
import { createApp } from './create-app.js';
import { checkDatabase, connectPatiently } from './database/check-database.js';
import { createDataSource } from './database/data-source.js';
import { type Feeds, createFeeds } from './feeds.js';
import { Health } from './health.js';
import { RollupWorker } from './history/rollup-worker.js';
import type { Mounted } from './http/mount.js';
import { openApi } from './http/open-api.js';
import { Intake } from './intake/intake.js';
import { FrameCollector } from './live/frame-collector.js';
import { LiveServer } from './live/live-server.js';
import { RoomDirectory } from './live/room-directory.js';
import type { Alerts } from './features/alerts/alerts.js';
import { Sensors } from './features/sensors/sensors.js';
import { SensorsRepository } from './features/sensors/sensors-repository.js';
import { mountSensors } from './features/sensors/sensors-routes.js';
import type { Settings } from './settings.js';

/** A gateway that has been put together and not been started. */
export interface Gateway {
  readonly mounted: readonly Mounted[];
  readonly feeds: Feeds;
  readonly dataSource: DataSource;
  /** The address the pages are served at; only after the start. */
  url(): string;
  /** Starts every part in order. @throws StartFault, or an error of the system or the database; what had started is stopped */
  start(): Promise<void>;
  /** Stops in the opposite order: no new readings and requests, what is under way is finished, connections are closed. */
  stop(): Promise<void>;
}

/** One part of the gateway, in the order in which parts are started. */
interface Part {
  readonly name: string;
  start?(): Promise<void> | void;
  stop?(): Promise<void> | void;
}

/** What every part is built from. */
interface Base {
  readonly settings: Settings;
  readonly dataSource: DataSource;
  readonly feeds: Feeds;
  /** The demo's time in the demo, else the system's. */
  readonly clock: Clock;
  readonly log: Logger;
  readonly failed: (error: unknown) => void;
}

const DATABASE_PATIENCE_MS = 60_000;
const REQUESTS_PATIENCE_MS = 5000;

/** Puts the gateway together: the only place where its parts meet. Connects to nothing yet. */
export function assemble(settings: Settings, log: Logger): Gateway {
  const failed = (error: unknown) => log.error({ err: error }, 'something failed in the background');
  const dataSource = createDataSource(settings.database);
  const clock = settings.demo ? new AdjustableClock() : systemClock;
  const base: Base = { settings, dataSource, feeds: createFeeds(failed), clock, log, failed };
  const rollups = new RollupWorker({
    dataSource,
    committed: base.feeds.readings,
    cells: base.feeds.cells,
    log,
  });
  const intake = assembleIntake(base);
  const doors = assembleDoors({ ...base, systemClock });
  const alerts = assembleAlerts({ ...base, systemClock });
  const floor = assembleFloorOf(base, doors, alerts);
  const sensors = assembleSensors(base, floor, intake);
  const watch = assembleWatch({ ...base, systemClock }, alerts, floor, sensors);
  const mounted = [...doors.mounted, ...floor.mounted, ...mountSensors(sensors), ...watch.mounted];
  // A request that takes longer to arrive is somebody holding the line.
  const http = createServer({ requestTimeout: 30_000 });
  http.on('request', assembleApp(base, mounted, doors, http, new Health(base, intake)));
  const live = assembleLive(base, doors, floor, alerts, http);
  const parts: Part[] = [
    databasePart(base),
    { name: 'sign-in', stop: () => doors.stop() },
    { name: 'cure floor', start: () => floor.start(), stop: () => floor.stop() },
    { name: 'rollups', start: () => rollups.start(), stop: () => rollups.stop() },
    { name: 'alerts', start: () => watch.start(), stop: () => watch.stop() },
    httpPart(http, settings),
    // Stops before the web server: its connections would keep that open.
    live,
    // Readings come in last and stop first: everybody who hears of them is there.
    { name: 'intake', start: () => intake.start(), stop: () => intake.stop() },
  ];
  const { dataSource: source, feeds } = base;
  return { mounted, feeds, dataSource: source, url: () => urlOf(http, settings), ...inOrder(parts, log) };
}

function assembleIntake({ settings, dataSource, feeds, clock, log }: Base): Intake {
  const { demo, mqtt, database } = settings;
  return new Intake({
    ...{ dataSource, database, mqtt, clock, log },
    demo:
      demo && clock instanceof AdjustableClock
        ? { simulatorSecret: demo.simulatorSecret, setClock: (setting) => clock.set(setting) }
        : null,
    committed: feeds.readings,
    layout: feeds.layout,
  });
}

function assembleFloorOf({ dataSource, clock, feeds, failed }: Base, doors: Doors, alerts: Alerts): Floor {
  return assembleFloor({
    ...{ dataSource, clock, failed },
    committed: feeds.readings,
    cells: feeds.cells,
    layout: feeds.layout,
    batches: feeds.batches,
    studios: doors.studios,
    alerts,
  });
}

function assembleSensors({ dataSource, clock, feeds }: Base, floor: Floor, intake: Intake): Sensors {
  return new Sensors({
    repository: new SensorsRepository(dataSource),
    rooms: floor.rooms,
    clock,
    connectedDevices: () => intake.connectedDevices,
    changed: (studioId, roomId) => feeds.layout.announce({ studioId, roomId }),
  });
}

function assembleApp(
  base: Base,
  mounted: readonly Mounted[],
  doors: Doors,
  http: HttpServer,
  health: Health,
) {
  const { settings, log } = base;
  return createApp({
    mounted,
    authenticate: doors.authenticate,
    studioExists: (studioId) => doors.studios.exists(studioId),
    allowedOrigins: () => originsOf(http, settings),
    webDir: settings.http.webDir,
    https: settings.http.secureCookies,
    openApi: openApi(ALL_ROUTES, settings.http.publicUrl),
    health: () => health.look(),
    log,
  });
}

function assembleLive(base: Base, doors: Doors, floor: Floor, alerts: Alerts, http: HttpServer): Part {
  const { dataSource, feeds, clock, log, settings } = base;
  const directory = new RoomDirectory(dataSource);
  const collector = new FrameCollector(
    {
      roomNow: (roomIds) => floor.roomsNow.of(roomIds),
      ribbons: (fromCells) => floor.roomsNow.ribbonsFrom(fromCells),
      cards: (batchIds, forViewer) => floor.estimates.cards(batchIds, forViewer),
      alerts: (alertIds) => alerts.byIds(alertIds),
    },
    clock,
  );
  const live = new LiveServer({
    ...{ http, directory, collector, clock, systemClock, log },
    allowedOrigins: () => originsOf(http, settings),
    authenticate: (token) => doors.signIn.authenticate(token),
  });
  let unlisten: (() => void)[] = [];
  return {
    name: 'live connection',
    async start() {
      await live.start();
      unlisten = [
        feeds.readings.listen((readings) => {
          for (const { studioId, roomId } of readings) collector.roomChanged(studioId, roomId);
        }),
        floor.historiesChanged.listen((changed) => {
          for (const [roomId, fromCell] of changed) {
            const studioId = directory.studioOf(roomId);
            if (studioId !== null) collector.ribbonChanged(studioId, roomId, fromCell);
          }
        }),
        feeds.batches.listen(({ studioId, batchIds }) => collector.batchesChanged(studioId, batchIds)),
        feeds.alerts.listen(({ studioId, alertId }) => collector.alertChanged(studioId, alertId)),
        feeds.layout.listen(({ studioId }) => live.layoutChanged(studioId)),
        feeds.people.listen((change) => live.personChanged(change)),
        feeds.notices.listen((written) => live.noticeWritten(written)),
      ];
    },
    async stop() {
      for (const stop of unlisten) stop();
      await live.stop();
    },
  };
}

function databasePart({ dataSource, log }: Base): Part {
  return {
    name: 'database',
    async start() {
      await connectPatiently(dataSource, DATABASE_PATIENCE_MS, () => log.warn('waiting for the database'));
      await checkDatabase(dataSource);
    },
    async stop() {
      if (dataSource.isInitialized) await dataSource.destroy();
    },
  };
}

function httpPart(http: HttpServer, settings: Settings): Part {
  return {
    name: 'web server',
    async start() {
      http.listen(settings.http.port, settings.http.host);
      await once(http, 'listening');
    },
    async stop() {
      const closed = new Promise((resolve) => http.close(resolve));
      http.closeIdleConnections();
      const impatient = setTimeout(() => http.closeAllConnections(), REQUESTS_PATIENCE_MS);
      await closed;
      clearTimeout(impatient);
    },
  };
}

/** Starts parts one after the other and stops them the other way round. */
function inOrder(parts: readonly Part[], log: Logger): Pick<Gateway, 'start' | 'stop'> {
  const running: Part[] = [];
  const stop = async () => {
    for (let part = running.pop(); part; part = running.pop()) {
      try {
        await part.stop?.();
      } catch (error) {
        log.error({ err: error }, `${part.name} did not stop as it should`);
      }
    }
  };
  return {
    async start() {
      for (const part of parts) {
        running.push(part);
        try {
          await part.start?.();
        } catch (error) {
          await stop();
          throw error;
        }
      }
    },
    stop,
  };
}

function urlOf(http: HttpServer, settings: Settings): string {
  const address = http.address() as AddressInfo | null;
  return `http://${settings.http.host}:${address?.port ?? settings.http.port}`;
}

/** Origins that pages of ours have: the public address, and on this machine itself both its names. */
function originsOf(http: HttpServer, settings: Settings): string[] {
  const address = http.address() as AddressInfo | null;
  const port = address?.port ?? settings.http.port;
  return [new URL(settings.http.publicUrl).origin, `http://127.0.0.1:${port}`, `http://localhost:${port}`];
}
