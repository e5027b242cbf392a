import { z } from 'zod';
import type { RoomPush, RoomState } from './physics/room-model.js';
import { FAULTS, type FaultSince, measure, type SensorReading } from './physics/sensor-model.js';
import { type RoomAir, RoomRun } from './scenario/history.js';
import { DEMO_STUDIOS, type DemoRoom, type DemoSensor, type DemoStudio } from './scenario/places.js';

/** What a hand can do to a room at the desk. */
export const PUSHES = {
  warmer: { heat: 5, moisture: 0 },
  colder: { heat: -5, moisture: 0 },
  damp: { heat: 0, moisture: 0.004 },
  normal: { heat: 0, moisture: 0 },
} as const satisfies Record<string, RoomPush>;
export type PushName = keyof typeof PUSHES;

const state = z.object({
  celsius: z.number(),
  ratio: z.number(),
  heating: z.boolean(),
  cooling: z.boolean(),
});

/** The simulator's memory between two runs. */
export const keptFloor = z.object({
  rooms: z.record(z.string(), z.object({ state, at: z.number() })),
  pushes: z.record(z.string(), z.enum(['warmer', 'colder', 'damp', 'normal'])),
  faults: z.record(z.string(), z.object({ fault: z.enum(FAULTS), since: z.number() }).nullable()),
});
export type KeptFloor = z.infer<typeof keptFloor>;

const DAY_MS = 86_400_000;
const NOISE = 0.05;

interface RunningRoom {
  readonly studio: DemoStudio;
  readonly room: DemoRoom;
  readonly run: RoomRun;
  air: RoomAir;
}

/** All rooms of the demo on their way through time, with what hands at the desk do to them. */
export class SimulatedFloor {
  readonly #rooms = new Map<string, RunningRoom>();
  readonly #pushes = new Map<string, PushName>();
  readonly #faults = new Map<string, FaultSince | null>();

  /** @param story instant the story is told at  @param from first instant that will be asked for, epoch ms */
  constructor(story: number, from: number, kept: KeptFloor | null) {
    for (const studio of DEMO_STUDIOS) {
      for (const room of studio.rooms) {
        const run = new RoomRun(studio, room, from, story, keptRoom(kept, room.key, from));
        this.#rooms.set(room.key, { studio, room, run, air: run.airAt(from) });
        for (const sensor of room.sensors) this.#faults.set(sensor.deviceId, storyFault(sensor, story));
      }
    }
    for (const [key, push] of Object.entries(kept?.pushes ?? {})) this.#pushes.set(key, push);
    for (const [device, fault] of Object.entries(kept?.faults ?? {})) this.#faults.set(device, fault);
  }

  /** Readings of every sensor at instants that only move on; sensors that are silent are left out. */
  readingsAt(instants: readonly number[]): Map<string, SensorReading[]> {
    const readings = new Map<string, SensorReading[]>();
    for (const running of this.#rooms.values()) {
      const push = this.#pushes.get(running.room.key);
      for (const at of instants) {
        running.air = running.run.airAt(at, push === undefined ? null : PUSHES[push]);
        for (const sensor of running.room.sensors) {
          const fault = this.#faults.get(sensor.deviceId) ?? null;
          const reading = measure({ ...sensor, noise: NOISE }, running.air, at, fault);
          if (reading === null) continue;
          const so = readings.get(sensor.deviceId);
          if (so) so.push(reading);
          else readings.set(sensor.deviceId, [reading]);
        }
      }
    }
    return readings;
  }

  /** @returns false for a room that does not exist */
  push(room: string, name: PushName): boolean {
    if (!this.#rooms.has(room)) return false;
    this.#pushes.set(room, name);
    return true;
  }

  /** @returns false for a sensor that does not exist */
  setFault(deviceId: string, fault: FaultSince | null): boolean {
    if (!this.#faults.has(deviceId)) return false;
    this.#faults.set(deviceId, fault);
    return true;
  }

  /** Rooms as the desk shows them. */
  view() {
    return [...this.#rooms.values()].map(({ studio, room, air }) => ({
      key: room.key,
      name: room.name,
      studio: studio.name,
      celsius: air.celsius,
      humidity: air.humidity,
      push: this.#pushes.get(room.key) ?? 'story',
      sensors: room.sensors.map(({ deviceId, name }) => ({
        deviceId,
        name,
        fault: this.#faults.get(deviceId)?.fault ?? null,
      })),
    }));
  }

  get kept(): KeptFloor {
    const rooms: Record<string, { state: RoomState; at: number }> = {};
    for (const [key, { run }] of this.#rooms) rooms[key] = run.kept;
    return {
      rooms,
      pushes: Object.fromEntries(this.#pushes),
      faults: Object.fromEntries(this.#faults),
    };
  }
}

/** A kept state is only good for the instants after it. */
function keptRoom(kept: KeptFloor | null, key: string, from: number) {
  const room = kept?.rooms[key];
  return room !== undefined && room.at <= from ? room : null;
}

function storyFault({ fault }: DemoSensor, story: number): FaultSince | null {
  return fault === null ? null : { fault: fault.fault, since: story - fault.daysAgo * DAY_MS };
}
