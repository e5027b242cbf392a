import { randomBytes, randomUUID } from 'node:crypto';
import type { DataSource, EntityManager } from 'typeorm';
import type { DemoScenario } from '#shared/contract/demo-scenario';
import { readingTopic } from '#shared/contract/telemetry';
import { pourGrams } from '#shared/cure/load';
import { STARTING_GUESS, WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';
import { PasswordHashes } from '../features/sign-in/password-hashes.js';
import { hashDeviceSecret } from '../intake/device-registry.js';

interface DemoSensor {
  readonly sensorNo: number;
  readonly timeZone: string;
}

/** Puts the things of a demo scenario into an empty database; readings come afterwards. */
export class DemoFloor {
  readonly #ids = new Map<string, string>();
  readonly #sensors = new Map<string, DemoSensor>();
  /** Secrets and topics of the devices, for the simulator. */
  readonly devices: Record<string, { secret: string; topic: string }> = {};

  constructor(
    private readonly dataSource: DataSource,
    private readonly scenario: DemoScenario,
  ) {}

  /** @throws Error when the database already holds a studio */
  async insert(): Promise<void> {
    const [row] = await this.dataSource.query<{ n: string }[]>('SELECT COUNT(*) AS n FROM studio');
    if (Number(row?.n) > 0)
      throw new Error('This database already holds studios; the demo is loaded into an empty one only.');
    const hashes = await this.#passwordHashes();
    await this.dataSource.transaction(async (manager) => {
      await this.#people(manager, hashes);
      await this.#studios(manager);
      await this.#memberships(manager);
      await this.#materials(manager);
      await this.#batches(manager);
    });
  }

  /** Id of a thing of the scenario, e.g. id('studio', 'quay'). */
  id(kind: string, key: string): string {
    const name = `${kind}:${key}`;
    const known = this.#ids.get(name);
    if (known) return known;
    const fresh = randomUUID();
    this.#ids.set(name, fresh);
    return fresh;
  }

  /** @throws Error for a device that is not in the scenario */
  sensor(deviceId: string): DemoSensor {
    const sensor = this.#sensors.get(deviceId);
    if (!sensor) throw new Error(`The scenario has readings of ${deviceId}, which it does not enrol.`);
    return sensor;
  }

  /** Few different passwords: each is hashed once. */
  async #passwordHashes(): Promise<Map<string, string>> {
    const hashes = new PasswordHashes();
    const passwords = new Set(this.scenario.people.flatMap(({ password }) => password ?? []));
    const pairs = await Promise.all(
      [...passwords].map(async (password) => [password, await hashes.hash(password)] as const),
    );
    return new Map(pairs);
  }

  async #people(manager: EntityManager, hashes: ReadonlyMap<string, string>): Promise<void> {
    await manager.query('INSERT INTO person (id, email, name, password_hash, owner, created_at) VALUES ?', [
      this.scenario.people.map((person) => [
        this.id('person', person.key),
        person.email,
        person.name,
        person.password === null ? null : hashes.get(person.password),
        person.owner ? 1 : 0,
        new Date(Date.parse(this.scenario.now) - 100 * 86_400_000),
      ]),
    ]);
  }

  async #studios(manager: EntityManager): Promise<void> {
    for (const [position, studio] of this.scenario.studios.entries()) {
      const studioId = this.id('studio', studio.key);
      const recipients = studio.recipients.map((key) => this.id('person', key));
      await manager.query(
        `INSERT INTO studio (id, name, time_zone, unit, address, pressure_hpa, quiet_from, quiet_to, recipients, escalate_after_minutes, position)
         VALUES (?)`,
        [
          [
            ...[studioId, studio.name, studio.timeZone, studio.unit, studio.address, studio.pressureHpa],
            ...[studio.quietFrom, studio.quietTo, JSON.stringify(recipients), 30, position],
          ],
        ],
      );
      for (const [at, room] of studio.rooms.entries()) await this.#room(manager, studio, room, at);
    }
  }

  async #room(
    manager: EntityManager,
    studio: DemoScenario['studios'][number],
    room: DemoScenario['studios'][number]['rooms'][number],
    position: number,
  ): Promise<void> {
    const [studioId, roomId] = [this.id('studio', studio.key), this.id('room', room.key)];
    const { bandLow, bandHigh, heatLimit, humidityHigh, swingLimit, slipDays } = room.limits;
    await manager.query(
      'INSERT INTO room (id, studio_id, name, position, band_low, band_high, heat_limit, humidity_high, swing_limit, slip_days, notes) VALUES (?)',
      [
        [
          ...[roomId, studioId, room.name, position],
          ...[bandLow, bandHigh, heatLimit, humidityHigh, swingLimit, slipDays, room.notes],
        ],
      ],
    );
    for (const [at, rack] of room.racks.entries()) {
      await manager.query('INSERT INTO rack (id, studio_id, room_id, name, position) VALUES (?)', [
        [this.id('rack', rack.key), studioId, roomId, rack.name, at],
      ]);
      await manager.query('INSERT INTO shelf (id, rack_id, position, capacity) VALUES ?', [
        rack.shelves.map((capacity, index) => [
          this.id('shelf', `${rack.key}/${index + 1}`),
          this.id('rack', rack.key),
          index + 1,
          capacity,
        ]),
      ]);
    }
    for (const sensor of room.sensors) {
      const secret = randomBytes(16).toString('base64url');
      const { insertId } = await manager.query<{ insertId: number }>(
        `INSERT INTO sensor (id, studio_id, room_id, name, device_id, secret_hash, offset_celsius, interval_seconds) VALUES (?)`,
        [
          [
            ...[this.id('sensor', sensor.deviceId), studioId, roomId, sensor.name, sensor.deviceId],
            ...[hashDeviceSecret(secret), sensor.offsetCelsius, sensor.intervalSeconds],
          ],
        ],
      );
      this.#sensors.set(sensor.deviceId, { sensorNo: insertId, timeZone: studio.timeZone });
      this.devices[sensor.deviceId] = { secret, topic: readingTopic(studioId, sensor.deviceId) };
    }
  }

  async #memberships(manager: EntityManager): Promise<void> {
    const rows = this.scenario.people.flatMap((person) =>
      person.memberships.map(({ studio, role }) => [
        this.id('person', person.key),
        this.id('studio', studio),
        role,
      ]),
    );
    await manager.query('INSERT INTO membership (person_id, studio_id, role) VALUES ?', [rows]);
  }

  async #materials(manager: EntityManager): Promise<void> {
    const { waxes, fragrances, designs } = this.scenario;
    await manager.query(
      'INSERT INTO wax (id, name, family, kinetics, pour_low, pour_high, provenance) VALUES ?',
      [
        waxes.map(({ key, name, family }) => {
          const { kinetics, pour } = WAX_FAMILY_DEFAULTS[family];
          return [this.id('wax', key), name, family, JSON.stringify(kinetics), ...pour, STARTING_GUESS];
        }),
      ],
    );
    await manager.query('INSERT INTO fragrance (id, name, flash_point, certificate_max_load) VALUES ?', [
      fragrances.map(({ key, name, flashPoint, certificateMaxLoad }) => [
        this.id('fragrance', key),
        name,
        flashPoint,
        certificateMaxLoad,
      ]),
    ]);
    await manager.query(
      'INSERT INTO design (id, name, wax_id, fragrance_id, load_percent_of_wax, wick, vessel, vessel_diameter_mm, fill_grams) VALUES ?',
      [
        designs.map((design) => [
          ...[this.id('design', design.key), design.name, this.id('wax', design.wax)],
          design.fragrance === null ? null : this.id('fragrance', design.fragrance),
          ...[design.loadPercentOfWax, design.wick, design.vessel, design.vesselDiameterMm, design.fillGrams],
        ]),
      ],
    );
  }

  async #batches(manager: EntityManager): Promise<void> {
    const { batches, designs } = this.scenario;
    const rows = batches.map((batch) => {
      const design = designs.find(({ key }) => key === batch.design);
      const grams = pourGrams(design?.fillGrams ?? 0, batch.vessels, design?.loadPercentOfWax ?? 0);
      return [
        ...[
          this.id('batch', batch.code),
          this.id('studio', batch.studio),
          batch.code,
          this.id('design', batch.design),
        ],
        ...[batch.vessels, new Date(batch.pouredAt), this.id('person', batch.pouredBy), batch.pourCelsius],
        ...[grams.wax, grams.fragrance, batch.ended?.as ?? 'curing'],
        ...[batch.ended ? new Date(batch.ended.at) : null, batch.notes],
      ];
    });
    await manager.query(
      'INSERT INTO batch (id, studio_id, code, design_id, vessels, poured_at, poured_by, pour_celsius, wax_grams, fragrance_grams, status, ended_at, notes) VALUES ?',
      [rows],
    );
    await manager.query('INSERT INTO stay (id, batch_id, shelf_id, room_id, from_at, to_at) VALUES ?', [
      batches.flatMap((batch) =>
        batch.stays.map((stay) => [
          randomUUID(),
          this.id('batch', batch.code),
          this.id('shelf', `${stay.rack}/${stay.shelf}`),
          this.id('room', stay.rack.split('/')[0] ?? ''),
          new Date(stay.from),
          stay.to === null ? null : new Date(stay.to),
        ]),
      ),
    ]);
  }
}
