import { readFileSync } from 'node:fs';
import { createServer, type Server, type Socket } from 'node:net';
import { Duplex } from 'node:stream';
import { createServer as createTlsServer } from 'node:tls';
import { Aedes, type Client, type PublishPacket } from 'aedes';
import type { Logger } from 'pino';
import { demoClock, type DemoClock, demoClockTopic, parseReadingTopic } from '#shared/contract/telemetry';
import type { Settings } from '../settings.js';
import { type Device, type DeviceRegistry, hashDeviceSecret } from './device-registry.js';
import { LARGEST_PAYLOAD_BYTES } from './payloads.js';
import { PacketSizeGuard } from './packet-size-guard.js';

export interface BrokerParts {
  readonly settings: Settings['mqtt'];
  readonly registry: DeviceRegistry;
  readonly demo: { readonly simulatorSecret: string; readonly setClock: (clock: DemoClock) => void } | null;
  /** Stores a message of a device; `done` sends its acknowledgement. */
  readonly take: (device: Device, topic: string, payload: Buffer, done: () => void) => void;
  /** True while so much is waiting that new messages must be turned away. */
  readonly full: () => boolean;
  readonly log: Logger;
}

/** Name and client id of the demo's simulator, which may set the clock and nothing else. */
const SIMULATOR = 'simulator';
const MOST_CONNECTIONS = 5000;
const REFUSAL_DELAY_MS = 300;
const BAD_CREDENTIALS = 4;
/** Topic and headers on top of the payload. */
const LARGEST_PACKET_BYTES = LARGEST_PAYLOAD_BYTES + 1024;

/**
 * The embedded MQTT broker: devices publish readings on their own topic and do nothing else. A QoS 1 message is acknowledged
 * only when `done` was called, which is after the commit.
 */
export class Broker {
  #broker: Aedes | null = null;
  #server: Server | null = null;
  readonly #sockets = new Set<Socket>();
  readonly #devices = new Map<Client, Device | typeof SIMULATOR>();
  readonly #foreignWills = new WeakSet<Client>();
  #connected: ((deviceId: string, online: boolean) => void) | null = null;

  constructor(private readonly parts: BrokerParts) {}

