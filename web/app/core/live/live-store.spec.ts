import { TestBed } from '@angular/core/testing';
import type { LiveFrame, LiveWelcome } from '#shared/contract/live';
import type { StudioWall } from '#shared/contract/overview';
import { aBatch, aRack, aRoomNow, ROOM_ID, someLimits, STUDIO_ID } from '#shared/words/test-floor';
import { Api } from '../api/api';
import { ApiError } from '../api/api-error';
import { Session } from '../session/session';
import { type LiveSocket, OPEN_LIVE_SOCKET } from './live-socket';
import { LiveStore } from './live-store';

type Handler = (...values: never[]) => void;

/** A socket whose other end is the test. */
class FakeSocket {
  connected = false;
  active = true;
  connects = 0;
  readonly sent: { event: string; values: unknown[] }[] = [];
  private readonly handlers = new Map<string, Handler>();

  on(event: string, handler: Handler): void {
    this.handlers.set(event, handler);
  }
  removeAllListeners(): void {
    this.handlers.clear();
  }
  connect(): void {
    this.connects++;
    this.connected = true;
  }
  disconnect(): void {
    this.connected = false;
  }
  emit(event: string, ...values: unknown[]): void {
    this.sent.push({ event, values });
  }
  hear(event: string, ...values: unknown[]): void {
    this.handlers.get(event)?.(...(values as never[]));
  }
}

const AT = '2026-05-04T14:42:00.000Z';

function aWall(over: Partial<StudioWall> = {}): StudioWall {
  return {
    studio: {
      id: STUDIO_ID,
      name: 'Quay Street',
      timeZone: 'Europe/Lisbon',
      unit: 'C',
      address: 'Pier 4',
      pressureHpa: 1009,
      quietFrom: null,
      quietTo: 420,
      recipients: [],
      escalateAfterMinutes: 30,
      version: 5,
      role: 'lead',
    },
    rooms: [
      {
        id: ROOM_ID,
        name: 'Loft',
        position: 1,
        limits: someLimits(),
        now: aRoomNow(),
        ribbon: { from: '2026-05-03T14:40:00.000Z', celsius: [20, 21] },
        racks: [aRack(1)],
      },
    ],
    batches: [aBatch(1)],
    alerts: [],
    ...over,
  };
}

function aFrame(seq: number, over: Partial<LiveFrame> = {}): LiveFrame {
  return {
    studioId: STUDIO_ID,
    seq,
    at: AT,
    rooms: [],
    ribbons: [],
    batches: [],
    goneBatches: [],
    alerts: [],
    ...over,
  };
}

const welcome = (seq: number): LiveWelcome => ({
  at: AT,
  studios: [{ studioId: STUDIO_ID, seq }],
  domainSpeed: 1,
});

