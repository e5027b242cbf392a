import type { DemoScenario } from '#shared/contract/demo-scenario';
import { measure, payloadOf, type SensorReading } from '../physics/sensor-model.js';
import { demoBatches, rackKey } from './batches.js';
import { DEMO_DESIGNS, DEMO_FRAGRANCES, DEMO_PEOPLE, DEMO_WAXES } from './goods.js';
import { RoomRun } from './history.js';
import { DEMO_INTERVAL_SECONDS, DEMO_STUDIOS } from './places.js';

const DAY_MS = 86_400_000;
const HISTORY_DAYS = 90;
/** Readings of the past: every ten minutes, of the last two days every two. */
const COARSE_MS = 600_000;
const FINE_MS = 120_000;
const FINE_DAYS = 2;
const READINGS_A_PAYLOAD = 60;
const SEED = 20_260_504;

/** The demo's story, the same for the same instant. */
export function demoScenarioAt(now: number): DemoScenario {
  return {
    now: new Date(now).toISOString(),
    people: DEMO_PEOPLE,
    studios: DEMO_STUDIOS.map((studio) => ({
      key: studio.key,
      name: studio.name,
      timeZone: studio.timeZone,
      unit: studio.unit,
      address: studio.address,
      pressureHpa: studio.pressureHpa,
      quietFrom: studio.key === 'barn' ? 22 * 60 : null,
      quietTo: studio.key === 'barn' ? 6 * 60 : null,
      recipients: studio.key === 'quay' ? ['ines'] : ['joonas'],
      rooms: studio.rooms.map((room) => ({
        key: room.key,
        name: room.name,
        limits: room.limits,
        notes: room.notes,
        racks: Array.from({ length: room.racks }, (_, index) => ({
          key: rackKey(room.key, index),
          name: `Rack ${index + 1}`,
          shelves: [...room.shelves],
        })),
        sensors: room.sensors.map(({ deviceId, name, offsetCelsius }) => ({
          deviceId,
          name,
          offsetCelsius,
          intervalSeconds: DEMO_INTERVAL_SECONDS,
        })),
      })),
    })),
    waxes: DEMO_WAXES,
    fragrances: DEMO_FRAGRANCES,
    designs: DEMO_DESIGNS,
    batches: demoBatches(SEED, now),
  };
}

/** Payloads of every demo sensor over the ninety days before now, oldest first. */
export function* demoPast(now: number): Generator<{ device: string; payloads: string[] }> {
  const from = now - HISTORY_DAYS * DAY_MS;
  for (const studio of DEMO_STUDIOS) {
    for (const room of studio.rooms) {
      const run = new RoomRun(studio, room, from, now);
      const readings = new Map<string, SensorReading[]>(room.sensors.map(({ deviceId }) => [deviceId, []]));
      for (let at = Math.ceil(from / COARSE_MS) * COARSE_MS; at <= now;) {
        const air = run.airAt(at);
        for (const sensor of room.sensors) {
          const began = sensor.fault === null ? Infinity : now - sensor.fault.daysAgo * DAY_MS;
          const fault =
            sensor.fault !== null && at >= began ? { fault: sensor.fault.fault, since: began } : null;
          const reading = measure({ ...sensor, noise: 0.05 }, air, at, fault);
          if (reading) readings.get(sensor.deviceId)?.push(reading);
        }
        at += at >= now - FINE_DAYS * DAY_MS ? FINE_MS : COARSE_MS;
      }
      for (const [device, all] of readings) {
        const payloads: string[] = [];
        for (let index = 0; index < all.length; index += READINGS_A_PAYLOAD) {
          payloads.push(payloadOf(all.slice(index, index + READINGS_A_PAYLOAD)));
        }
        yield { device, payloads };
      }
    }
  }
}
