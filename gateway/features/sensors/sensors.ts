import { randomBytes, randomUUID } from 'node:crypto';
import type { z } from 'zod';
import type { quarantined, Sensor } from '#shared/contract/sensors';
import { readingTopic } from '#shared/contract/telemetry';
import type { Clock } from '../../clock.js';
import type { Actor } from '../../http/actor.js';
import { changedMeanwhile, notFound, ProblemError } from '../../http/problem-error.js';
import { hashDeviceSecret } from '../../intake/device-registry.js';
import { healthState, isDrifting, isStuck } from './sensor-health.js';
import type { KeptSensor, SensorFields, SensorsRepository } from './sensors-repository.js';

/** What sensors need to know of rooms. @throws ProblemError not-found for a room of another studio */
export interface RoomOfStudio {
  get(studioId: string, roomId: string): Promise<{ readonly name: string }>;
}

export interface SensorsParts {
  readonly repository: SensorsRepository;
  readonly rooms: RoomOfStudio;
  readonly clock: Clock;
  readonly connectedDevices: () => ReadonlySet<string>;
  /** Told after a sensor of a room was enrolled, changed or retired. */
  readonly changed: (studioId: string, roomId: string) => void;
}

/** Looked back on for drift: a week to learn from and two to judge. */
const DRIFT_MS = 21 * 86_400_000;

/** Enrolled sensors, their health, and what of their messages could not be taken. */
export class Sensors {
  constructor(private readonly parts: SensorsParts) {}

  /** Sensors of a studio with their health, retired ones last. */
  async list(studioId: string): Promise<Sensor[]> {
    return this.#views(await this.parts.repository.list(studioId));
  }

  /** Enrols a sensor; its secret (128 random bits) is only in this answer. */
  async enrol(
    studioId: string,
    fields: SensorFields & { roomId: string },
    actor: Actor,
  ): Promise<{ sensor: Sensor; secret: string }> {
    await this.parts.rooms.get(studioId, fields.roomId);
    const id = randomUUID();
    const secret = newSecret();
    const deviceId = `sensor-${randomBytes(5).toString('hex')}`;
    await this.parts.repository.insert(
      { ...fields, id, studioId, deviceId, secretHash: hashDeviceSecret(secret) },
      this.#line(actor, studioId, 'enrolled', id, undefined, { ...fields, deviceId }),
    );
    this.parts.changed(studioId, fields.roomId);
    return { sensor: await this.#get(studioId, id), secret };
  }

  /** @throws ProblemError changed-meanwhile when the version is not the current one, conflict for a retired sensor */
  async change(
    studioId: string,
    sensorId: string,
    fields: SensorFields & { version: number },
    actor: Actor,
  ): Promise<Sensor> {
    const { version, ...rest } = fields;
    const before = await this.#inService(studioId, sensorId);
    const line = this.#line(actor, studioId, 'changed', sensorId, fieldsOf(before), rest);
    if (!(await this.parts.repository.update(sensorId, version, rest, line)))
      throw changedMeanwhile('sensor');
    this.parts.changed(studioId, before.roomId);
    return this.#get(studioId, sensorId);
  }

  /** Replaces the secret; the old one stops working at the next connection. */
  async newSecret(
    studioId: string,
    sensorId: string,
    actor: Actor,
  ): Promise<{ sensor: Sensor; secret: string }> {
    const sensor = await this.#inService(studioId, sensorId);
    const secret = newSecret();
    const line = this.#line(actor, studioId, 'got a new secret', sensorId, undefined, undefined);
    await this.parts.repository.setSecret(sensorId, hashDeviceSecret(secret), line);
    this.parts.changed(studioId, sensor.roomId);
    return { sensor: await this.#get(studioId, sensorId), secret };
  }

  /** Takes a sensor out of service; what it measured stays. */
  async retire(studioId: string, sensorId: string, actor: Actor): Promise<void> {
    const sensor = await this.#inService(studioId, sensorId);
    const at = new Date(this.parts.clock.now());
    const line = this.#line(actor, studioId, 'retired', sensorId, fieldsOf(sensor), undefined);
    await this.parts.repository.retire(sensorId, at, line);
    this.parts.changed(studioId, sensor.roomId);
  }

  /** Sensors of all studios that repeat one value, by id, with that value in °C. */
  async stuck(): Promise<Map<string, number>> {
    const { repository } = this.parts;
    const sensors = await repository.inService();
    const newest = await repository.newest(sensors.map(({ no }) => no));
    const spans = await repository.recentSpans(newest);
    return new Map(
      sensors.flatMap(({ id, no }): [string, number][] => {
        const value = newest.get(no);
        return value && isStuck(spans.get(no) ?? null) ? [[id, value.celsius]] : [];
      }),
    );
  }

  quarantine(studioId: string, limit: number): Promise<z.infer<typeof quarantined>[]> {
    return this.parts.repository.quarantine(studioId, limit);
  }

  async #find(studioId: string, sensorId: string): Promise<KeptSensor> {
    const sensor = await this.parts.repository.find(studioId, sensorId);
    if (!sensor) throw notFound('sensor');
    return sensor;
  }

  async #inService(studioId: string, sensorId: string): Promise<KeptSensor> {
    const sensor = await this.#find(studioId, sensorId);
    if (sensor.retiredAt) {
      throw new ProblemError('conflict', `${sensor.name} is retired. Enrol it anew to use it again.`);
    }
    return sensor;
  }

