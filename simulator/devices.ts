import { connect, type MqttClient } from 'mqtt';
import { z } from 'zod';
import { demoClockTopic } from '#shared/contract/telemetry';
import { payloadOf, type SensorReading } from './physics/sensor-model.js';

/** Credentials of the demo's devices, by device id. */
export const deviceFile = z.record(z.string(), z.object({ secret: z.string(), topic: z.string() }));
export type DeviceFile = z.infer<typeof deviceFile>;

/** A device that has this many messages unanswered sends no more until the broker catches up. */
const MOST_UNANSWERED = 4;
const READINGS_A_MESSAGE = 120;
/** What a device keeps while the broker is away. */
const MOST_KEPT = 20_000;

interface Device {
  readonly client: MqttClient;
  readonly topic: string;
  waiting: SensorReading[];
  unanswered: number;
}

/** The demo's devices, each with a connection of its own, and the device that tells the gateway the demo's time. */
export class Devices {
  readonly #devices = new Map<string, Device>();
  readonly #clock: MqttClient;

  /** @param clockSetting what the gateway is told whenever the connection comes up */
  constructor(
    private readonly url: string,
    file: DeviceFile,
    secret: string,
    private readonly clockSetting: () => object,
  ) {
    for (const [deviceId, { secret: own, topic }] of Object.entries(file)) {
      this.#devices.set(deviceId, {
        client: this.#connect(deviceId, own),
        topic,
        waiting: [],
        unanswered: 0,
      });
    }
    this.#clock = this.#connect('simulator', secret);
    this.#clock.on('connect', () => this.tellClock());
  }

  /** How many devices are connected. */
  get connected(): number {
    return [...this.#devices.values()].filter(({ client }) => client.connected).length;
  }

  tellClock(): void {
    if (this.#clock.connected)
      this.#clock.publish(demoClockTopic, JSON.stringify(this.clockSetting()), { qos: 1 });
  }

  /** Sends readings of a device, or keeps them until the broker has answered what was sent before. */
  send(deviceId: string, readings: readonly SensorReading[]): void {
    const device = this.#devices.get(deviceId);
    if (!device) return;
    device.waiting.push(...readings);
    if (device.waiting.length > MOST_KEPT) device.waiting = device.waiting.slice(-MOST_KEPT);
    while (device.waiting.length > 0 && device.unanswered < MOST_UNANSWERED && device.client.connected) {
      const part = device.waiting.splice(0, READINGS_A_MESSAGE);
      device.unanswered++;
      device.client.publish(device.topic, payloadOf(part), { qos: 1 }, () => device.unanswered--);
    }
  }

  /** Readings that wait, over all devices. */
  get waiting(): number {
    return [...this.#devices.values()].reduce((sum, { waiting }) => sum + waiting.length, 0);
  }

  async stop(): Promise<void> {
    const all = [this.#clock, ...[...this.#devices.values()].map(({ client }) => client)];
    await Promise.all(all.map((client) => client.endAsync(true)));
  }

  #connect(deviceId: string, secret: string): MqttClient {
    const client = connect(this.url, {
      clientId: deviceId,
      username: deviceId,
      password: secret,
      reconnectPeriod: 500,
      keepalive: 60,
      clean: false,
    });
    // The connection is tried again by itself; nothing else is to be done about it.
    client.on('error', () => undefined);
    return client;
  }
}
