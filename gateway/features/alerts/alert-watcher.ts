import type { Logger } from 'pino';
import type {
  AlertChanged,
  BatchesChanged,
  CommittedReading,
  LayoutChanged,
  NoticeWritten,
  PersonChanged,
} from '../../announcements.js';
import type { Clock } from '../../clock.js';
import type { Feed } from '../../feed.js';
import type { AlertRecord, AlertStudio, KeptRule, RuledRoom, RuledSensor, Write } from './alert-records.js';
import type { AlertsRepository } from './alerts-repository.js';
import type { Deliveries, News } from './deliveries.js';
import { dueChange } from './due.js';
import { NORMAL } from './rule-machine.js';
import { type Seen, Sightings, type SightingsParts, type Subject } from './sightings.js';
import { stepOf, type Surroundings, transition } from './transitions.js';
import type { WatchedRepository } from './watched-repository.js';

export interface AlertWatcherParts extends SightingsParts {
  readonly repository: AlertsRepository;
  readonly watched: WatchedRepository;
  readonly deliveries: Deliveries;
  /** Sensors that repeat one value, with that value in °C. */
  readonly stuckSensors: () => Promise<ReadonlyMap<string, number>>;
  readonly clock: Clock;
  readonly committed: Feed<readonly CommittedReading[]>;
  readonly batches: Feed<BatchesChanged>;
  readonly layout: Feed<LayoutChanged>;
  /** Somebody changed an alert or the rules of a room. */
  readonly rules: Feed<LayoutChanged>;
  readonly people: Feed<PersonChanged>;
  readonly changed: Feed<AlertChanged>;
  readonly notices: Feed<NoticeWritten>;
  readonly log: Logger;
}

const TICK_MS = 1000;
const SENSORS_EVERY_MS = 5000;
const STUCK_EVERY_MS = 60_000;

/**
 * Holds every rule against what is known now and moves alerts through their lives. It looks once a second at rooms that had
 * readings or whose batches changed, now and then at sensors, and at what is due: escalations, shelves, quiet hours.
 */
export class AlertWatcher {
  #rooms = new Map<string, RuledRoom>();
  #sensors = new Map<string, RuledSensor>();
  #studios = new Map<string, AlertStudio>();
  #kept = new Map<string, KeptRule>();
  #live = new Map<string, AlertRecord>();
  readonly #touched = new Set<string>();
  #layoutChanged = true;
  #nextSensors = 0;
  #nextStuck = 0;
  #timer: NodeJS.Timeout | null = null;
  #turn: Promise<void> = Promise.resolve();
  #stopping: (() => void)[] = [];

  readonly #sightings: Sightings;

  constructor(private readonly parts: AlertWatcherParts) {
    this.#sightings = new Sightings(parts);
  }