  /** Ids of the devices that are connected now. */
  get connectedDevices(): ReadonlySet<string> {
    return new Set(
      [...this.#devices.values()].flatMap((device) => (device === SIMULATOR ? [] : [device.deviceId])),
    );
  }

  onConnection(listener: (deviceId: string, online: boolean) => void): void {
    this.#connected = listener;
  }

  /** @throws Error of the system when the port cannot be listened on */
  async start(): Promise<void> {
    const broker = await Aedes.createBroker({ heartbeatInterval: 60_000, connectTimeout: 15_000 });
    this.#broker = broker;
    broker.preConnect = (client, packet, done) => {
      const will = packet.will?.topic;
      // Refused with the credentials, where the device is told; here it would only be cut off.
      if (will !== undefined && parseReadingTopic(will)?.deviceId !== packet.username)
        this.#foreignWills.add(client);
      done(null, true);
    };
    broker.authenticate = (client, username, password, done) => {
      const device = this.#foreignWills.has(client)
        ? null
        : this.#identify(client.id, username ?? '', password);
      if (device !== null) {
        this.#devices.set(client, device);
        return done(null, true);
      }
      this.parts.log.warn(
        { client: client.id },
        'a device was refused: unknown name, wrong secret or a will on a foreign topic',
      );
      const refusal = Object.assign(new Error('unknown device or wrong secret'), {
        returnCode: BAD_CREDENTIALS,
      });
      setTimeout(() => done(refusal, false), REFUSAL_DELAY_MS);
    };
    broker.authorizeSubscribe = (_client, _subscription, done) => done(null, null);
    broker.authorizePublish = (client, packet, done) => this.#publish(client, packet, done);
    broker.on('clientReady', (client) => this.#tellConnection(client, true));
    broker.on('clientDisconnect', (client) => this.#forget(client));
    broker.on('connectionError', (client) => this.#forget(client));
    broker.on('clientError', (client, error) => {
      this.parts.log.debug({ client: client.id, err: error }, 'connection of a device failed');
      this.#forget(client);
    });
    await this.#listen(broker);
  }

  /** Closes the port and every connection. */
  async stop(): Promise<void> {
    const server = this.#server;
    this.#server = null;
    const closed = server ? new Promise<void>((resolve) => server.close(() => resolve())) : Promise.resolve();
    for (const socket of this.#sockets) socket.destroy();
    await closed;
    await new Promise<void>((resolve) => (this.#broker ? this.#broker.close(() => resolve()) : resolve()));
    this.#broker = null;
  }

  #listen(broker: Aedes): Promise<void> {
    const { host, port, tls } = this.parts.settings;
    const accept = (socket: Socket) => this.#accept(broker, socket);
    const server = tls
      ? createTlsServer({ cert: readFileSync(tls.certFile), key: readFileSync(tls.keyFile) }, accept)
      : createServer(accept);
    this.#server = server;
    return new Promise((resolve, reject) => {
      server.once('error', reject);
      server.listen(port, host, () => {
        server.off('error', reject);
        server.on('error', (error) => this.parts.log.error({ err: error }, 'MQTT port'));
        resolve();
      });
    });
  }

  #accept(broker: Aedes, socket: Socket): void {
    if (this.#sockets.size >= MOST_CONNECTIONS) return void socket.destroy();
    this.#sockets.add(socket);
    socket.setNoDelay(true);
    socket.setKeepAlive(true, 60_000);
    socket.once('close', () => this.#sockets.delete(socket));
    socket.on('error', () => socket.destroy());
    const guard = new PacketSizeGuard(LARGEST_PACKET_BYTES);
    guard.on('error', (error) => {
      this.parts.log.warn({ address: socket.remoteAddress, err: error }, 'a device was cut off');
      socket.destroy();
    });
    const stream = Duplex.from({ readable: socket.pipe(guard), writable: socket });
    stream.on('error', () => socket.destroy());
    socket.once('close', () => stream.destroy());
    broker.handle(stream);
  }

  #identify(
    clientId: string,
    username: string,
    password: Buffer | undefined,
  ): Device | typeof SIMULATOR | null {
    if (password === undefined) return null;
    if (username === SIMULATOR) {
      const secret = this.parts.demo?.simulatorSecret;
      return secret !== undefined && hashDeviceSecret(password.toString()) === hashDeviceSecret(secret)
        ? SIMULATOR
        : null;
    }
    const device = this.parts.registry.authenticate(username, password);
    if (device === null) return null;
    // A client id closes the older connection of the same id: nobody may take that of another device.
    const foreign =
      clientId !== username && (clientId === SIMULATOR || this.parts.registry.find(clientId) !== null);
    return foreign ? null : device;
  }

  #publish(client: Client | null, packet: PublishPacket, done: (error?: Error | null) => void): void {
    const device = client === null ? undefined : this.#devices.get(client);
    const payload = Buffer.isBuffer(packet.payload) ? packet.payload : Buffer.from(packet.payload);
    if (device === SIMULATOR && packet.topic === demoClockTopic) {
      this.#setDemoClock(payload);
      return done(null);
    }
    if (device === undefined || device === SIMULATOR) return done(new Error('not allowed to publish'));
    const topic = parseReadingTopic(packet.topic);
    if (topic?.deviceId !== device.deviceId || topic.studioId !== device.studioId) {
      this.parts.log.warn(
        { device: device.deviceId, topic: packet.topic },
        'a device published on a foreign topic',
      );
      return done(new Error('a device publishes on its own topic only'));
    }
    if (packet.retain) return done(new Error('retained messages are not taken'));
    if (this.parts.full()) return done(new Error('too much is waiting; send it again later'));
    this.parts.take(device, packet.topic, payload, () => done(null));
  }

  #setDemoClock(payload: Buffer): void {
    let json: unknown = null;
    try {
      json = JSON.parse(payload.toString());
    } catch {
      // Falls through to the schema's refusal.
    }
    const clock = demoClock.safeParse(json);
    if (clock.success) this.parts.demo?.setClock(clock.data);
    else this.parts.log.warn('the demo clock could not be read');
  }

  #tellConnection(client: Client, online: boolean): void {
    const device = this.#devices.get(client);
    if (device !== undefined && device !== SIMULATOR) this.#connected?.(device.deviceId, online);
  }

  #forget(client: Client): void {
    this.#tellConnection(client, false);
    this.#devices.delete(client);
  }
}
