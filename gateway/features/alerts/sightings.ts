import type { AlertFacts, AlertKind, Rule } from '#shared/contract/alerts';
import { CELLS_PER_DAY, CELLS_PER_HOUR } from '#shared/cure/grid';
import type { RoomHistories } from '../../history/room-histories.js';
import type { Standing } from '../estimates/standing.js';
import { staleAfterMs } from '../overview/room-condition.js';
import type { RoomsNow } from '../overview/rooms-now.js';
import type { RuledRoom, RuledSensor } from './alert-records.js';
import { lookAtRoom, lookAtSensor, ROOM_KINDS, type Finding } from './conditions.js';
import { INTAKE_RULE } from './rule-defaults.js';
import type { RuleSample } from './rule-machine.js';

/** What a rule is about. */
export interface Subject {
  /** Names the rule for ever: kind and room, sensor or studio. */
  readonly key: string;
  readonly kind: AlertKind;
  readonly rule: Rule;
  readonly studioId: string;
  readonly roomId: string | null;
  readonly sensorId: string | null;
}

/** What a rule saw. */
export interface Seen {
  readonly sample: RuleSample;
  readonly limit: number | null;
  readonly dewPoint: number | null;
  readonly celsius: number | null;
  readonly batches: AlertFacts['batches'];
  readonly lastHeardAt: number | null;
}

export interface SightingsParts {
  readonly roomsNow: Pick<RoomsNow, 'of'>;
  readonly histories: Pick<RoomHistories, 'peek' | 'end'>;
  readonly standing: Pick<Standing, 'inRoom'>;
}

/** Looks at rooms and sensors with their rules. */
export class Sightings {
  #rooms: ReadonlyMap<string, RuledRoom> = new Map();
  #sensors: ReadonlyMap<string, RuledSensor> = new Map();
  readonly #heard = new Map<string, number>();
  readonly #batteries = new Map<string, number>();
  #stuck: ReadonlyMap<string, number> = new Map();

  constructor(private readonly parts: SightingsParts) {}

  /** What there is to look at from now on. */
  watch(rooms: ReadonlyMap<string, RuledRoom>, sensors: ReadonlyMap<string, RuledSensor>): void {
    this.#rooms = rooms;
    this.#sensors = sensors;
    for (const { id, battery } of sensors.values()) {
      if (battery !== null && !this.#batteries.has(id)) this.#batteries.set(id, battery);
    }
  }

  wasHeard(sensorId: string): boolean {
    return this.#heard.has(sensorId);
  }

  /** A sensor was heard at an instant, epoch ms. */
  hear(sensorId: string, at: number, battery: number | null): void {
    this.#heard.set(sensorId, Math.max(at, this.#heard.get(sensorId) ?? -Infinity));
    if (battery !== null) this.#batteries.set(sensorId, battery);
  }

  /** Sensors that repeat one value, with that value in °C. */
  stuck(sensors: ReadonlyMap<string, number>): void {
    this.#stuck = sensors;
  }

  /** Rules about a room's air. */
  room(roomId: string, now: number): [Subject, Seen][] {
    const room = this.#rooms.get(roomId);
    const [view] = this.parts.roomsNow.of([roomId]);
    if (!room || !view || view.at === null) return [];
    const { swing, coldest } = this.#recent(roomId);
    const standing = this.parts.standing.inRoom(roomId, view.celsius);
    const picture = { limits: room.limits, now: view, standing, swing, coldest };
    const at = view.stale ? now : Date.parse(view.at);
    return ROOM_KINDS.flatMap((kind): [Subject, Seen][] => {
      const rule = room.rules.find((one) => one.kind === kind);
      if (!rule) return [];
      const subject = {
        key: `${kind}:${roomId}`,
        ...{ kind, rule, studioId: room.studioId, roomId, sensorId: null },
      };
      const found: Finding = lookAtRoom(kind, rule, picture, at);
      return [[subject, { ...found, lastHeardAt: Date.parse(view.at ?? '') }]];
    });
  }

  /** Rules about sensors, and about the silence of all of a studio. */
  sensors(studioIds: Iterable<string>, now: number): [Subject, Seen][] {
    const seen: [Subject, Seen][] = [];
    for (const studioId of studioIds) {
      const sensors = [...this.#sensors.values()].filter((sensor) => sensor.studioId === studioId);
      const heard = sensors.flatMap((sensor) => this.#heard.get(sensor.id) ?? []);
      const silent = sensors.filter((sensor) => this.#isSilent(sensor, now));
      // One sensor alone is its own alert; with several, one cause covers them.
      const covered = heard.length > 1 && silent.length === heard.length;
      const last = heard.length === 0 ? null : Math.max(...heard);
      seen.push([
        {
          key: `intake-silent:${studioId}`,
          ...{ kind: 'intake-silent', rule: INTAKE_RULE, studioId, roomId: null, sensorId: null },
        },
        seenOfSensor(
          {
            at: now,
            status: heard.length < 2 ? 'no-data' : covered ? 'bad' : 'good',
            ...{ severity: INTAKE_RULE.severity, value: null, worse: 'higher' },
          },
          null,
          last,
        ),
      ]);
      for (const sensor of sensors) seen.push(...this.#lookAtSensor(sensor, covered, now));
    }
    return seen;
  }

  #recent(roomId: string): { swing: number | null; coldest: number | null } {
    const history = this.parts.histories.peek(roomId);
    if (!history) return { swing: null, coldest: null };
    const { end } = this.parts.histories;
    let [low, high, coldest] = [Infinity, -Infinity, Infinity];
    for (let cell = Math.max(history.origin, end - CELLS_PER_DAY); cell < end; cell++) {
      const celsius = history.observed(cell);
      if (Number.isNaN(celsius)) continue;
      [low, high] = [Math.min(low, celsius), Math.max(high, celsius)];
      if (cell >= end - 3 * CELLS_PER_HOUR) coldest = Math.min(coldest, celsius);
    }
    return { swing: high < low ? null : high - low, coldest: coldest === Infinity ? null : coldest };
  }

  #lookAtSensor(sensor: RuledSensor, covered: boolean, now: number): [Subject, Seen][] {
    const room = this.#rooms.get(sensor.roomId);
    if (!room) return [];
    const lastHeardAt = this.#heard.get(sensor.id) ?? null;
    const picture = {
      lastHeardAt,
      staleAfterMs: staleAfterMs(sensor.intervalSeconds),
      battery: this.#batteries.get(sensor.id) ?? null,
      stuckAtCelsius: this.#stuck.get(sensor.id) ?? null,
      covered,
    };
    return (['silent', 'stuck', 'battery'] as const).flatMap((kind): [Subject, Seen][] => {
      const rule = room.rules.find((one) => one.kind === kind);
      if (!rule) return [];
      const { sample, limit } = lookAtSensor(kind, rule, picture, now);
      return [
        [
          {
            key: `${kind}:${sensor.id}`,
            ...{ kind, rule, studioId: sensor.studioId, roomId: sensor.roomId, sensorId: sensor.id },
          },
          seenOfSensor(sample, limit, lastHeardAt),
        ],
      ];
    });
  }

  #isSilent(sensor: RuledSensor, now: number): boolean {
    const at = this.#heard.get(sensor.id);
    return at !== undefined && now - at > staleAfterMs(sensor.intervalSeconds);
  }
}

function seenOfSensor(sample: RuleSample, limit: number | null, lastHeardAt: number | null): Seen {
  return { sample, limit, dewPoint: null, celsius: null, batches: [], lastHeardAt };
}