describe('the live store', () => {
  let socket: FakeSocket;
  let store: LiveStore;
  let wall: StudioWall;
  let overview: () => Promise<unknown>;
  let asked: number;

  const room = () => store.room(ROOM_ID)?.room;
  const settle = () => new Promise((resolve) => setTimeout(resolve));
  const started = async (seq = 7) => {
    await store.start();
    socket.hear('welcome', welcome(seq));
    await settle();
    asked = 0;
  };

  beforeEach(() => {
    localStorage.clear();
    socket = new FakeSocket();
    wall = aWall();
    asked = 0;
    overview = () => Promise.resolve({ at: AT, studios: [wall] });
    TestBed.configureTestingModule({
      providers: [
        {
          provide: Api,
          useValue: {
            call: (_method: string, path: string) => {
              if (path !== '/api/overview') return Promise.resolve([]);
              asked++;
              return overview();
            },
          },
        },
        { provide: OPEN_LIVE_SOCKET, useValue: () => Promise.resolve(socket as unknown as LiveSocket) },
      ],
    });
    store = TestBed.inject(LiveStore);
  });

  afterEach(() => store.stop());

  it('shows the overview before the connection stands, and loads it again once it does', async () => {
    await store.start();
    await settle();
    expect(store.loaded()).toBe(true);
    expect(room()?.info().name).toBe('Loft');
    expect(store.connection().state).toBe('connecting');
    expect(asked).toBe(1);
    socket.hear('welcome', welcome(7));
    await settle();
    expect(store.connection().state).toBe('live');
    expect(asked).toBe(2);
  });

  it('lays a frame over the rooms it names and leaves the rest untouched', async () => {
    wall = aWall({
      rooms: [...aWall().rooms, { ...aWall().rooms[0]!, id: 'other', name: 'Cellar', position: 2 }],
    });
    await started();
    const other = store.room('other')?.room;
    const before = other?.now();
    socket.hear('frame', aFrame(8, { rooms: [aRoomNow({ celsius: 26.1, condition: 'heat' })] }));
    expect(room()?.now().celsius).toBe(26.1);
    expect(other?.now()).toBe(before);
    expect(asked).toBe(0);
  });

  it('moves a batch from one room to another and lets it go', async () => {
    await started();
    expect(
      room()
        ?.batches()
        .map((batch) => batch.code),
    ).toEqual(['L-101']);
    socket.hear('frame', aFrame(8, { batches: [aBatch(1, { roomId: null, rackId: null, shelfId: null })] }));
    expect(room()?.batches()).toEqual([]);
    expect(store.studio(STUDIO_ID)?.unplaced()).toHaveLength(1);
    socket.hear('frame', aFrame(9, { goneBatches: [aBatch(1).id] }));
    expect(store.studio(STUDIO_ID)?.batches()).toEqual([]);
  });

  it('ignores a frame it has already seen', async () => {
    await started();
    socket.hear('frame', aFrame(7, { rooms: [aRoomNow({ celsius: 99 })] }));
    expect(room()?.now().celsius).toBe(20.4);
  });

  it('asks for a resync after a hole in the numbers and loads the overview again', async () => {
    await started();
    socket.hear('frame', aFrame(10));
    const resync = socket.sent.find((sent) => sent.event === 'resync');
    expect(resync?.values[0]).toBe(STUDIO_ID);
    (resync?.values[1] as (answer: LiveWelcome) => void)(welcome(10));
    await settle();
    expect(asked).toBe(1);
    socket.hear('frame', aFrame(11, { rooms: [aRoomNow({ celsius: 23 })] }));
    expect(room()?.now().celsius).toBe(23);
    expect(socket.sent.filter((sent) => sent.event === 'resync')).toHaveLength(1);
  });

  it('lays frames that came during a load over what was loaded', async () => {
    await started();
    let answer: (value: unknown) => void = () => undefined;
    overview = () => new Promise((resolve) => (answer = resolve));
    const loading = store.reload();
    socket.hear('frame', aFrame(8, { rooms: [aRoomNow({ celsius: 24.4 })] }));
    expect(room()?.now().celsius).toBe(20.4);
    answer({ at: AT, studios: [wall] });
    await loading;
    expect(room()?.now().celsius).toBe(24.4);
  });

  it('keeps the objects of rooms over a reload, so that nothing is drawn anew', async () => {
    await started();
    const before = room();
    await store.reload();
    expect(room()).toBe(before);
  });

  it('says that the connection is lost and recovers with a fresh overview', async () => {
    await started();
    socket.hear('disconnect', 'transport close');
    expect(store.connection().state).toBe('lost');
    expect(document.body.textContent).toContain('The connection is lost.');
    socket.hear('welcome', welcome(30));
    await settle();
    expect(store.connection().state).toBe('live');
    expect(asked).toBe(1);
    socket.hear('frame', aFrame(31, { rooms: [aRoomNow({ celsius: 19.9 })] }));
    expect(room()?.now().celsius).toBe(19.9);
  });

  it('comes back by itself when the gateway closed the connection', async () => {
    const session = TestBed.inject(Session);
    vi.spyOn(session, 'signedIn').mockReturnValue(true);
    await started();
    vi.useFakeTimers();
    socket.hear('disconnect', 'io server disconnect');
    vi.advanceTimersByTime(1000);
    vi.useRealTimers();
    expect(socket.connects).toBe(2);
  });

  it('ends the session when it was signed out elsewhere', async () => {
    const end = vi.spyOn(TestBed.inject(Session), 'end');
    await started();
    socket.hear('goodbye', { reason: 'signed-out' });
    expect(end).toHaveBeenCalledWith('signed-out');
  });

  it('drops cleared alerts and keeps the others in order', async () => {
    const alert = { id: 'a', raisedAt: '2026-05-04T12:00:00.000Z', state: 'open' } as never;
    const later = { id: 'b', raisedAt: '2026-05-04T13:00:00.000Z', state: 'returned' } as never;
    await started();
    socket.hear('frame', aFrame(8, { alerts: [later, alert] }));
    const ids = () =>
      store
        .studio(STUDIO_ID)
        ?.alerts()
        .map((one) => one.id);
    expect(ids()).toEqual(['a', 'b']);
    socket.hear('frame', aFrame(9, { alerts: [{ ...(alert as object), state: 'cleared' } as never] }));
    expect(ids()).toEqual(['b']);
  });

  it('tells why an overview could not be loaded and tries again when asked', async () => {
    overview = () => Promise.reject(new ApiError(0, null));
    await store.start();
    await settle();
    expect(store.fault()).toContain('cannot be reached');
    expect(store.loaded()).toBe(false);
    overview = () => Promise.resolve({ at: AT, studios: [wall] });
    await store.reload();
    expect(store.fault()).toBeNull();
    expect(store.loaded()).toBe(true);
  });

  it('forgets everything when it stops', async () => {
    await started();
    store.stop();
    expect(store.studios()).toEqual([]);
    expect(socket.connected).toBe(false);
  });
});
