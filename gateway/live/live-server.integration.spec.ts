import { once } from 'node:events';
import { type Server as HttpServer, createServer } from 'node:http';
import { type AddressInfo, connect } from 'node:net';
import { pino } from 'pino';
import { type Socket, io } from 'socket.io-client';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { ClientToServer, LiveFrame, LiveWelcome, ServerToClient } from '#shared/contract/live';
import type { StudioRole } from '#shared/contract/roles';
import type { SignedInPerson } from '../http/actor.js';
import { ProblemError } from '../http/problem-error.js';
import { FrameCollector } from './frame-collector.js';
import { LiveServer } from './live-server.js';
import { TestSource } from './test-source.js';

const NORTH = '6f0f4a0e-5f0a-4f43-9d5b-0a1d2c3b4a01';
const SOUTH = '6f0f4a0e-5f0a-4f43-9d5b-0a1d2c3b4a02';
const ORIGIN = 'http://127.0.0.1:5401';
const systemClock = { now: () => Date.now(), speed: () => 1 };

type Client = Socket<ServerToClient, ClientToServer>;
interface Known {
  person: SignedInPerson;
  expiresAt: number;
}

function personWith(name: string, memberships: Record<string, StudioRole>, owner = false): SignedInPerson {
  return {
    id: `person ${name}`,
    name,
    email: `${name}@larkrise.example`,
    sessionId: `session ${name}`,
    owner,
    memberships: Object.entries(memberships).map(([studioId, role]) => ({ studioId, role })),
  };
}