  /** Reads the states of all rules, then follows what is announced. */
  async start(): Promise<void> {
    this.#kept = await this.parts.repository.keptRules();
    await this.#reload();
    this.#stopping = [
      this.parts.committed.listen((readings) => this.#take(readings)),
      this.parts.batches.listen(({ studioId }) => this.#touchStudio(studioId)),
      this.parts.layout.listen(() => (this.#layoutChanged = true)),
      this.parts.rules.listen(() => (this.#layoutChanged = true)),
      this.parts.people.listen(() => (this.#layoutChanged = true)),
    ];
    for (const roomId of this.#rooms.keys()) this.#touched.add(roomId);
    this.#timer = setInterval(() => void this.tick(), TICK_MS);
    this.#timer.unref();
  }

  async stop(): Promise<void> {
    if (this.#timer) clearInterval(this.#timer);
    for (const stop of this.#stopping.splice(0)) stop();
    await this.#turn;
  }

  /** One look at everything that may have changed. Faults are logged; what was due is looked at again. */
  tick(): Promise<void> {
    this.#turn = this.#turn
      .then(() => this.#look())
      .catch((error: unknown) => this.parts.log.warn({ err: error }, 'alerts wait for the database'));
    return this.#turn;
  }

  #take(readings: readonly CommittedReading[]): void {
    for (const { sensorId, roomId, at, battery, future } of readings) {
      if (future) continue;
      this.#touched.add(roomId);
      this.#sightings.hear(sensorId, at, battery);
    }
  }

  #touchStudio(studioId: string): void {
    for (const room of this.#rooms.values()) if (room.studioId === studioId) this.#touched.add(room.id);
  }

  async #look(): Promise<void> {
    if (this.#layoutChanged) await this.#reload();
    const now = this.parts.clock.now();
    const systemNow = performance.now();
    const seen: [Subject, Seen][] = [];
    const rooms = [...this.#touched];
    this.#touched.clear();
    for (const roomId of rooms) seen.push(...this.#sightings.room(roomId, now));
    if (systemNow >= this.#nextSensors) {
      if (systemNow >= this.#nextStuck) {
        this.#sightings.stuck(await this.parts.stuckSensors());
        this.#nextStuck = systemNow + STUCK_EVERY_MS;
      }
      this.#nextSensors = systemNow + SENSORS_EVERY_MS;
      seen.push(...this.#sightings.sensors(this.#studios.keys(), now));
    }
    try {
      await this.#apply(seen, now);
      await this.#due(now);
    } catch (error) {
      for (const roomId of rooms) this.#touched.add(roomId);
      this.#nextSensors = 0;
      this.#layoutChanged = true;
      throw error;
    }
  }

  /** Moves the rules on; everything that came of one look is written in one transaction. */
  async #apply(seen: readonly (readonly [Subject, Seen])[], now: number): Promise<void> {
    const writes: Write[] = [];
    const keeps = new Map<string, KeptRule>();
    const live = new Map<string, AlertRecord>();
    const news = new Map<string, News[]>();
    for (const [subject, what] of seen) {
      const kept = this.#kept.get(subject.key) ?? { state: NORMAL, alertId: null };
      const known = kept.alertId === null ? null : (this.#live.get(kept.alertId) ?? null);
      const came = transition(subject, what, kept, known, this.#around(subject), now);
      keeps.set(subject.key, came.kept);
      writes.push(...came.writes);
      if (came.alert) live.set(came.alert.id, came.alert);
      if (came.news) news.set(subject.studioId, [...(news.get(subject.studioId) ?? []), came.news]);
    }
    for (const [studioId, told] of news) writes.push(...(await this.#tell(studioId, told, now)));
    await this.#commit(writes, live);
    for (const [key, kept] of keeps) this.#kept.set(key, kept);
  }

  #around(subject: Subject): Surroundings {
    const studio = this.#studios.get(subject.studioId) ?? null;
    return {
      studio,
      roomName: this.#rooms.get(subject.roomId ?? '')?.name ?? null,
      sensorName: this.#sensors.get(subject.sensorId ?? '')?.name ?? null,
      heldUntil: (severity, at) => (studio ? this.parts.deliveries.heldUntil(studio, severity, at) : null),
    };
  }

  async #tell(studioId: string, news: readonly News[], now: number): Promise<Write[]> {
    const studio = this.#studios.get(studioId);
    if (!studio) return [];
    const writes: Write[] = [...this.parts.deliveries.notices(studio, news, now)];
    for (const [index, person] of studio.chain.entries()) {
      const forThem = news.filter(({ alert }) => alert.escalation >= index);
      writes.push(...(await this.parts.deliveries.mails(studio, person, forThem, now)));
    }
    return writes;
  }

  /** Escalations, quiet hours that ended, shelves and acknowledgements that ran out. */
  async #due(now: number): Promise<void> {
    const writes: Write[] = [];
    const live = new Map<string, AlertRecord>();
    for (const alert of this.#live.values()) {
      const studio = this.#studios.get(alert.studioId);
      if (!studio || alert.clearedAt !== null) continue;
      const due = dueChange(alert, now);
      if (due === null) continue;
      const held = this.parts.deliveries.heldUntil(studio, alert.severity, now);
      if (due.tells && held !== null) {
        writes.push({ do: 'change', alertId: alert.id, set: { nextEscalationAt: held } });
        live.set(alert.id, { ...alert, nextEscalationAt: held });
        continue;
      }
      const next = alert.escalation + 1;
      const reach = due.tells ? Math.min(next, studio.chain.length - 1) : alert.escalation;
      const set = {
        ...due.set,
        escalation: reach,
        nextEscalationAt: due.tells && reach < studio.chain.length - 1 ? now + studio.escalateAfterMs : null,
      };
      const after = { ...alert, ...set, version: alert.version + 1 };
      live.set(alert.id, after);
      writes.push({ do: 'change', alertId: alert.id, set }, stepOf(alert.id, now, due.what, due.note, null));
      const person = studio.chain[reach];
      if (due.tells && person) {
        writes.push(
          ...(await this.parts.deliveries.mails(studio, person, [{ alert: after, what: 'escalated' }], now)),
        );
      }
    }
    await this.#commit(writes, live);
  }

  async #commit(writes: readonly Write[], live: ReadonlyMap<string, AlertRecord>): Promise<void> {
    await this.parts.repository.write(writes);
    for (const alert of live.values()) {
      if (alert.state === 'cleared') this.#live.delete(alert.id);
      else this.#live.set(alert.id, alert);
      this.parts.changed.announce({ studioId: alert.studioId, alertId: alert.id });
    }
    for (const write of writes) {
      if (write.do !== 'notice') continue;
      const { id, personId, studioId, alertId, at, text } = write;
      const notice = { id, studioId, alertId, at: new Date(at).toISOString(), text, read: false };
      this.parts.notices.announce({ personId, notice });
    }
  }

  async #reload(): Promise<void> {
    this.#layoutChanged = false;
    const [rooms, sensors, studios, live] = await Promise.all([
      this.parts.watched.rooms(),
      this.parts.watched.sensors(),
      this.parts.watched.studios(),
      this.parts.repository.live(null),
    ]);
    this.#rooms = new Map(rooms.map((room) => [room.id, room]));
    const unheard = sensors.filter(({ id }) => !this.#sightings.wasHeard(id));
    const heard = await this.parts.watched.lastHeard(unheard.map(({ no }) => no));
    for (const { id, no } of unheard) {
      const at = heard.get(no);
      if (at !== undefined) this.#sightings.hear(id, at, null);
    }
    this.#sensors = new Map(sensors.map((sensor) => [sensor.id, sensor]));
    this.#studios = new Map(studios.map((studio) => [studio.id, studio]));
    this.#sightings.watch(this.#rooms, this.#sensors);
    this.#live = new Map(live.map((alert) => [alert.id, alert]));
    for (const roomId of this.#rooms.keys()) this.#touched.add(roomId);
    await this.#endOrphans();
  }

  /** Alerts about rooms and sensors that are no more end with them. */
  async #endOrphans(): Promise<void> {
    const now = this.parts.clock.now();
    const writes: Write[] = [];
    const live = new Map<string, AlertRecord>();
    for (const [key, kept] of this.#kept) {
      const alert = kept.alertId === null ? null : (this.#live.get(kept.alertId) ?? null);
      if (alert === null || alert.clearedAt !== null) continue;
      const gone =
        (alert.sensorId !== null && !this.#sensors.has(alert.sensorId)) ||
        (alert.roomId !== null && !this.#rooms.has(alert.roomId));
      if (!gone) continue;
      const set = { state: 'cleared', clearedAt: now, nextEscalationAt: null } as const;
      live.set(alert.id, { ...alert, ...set });
      const rule = { state: NORMAL, alertId: null };
      writes.push(
        { do: 'change', alertId: alert.id, set },
        stepOf(alert.id, now, 'cleared', 'What it was about was taken out of service.', null),
        { do: 'keep', key, rule, at: now },
      );
      this.#kept.set(key, rule);
    }
    await this.#commit(writes, live);
  }
}