  async #get(studioId: string, sensorId: string): Promise<Sensor> {
    const [view] = await this.#views([await this.#find(studioId, sensorId)]);
    if (!view) throw notFound('sensor');
    return view;
  }

  async #views(sensors: readonly KeptSensor[]): Promise<Sensor[]> {
    const now = this.parts.clock.now();
    const { repository } = this.parts;
    const newest = await repository.newest(sensors.map(({ no }) => no));
    const spans = await repository.recentSpans(newest);
    const inService = sensors.filter(({ retiredAt, trusted }) => retiredAt === null && trusted);
    const means = await repository.sixHourMeans(
      inService.map(({ no }) => no),
      now - DRIFT_MS,
      now,
    );
    const connected = this.parts.connectedDevices();
    const views = sensors.map((sensor): Sensor => {
      const value = newest.get(sensor.no) ?? null;
      const others = inService.filter(({ no, roomId }) => roomId === sensor.roomId && no !== sensor.no);
      const drifting = isDrifting(
        means.get(sensor.no) ?? [],
        others.map(({ no }) => means.get(no) ?? []),
      );
      return {
        id: sensor.id,
        studioId: sensor.studioId,
        roomId: sensor.roomId,
        name: sensor.name,
        deviceId: sensor.deviceId,
        topic: readingTopic(sensor.studioId, sensor.deviceId),
        trusted: sensor.trusted,
        offsetCelsius: sensor.offsetCelsius,
        offsetHumidity: sensor.offsetHumidity,
        intervalSeconds: sensor.intervalSeconds,
        acceptLateDays: sensor.acceptLateDays,
        retired: sensor.retiredAt !== null,
        health: {
          state: healthState(
            {
              intervalSeconds: sensor.intervalSeconds,
              retired: sensor.retiredAt !== null,
              lastHeardAt: value?.at ?? null,
            },
            now,
            spans.get(sensor.no) ?? null,
            drifting,
          ),
          lastHeardAt: value === null ? null : new Date(value.at).toISOString(),
          lastCelsius: value?.celsius ?? null,
          lastHumidity: value?.humidity ?? null,
          battery: sensor.battery,
          futureReadings: sensor.futureReadings,
          conflicts: sensor.conflicts,
          quarantined: sensor.quarantined,
          connected: connected.has(sensor.deviceId),
        },
        version: sensor.version,
      };
    });
    return views.sort((a, b) => Number(a.retired) - Number(b.retired));
  }

  #line(actor: Actor, studioId: string, action: string, thingId: string, was: unknown, became: unknown) {
    const at = new Date(this.parts.clock.now());
    return { at, actor, studioId, action, thing: 'sensor', thingId, was, became };
  }
}

function newSecret(): string {
  return randomBytes(16).toString('base64url');
}

function fieldsOf(sensor: KeptSensor): SensorFields {
  const { name, trusted, offsetCelsius, offsetHumidity, intervalSeconds, acceptLateDays } = sensor;
  return { name, trusted, offsetCelsius, offsetHumidity, intervalSeconds, acceptLateDays };
}