describe('LiveServer', () => {
  let http: HttpServer;
  let url: string;
  let source: TestSource;
  let collector: FrameCollector;
  let live: LiveServer;
  let speed: number;
  let studios: string[];
  const tokens = new Map<string, Known>();
  const clients: Client[] = [];

  beforeEach(async () => {
    tokens.clear();
    signIn('maker', personWith('maker', { [NORTH]: 'maker' }));
    signIn('viewer', personWith('viewer', { [NORTH]: 'viewer' }));
    signIn('southerner', personWith('southerner', { [SOUTH]: 'lead' }));
    signIn('owner', personWith('owner', {}, true));
    http = createServer();
    source = new TestSource();
    speed = 1;
    studios = [NORTH, SOUTH];
    const clock = { now: () => Date.parse('2026-05-04T12:00:00Z'), speed: () => speed };
    collector = new FrameCollector(source, clock);
    live = new LiveServer({
      http,
      allowedOrigins: () => [ORIGIN],
      authenticate: async (token) => {
        const known = tokens.get(token);
        if (!known) throw new ProblemError('sign-in-needed', 'Sign in first.');
        return known;
      },
      collector,
      directory: {
        studios: () => studios,
        studioOf: () => NORTH,
        roomsOf: () => [],
        reload: async () => undefined,
      },
      clock,
      systemClock,
      log: pino({ level: 'silent' }),
      everyMs: 40,
      mostWaitingBytes: 300_000,
    });
    await live.start();
    http.listen(0, '127.0.0.1');
    await once(http, 'listening');
    url = `http://127.0.0.1:${(http.address() as AddressInfo).port}`;
  });

  afterEach(async () => {
    for (const client of clients.splice(0)) client.disconnect();
    await live.stop();
    http.close();
  });

  function signIn(token: string, person: SignedInPerson, goodForMs = 600_000): void {
    tokens.set(token, { person, expiresAt: Date.now() + goodForMs });
  }

  function connectAs(token: string, options: object = {}): Client {
    const client: Client = io(url, {
      transports: ['websocket'],
      reconnection: false,
      auth: { token },
      ...options,
    });
    clients.push(client);
    return client;
  }

  async function welcomed(
    token: string,
  ): Promise<{ client: Client; welcome: LiveWelcome; frames: LiveFrame[] }> {
    const client = connectAs(token);
    const frames: LiveFrame[] = [];
    client.on('frame', (frame) => frames.push(frame));
    const welcome = await next(client, 'welcome');
    return { client, welcome, frames };
  }

  /** The next event of a name; rejects when the connection is refused. */
  function next<E extends keyof ServerToClient>(
    client: Client,
    name: E,
  ): Promise<Parameters<ServerToClient[E]>[0]> {
    return new Promise((resolve, reject) => {
      client.once(name, resolve as never);
      client.once('connect_error', reject);
    });
  }

  it('welcomes people with the studios that are theirs', async () => {
    expect((await welcomed('maker')).welcome.studios).toEqual([{ studioId: NORTH, seq: 0 }]);
    expect((await welcomed('owner')).welcome.studios.map(({ studioId }) => studioId)).toEqual([NORTH, SOUTH]);
  });

  it('refuses a bad token, a missing one and another transport', async () => {
    await expect(next(connectAs('nobody'), 'welcome')).rejects.toMatchObject({
      data: { code: 'sign-in-needed' },
    });
    await expect(next(connectAs('', { auth: {} }), 'welcome')).rejects.toMatchObject({
      data: { code: 'sign-in-needed' },
    });
    expect((await fetch(`${url}/socket.io/?EIO=4&transport=polling`)).status).toBe(400);
  });

  it('refuses a page of another origin before the token is looked at', async () => {
    const foreign = connectAs('maker', { extraHeaders: { Origin: 'http://elsewhere.example' } });
    await expect(next(foreign, 'welcome')).rejects.toThrow('websocket error');
    const own = connectAs('maker', { extraHeaders: { Origin: ORIGIN } });
    expect((await next(own, 'welcome')).studios).toHaveLength(1);
  });

  it('batches what happens between two ticks into one frame a studio', async () => {
    const { client, frames } = await welcomed('maker');
    for (let reading = 0; reading < 200; reading++) collector.roomChanged(NORTH, `room ${reading % 4}`);
    await next(client, 'frame');
    collector.roomChanged(NORTH, 'room 1');
    await next(client, 'frame');
    expect(frames.map(({ seq, rooms }) => [seq, rooms.length])).toEqual([
      [1, 4],
      [2, 1],
    ]);
  });

  it('sends a viewer neither alerts nor recipes', async () => {
    source.curing.add('b1');
    const viewer = await welcomed('viewer');
    const maker = await welcomed('maker');
    collector.alertChanged(NORTH, 'a1');
    await next(maker.client, 'frame');
    collector.batchesChanged(NORTH, ['b1']);
    collector.alertChanged(NORTH, 'a2');
    await Promise.all([next(viewer.client, 'frame'), next(maker.client, 'frame')]);
    expect(maker.frames.flatMap(({ alerts }) => alerts.map(({ id }) => id))).toEqual(['a1', 'a2']);
    expect(viewer.frames).toHaveLength(1);
    expect(viewer.frames[0]).toMatchObject({ seq: 1, alerts: [], batches: [{ id: 'b1', designName: null }] });
    expect(JSON.stringify(viewer.frames)).not.toContain('Harvest');
  });

  it('sends nothing of a foreign studio', async () => {
    const southerner = await welcomed('southerner');
    const owner = await welcomed('owner');
    collector.roomChanged(NORTH, 'room 0');
    live.layoutChanged(NORTH);
    let layouts = 0;
    southerner.client.on('layout', () => layouts++);
    await Promise.all([next(owner.client, 'frame'), next(owner.client, 'layout')]);
    collector.roomChanged(SOUTH, 'room 9');
    await next(southerner.client, 'frame');
    expect(southerner.frames.map(({ studioId }) => studioId)).toEqual([SOUTH]);
    expect(layouts).toBe(0);
  });

  it('answers a resync with the last number, and nothing for a foreign or made-up studio', async () => {
    const { client } = await welcomed('maker');
    collector.roomChanged(NORTH, 'room 0');
    await next(client, 'frame');
    expect((await client.emitWithAck('resync', NORTH))?.studios).toEqual([{ studioId: NORTH, seq: 1 }]);
    expect(await client.emitWithAck('resync', SOUTH)).toBeNull();
    expect(await client.emitWithAck('resync', { studioId: NORTH } as unknown as string)).toBeNull();
  });

  it('leaves a hole in the numbers for one who missed a frame', async () => {
    const first = await welcomed('maker');
    const second = await welcomed('maker');
    collector.roomChanged(NORTH, 'room 0');
    await Promise.all([next(first.client, 'frame'), next(second.client, 'frame')]);
    second.client.disconnect();
    collector.roomChanged(NORTH, 'room 1');
    await next(first.client, 'frame');
    expect((await welcomed('maker')).welcome.studios).toEqual([{ studioId: NORTH, seq: 2 }]);
    expect(second.frames.map(({ seq }) => seq)).toEqual([1]);
  });

  it('gives a notice to its person only', async () => {
    const maker = await welcomed('maker');
    const viewer = await welcomed('viewer');
    let strange = 0;
    viewer.client.on('notice', () => strange++);
    const notice = {
      id: 'n1',
      at: '2026-05-04T12:00:00Z',
      studioId: NORTH,
      alertId: null,
      text: 'Warm',
      read: false,
    };
    live.noticeWritten({ personId: 'person maker', notice });
    expect(await next(maker.client, 'notice')).toEqual(notice);
    collector.roomChanged(NORTH, 'room 0');
    await next(viewer.client, 'frame');
    expect(strange).toBe(0);
  });

  it('cuts every connection of a person whose role changed, at once', async () => {
    const one = await welcomed('maker');
    const two = await welcomed('maker');
    const other = await welcomed('viewer');
    const goodbyes = [next(one.client, 'goodbye'), next(two.client, 'goodbye')];
    live.personChanged({ personId: 'person maker', reason: 'role-changed', sessionId: null });
    expect(await Promise.all(goodbyes)).toEqual([{ reason: 'role-changed' }, { reason: 'role-changed' }]);
    await expect.poll(() => [one.client.connected, two.client.connected]).toEqual([false, false]);
    expect(other.client.connected).toBe(true);
  });

  it('cuts only the session that was ended', async () => {
    signIn('phone', { ...personWith('maker', { [NORTH]: 'maker' }), sessionId: 'session phone' });
    const desk = await welcomed('maker');
    const phone = await welcomed('phone');
    live.personChanged({ personId: 'person maker', reason: 'signed-out', sessionId: 'session phone' });
    expect(await next(phone.client, 'goodbye')).toEqual({ reason: 'signed-out' });
    expect(desk.client.connected).toBe(true);
  });

  it('cuts a connection whose person changed while it was being opened', async () => {
    const person = personWith('late', { [NORTH]: 'maker' });
    let letThrough = (_known: Known) => undefined as void;
    tokens.set('late', new Promise<Known>((resolve) => (letThrough = resolve)) as unknown as Known);
    const client = connectAs('late');
    const goodbye = next(client, 'goodbye');
    await once(http, 'upgrade');
    await expect.poll(() => client.io.engine.readyState).toBe('open');
    live.personChanged({ personId: person.id, reason: 'role-changed', sessionId: null });
    letThrough({ person, expiresAt: Date.now() + 60_000 });
    expect(await goodbye).toEqual({ reason: 'role-changed' });
  });

  it('cuts at expiry, unless a fresh token of the same session came before', async () => {
    signIn('short', personWith('short', { [NORTH]: 'maker' }), 250);
    const renewing = await welcomed('short');
    const lazy = await welcomed('short');
    signIn('fresh', personWith('short', { [NORTH]: 'maker' }), 60_000);
    expect(await renewing.client.emitWithAck('token', 'maker')).toBe(false);
    expect(await renewing.client.emitWithAck('token', 'nonsense')).toBe(false);
    expect(await renewing.client.emitWithAck('token', 'fresh')).toBe(true);
    expect(await next(lazy.client, 'goodbye')).toEqual({ reason: 'expired' });
    await expect.poll(() => lazy.client.connected).toBe(false);
    expect(renewing.client.connected).toBe(true);
  });

  it('closes a connection that floods and one that sends a large message', async () => {
    const flooding = await welcomed('maker');
    const gone = new Promise((resolve) => flooding.client.once('disconnect', resolve));
    for (let packet = 0; packet < 100; packet++) flooding.client.emit('resync', SOUTH, () => undefined);
    await gone;
    const large = await welcomed('maker');
    const closed = new Promise((resolve) => large.client.once('disconnect', resolve));
    large.client.emit('token', 'x'.repeat(20_000), () => undefined);
    await closed;
    expect(live.size).toBe(0);
  });

  it('tells pages the new speed of the demo', async () => {
    const { client } = await welcomed('viewer');
    speed = 60;
    expect((await next(client, 'welcome')).domainSpeed).toBe(60);
  });

  it('lets an owner into a studio that was just created', async () => {
    studios = [NORTH];
    const { client, frames } = await welcomed('owner');
    live.layoutChanged(SOUTH);
    const layout = next(client, 'layout');
    studios = [NORTH, SOUTH];
    expect(await layout).toEqual({ studioId: SOUTH });
    collector.roomChanged(SOUTH, 'room 9');
    await next(client, 'frame');
    expect(frames.map(({ studioId }) => studioId)).toEqual([SOUTH]);
  });

  it('drops one who does not read, and serves the others meanwhile', async () => {
    const stalled = await stalledClient('maker');
    const { client, frames } = await welcomed('maker');
    expect(live.size).toBe(2);
    source.curing.add('b1');
    source.padding = 'x'.repeat(200_000);
    let sent = 0;
    while (live.size > 1 && sent < 400) {
      collector.batchesChanged(NORTH, ['b1']);
      await next(client, 'frame');
      sent++;
    }
    expect(live.size).toBe(1);
    expect(client.connected).toBe(true);
    expect(frames.length).toBe(sent);
    stalled.destroy();
  });

  it('says goodbye when the gateway stops', async () => {
    const { client } = await welcomed('maker');
    const goodbye = next(client, 'goodbye');
    await live.stop();
    expect(await goodbye).toEqual({ reason: 'gateway-stopping' });
  });

  /** A client by hand: opens the WebSocket, signs in, and never reads again. */
  async function stalledClient(token: string) {
    const socket = connect({ port: (http.address() as AddressInfo).port, host: '127.0.0.1' });
    await once(socket, 'connect');
    socket.write(
      `GET /socket.io/?EIO=4&transport=websocket HTTP/1.1\r\nHost: 127.0.0.1\r\nUpgrade: websocket\r\nConnection: Upgrade\r\n` +
        `Sec-WebSocket-Key: ${Buffer.from('0123456789abcdef').toString('base64')}\r\nSec-WebSocket-Version: 13\r\n\r\n`,
    );
    await once(socket, 'data');
    socket.write(masked(`40${JSON.stringify({ token })}`));
    await expect.poll(() => live.size).toBe(1);
    socket.pause();
    return socket;
  }
});

/** A text frame as clients send it, RFC 6455 section 5.2, with a mask of zeros; up to 125 bytes. */
function masked(text: string): Buffer {
  const payload = Buffer.from(text);
  return Buffer.concat([Buffer.from([0x81, 0x80 | payload.length, 0, 0, 0, 0]), payload]);
}
