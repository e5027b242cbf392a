import type { Logger } from 'pino';
import type { DataSource } from 'typeorm';
import type { Floor } from './assemble-floor.js';
import type { Clock } from './clock.js';
import { AlertWatcher } from './features/alerts/alert-watcher.js';
import { Alerts } from './features/alerts/alerts.js';
import { AlertsRepository } from './features/alerts/alerts-repository.js';
import { mountAlerts } from './features/alerts/alerts-routes.js';
import { Deliveries } from './features/alerts/deliveries.js';
import { WatchedRepository } from './features/alerts/watched-repository.js';
import type { Sensors } from './features/sensors/sensors.js';
import type { Feeds } from './feeds.js';
import type { Mounted } from './http/mount.js';
import { MailSender } from './mail/mail-sender.js';
import { OutboxWorker } from './mail/outbox-worker.js';
import type { Settings } from './settings.js';

export interface AlertsNeeds {
  readonly settings: Settings;
  readonly dataSource: DataSource;
  readonly clock: Clock;
  /** The system's time: mails go out in it. */
  readonly systemClock: Clock;
  readonly feeds: Feeds;
  readonly log: Logger;
}

/** Alerts as people see them; can be built before the floor, which shows them. */
export function assembleAlerts({ dataSource, clock, feeds }: AlertsNeeds): Alerts {
  return new Alerts({
    repository: new AlertsRepository(dataSource),
    watched: new WatchedRepository(dataSource),
    clock,
    changed: feeds.alerts,
    touched: (studioId, roomId) => feeds.rules.announce({ studioId, roomId }),
  });
}

/** What raises alerts and tells of them. */
export interface Watch {
  readonly mounted: readonly Mounted[];
  start(): Promise<void>;
  stop(): Promise<void>;
}

/** Joins watcher, deliveries and mail; nothing runs before `start`. */
export function assembleWatch(needs: AlertsNeeds, alerts: Alerts, floor: Floor, sensors: Sensors): Watch {
  const { settings, dataSource, clock, systemClock, feeds, log } = needs;
  const repository = new AlertsRepository(dataSource);
  const deliveries = new Deliveries({
    publicUrl: settings.http.publicUrl,
    mailsSince: (personIds, since) => repository.mailsSince(personIds, since),
    systemNow: () => systemClock.now(),
  });
  const watcher = new AlertWatcher({
    ...{ repository, deliveries, clock, log },
    watched: new WatchedRepository(dataSource),
    roomsNow: floor.roomsNow,
    histories: floor.histories,
    standing: floor.standing,
    stuckSensors: () => sensors.stuck(),
    committed: feeds.readings,
    batches: feeds.batches,
    layout: feeds.layout,
    rules: feeds.rules,
    people: feeds.people,
    changed: feeds.alerts,
    notices: feeds.notices,
  });
  const sender = new MailSender(settings.mail.smtpUrl, settings.mail.from);
  const outbox = new OutboxWorker({
    dataSource,
    log,
    send: (mail) => sender.send(mail),
    now: () => systemClock.now(),
    domainNow: () => clock.now(),
  });
  return {
    mounted: mountAlerts(alerts),
    async start() {
      await watcher.start();
      outbox.start();
    },
    async stop() {
      await watcher.stop();
      await outbox.stop();
      sender.close();
    },
  };
}
