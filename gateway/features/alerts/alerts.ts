import type { Alert, AlertStep, Notice, Rule } from '#shared/contract/alerts';
import { may, mayAnywhere, roleIn } from '#shared/contract/roles';
import type { AlertChanged } from '../../announcements.js';
import type { Clock } from '../../clock.js';
import type { Feed } from '../../feed.js';
import type { Actor, SignedInPerson } from '../../http/actor.js';
import { notFound, ProblemError } from '../../http/problem-error.js';
import type { AuditLine } from '../audit/audit-lines.js';
import type { AlertChange, AlertRecord, Write } from './alert-records.js';
import type { AlertsRepository } from './alerts-repository.js';
import { rulesOf } from './rule-defaults.js';
import type { WatchedRepository } from './watched-repository.js';

export interface AlertsParts {
  readonly repository: AlertsRepository;
  readonly watched: Pick<WatchedRepository, 'studios'>;
  readonly clock: Clock;
  readonly changed: Feed<AlertChanged>;
  /** Told after a person changed an alert or a rule: the watcher reads it again. */
  readonly touched: (studioId: string, roomId: string | null) => void;
}

const HOUR_MS = 3_600_000;

/** What people do with alerts. */
export class Alerts {
  constructor(private readonly parts: AlertsParts) {}

  async list(
    studioId: string,
    view: 'open' | 'shelved' | 'past',
    before: string | undefined,
    limit: number,
  ): Promise<Alert[]> {
    if (view === 'past') {
      const from = before === undefined ? null : Date.parse(before);
      return this.#views(await this.parts.repository.past(studioId, from, limit));
    }
    const live = await this.parts.repository.live([studioId]);
    const shelved = (alert: AlertRecord) => alert.shelvedUntil !== null;
    return this.#views(live.filter((alert) => shelved(alert) === (view === 'shelved')).slice(0, limit));
  }

  /** Open and shelved alerts of studios. */
  async openIn(studioIds: readonly string[]): Promise<Alert[]> {
    return this.#views(await this.parts.repository.live(studioIds));
  }

  async byIds(ids: readonly string[]): Promise<Alert[]> {
    return this.#views(await this.parts.repository.byIds(ids));
  }

  /** @throws ProblemError not-found for an alert of another studio */
  async get(studioId: string, alertId: string): Promise<{ alert: Alert; steps: AlertStep[] }> {
    const record = await this.#find(studioId, alertId);
    return { alert: await this.#view(record), steps: await this.parts.repository.steps(alertId) };
  }

  /** Takes an alert on; one that is over already is done with. A second acknowledgement only adds its note. */
  async acknowledge(studioId: string, alertId: string, note: string, actor: Actor): Promise<Alert> {
    const alert = await this.#find(studioId, alertId);
    if (alert.state === 'cleared') throw new ProblemError('conflict', 'This alert is over and done with.');
    const at = this.parts.clock.now();
    return this.#change(
      alert,
      {
        state: alert.state === 'returned' ? 'cleared' : 'acknowledged',
        acknowledgedBy: actor.personId,
        acknowledgedAt: at,
        acknowledgeNote: note,
        holder: alert.holder ?? actor.personId,
        nextEscalationAt: null,
      },
      'acknowledged',
      note,
      actor,
    );
  }

  /** Puts an alert aside for a time that ends. */
  async shelve(
    studioId: string,
    alertId: string,
    hours: number,
    reason: string,
    actor: Actor,
  ): Promise<Alert> {
    const alert = await this.#stillSo(studioId, alertId);
    const set = {
      shelvedBy: actor.personId,
      shelvedUntil: this.parts.clock.now() + hours * HOUR_MS,
      shelveReason: reason,
      nextEscalationAt: null,
    };
    return this.#change(alert, set, 'shelved', `For ${hours} h: ${reason}`, actor);
  }

  async unshelve(studioId: string, alertId: string, actor: Actor): Promise<Alert> {
    const alert = await this.#find(studioId, alertId);
    if (alert.shelvedUntil === null) throw new ProblemError('conflict', 'This alert is not on the shelf.');
    const set = {
      ...{ shelvedBy: null, shelvedUntil: null, shelveReason: null },
      nextEscalationAt: alert.state === 'open' ? this.parts.clock.now() : null,
    };
    return this.#change(alert, set, 'unshelved', '', actor);
  }

  /** @throws ProblemError bad-input for a person who may not see alerts of the studio */
  async handOver(
    studioId: string,
    alertId: string,
    personId: string,
    note: string,
    actor: Actor,
  ): Promise<Alert> {
    const alert = await this.#find(studioId, alertId);
    const studio = (await this.parts.watched.studios()).find(({ id }) => id === studioId);
    if (!studio?.watchers.includes(personId)) {
      throw new ProblemError('bad-input', 'Choose somebody of this studio who may see its alerts.', [
        { path: 'personId', message: 'Choose somebody of this studio.' },
      ]);
    }
    const name = (await this.parts.repository.names([personId])).get(personId) ?? '';
    return this.#change(alert, { holder: personId }, 'handed-over', `To ${name}. ${note}`.trim(), actor);
  }

  /** The rules of a room: its own where it has some, the defaults for the rest. */
  async rules(studioId: string, roomId: string): Promise<Rule[]> {
    const own = await this.parts.repository.ownRules(studioId, roomId);
    if (own === undefined) throw notFound('room');
    return rulesOf(own);
  }

  async setRules(studioId: string, roomId: string, rules: readonly Rule[], actor: Actor): Promise<Rule[]> {
    const before = await this.rules(studioId, roomId);
    const line = {
      ...this.#line(actor, studioId, 'changed alert rules', roomId, before, rules),
      thing: 'room',
    };
    await this.parts.repository.setRules(roomId, rules, line);
    this.parts.touched(studioId, roomId);
    return this.rules(studioId, roomId);
  }

  notices(person: SignedInPerson): Promise<Notice[]> {
    const studios = person.owner
      ? null
      : person.memberships
          .filter(({ studioId }) => may(roleIn(person, studioId), 'alerts.read'))
          .map((m) => m.studioId);
    if (!mayAnywhere(person, 'alerts.read')) return Promise.resolve([]);
    return this.parts.repository.notices(person.id, studios);
  }

  readNotices(person: SignedInPerson): Promise<void> {
    return this.parts.repository.readNotices(person.id, this.parts.clock.now());
  }

  async #find(studioId: string, alertId: string): Promise<AlertRecord> {
    const alert = await this.parts.repository.find(studioId, alertId);
    if (!alert) throw notFound('alert');
    return alert;
  }

  async #stillSo(studioId: string, alertId: string): Promise<AlertRecord> {
    const alert = await this.#find(studioId, alertId);
    if (alert.clearedAt !== null)
      throw new ProblemError('conflict', 'This alert is over; there is nothing to put aside.');
    return alert;
  }

  async #change(
    alert: AlertRecord,
    set: AlertChange,
    what: AlertStep['what'],
    note: string,
    actor: Actor,
  ): Promise<Alert> {
    const at = this.parts.clock.now();
    const writes: Write[] = [
      { do: 'change', alertId: alert.id, set },
      { do: 'step', alertId: alert.id, at, what, who: actor.personId, note, value: null },
    ];
    await this.parts.repository.write(
      writes,
      this.#line(actor, alert.studioId, what, alert.id, { state: alert.state }, set),
    );
    this.parts.touched(alert.studioId, alert.roomId);
    this.parts.changed.announce({ studioId: alert.studioId, alertId: alert.id });
    return this.#view(await this.#find(alert.studioId, alert.id));
  }

  #line(
    actor: Actor,
    studioId: string,
    action: string,
    thingId: string,
    was: unknown,
    became: unknown,
  ): AuditLine {
    const at = new Date(this.parts.clock.now());
    return { at, actor, studioId, action, thing: 'alert', thingId, was, became };
  }

  async #view(record: AlertRecord): Promise<Alert> {
    const [view] = await this.#views([record]);
    if (!view) throw notFound('alert');
    return view;
  }

  async #views(records: readonly AlertRecord[]): Promise<Alert[]> {
    const names = await this.parts.repository.names(
      records.flatMap(({ acknowledgedBy, shelvedBy, holder }) => [acknowledgedBy, shelvedBy, holder]),
    );
    const iso = (ms: number) => new Date(ms).toISOString();
    const nameOf = (id: string | null) => names.get(id ?? '') ?? '';
    return records.map((record) => ({
      id: record.id,
      studioId: record.studioId,
      roomId: record.roomId,
      sensorId: record.sensorId,
      facts: record.facts,
      state: record.state,
      raisedAt: iso(record.raisedAt),
      clearedAt: record.clearedAt === null ? null : iso(record.clearedAt),
      acknowledged:
        record.acknowledgedAt === null
          ? null
          : {
              by: nameOf(record.acknowledgedBy),
              at: iso(record.acknowledgedAt),
              note: record.acknowledgeNote ?? '',
            },
      shelved:
        record.shelvedUntil === null
          ? null
          : {
              by: nameOf(record.shelvedBy),
              until: iso(record.shelvedUntil),
              reason: record.shelveReason ?? '',
            },
      holder: record.holder === null ? null : { id: record.holder, name: nameOf(record.holder) },
      version: record.version,
    }));
  }
}
