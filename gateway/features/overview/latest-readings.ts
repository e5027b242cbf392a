import type { CommittedReading } from '../../announcements.js';
import { staleAfterMs, type RoomAir } from './room-condition.js';
import type { LatestReadingsRepository, LiveSensor, NewestReading } from './latest-readings-repository.js';

/** The air of a room by its newest readings. */
export interface LatestAir extends RoomAir {
  /** Time of the newest reading, epoch ms. */
  readonly at: number;
}

/** The newest reading of every trusted sensor in service, kept from what is committed. */
export class LatestReadings {
  #sensors = new Map<number, LiveSensor>();
  #inRoom = new Map<string, LiveSensor[]>();
  readonly #newest = new Map<number, NewestReading>();
  readonly #battery = new Map<number, number>();

  constructor(private readonly repository: LatestReadingsRepository) {}

  /** Reads the sensors again, and the newest readings of those not known so far. Returns the rooms whose sensors changed. */
  async load(): Promise<Set<string>> {
    const sensors = await this.repository.sensors();
    const fresh = sensors.map(({ no }) => no).filter((no) => !this.#newest.has(no));
    for (const reading of await this.repository.newest(fresh)) this.#keep(reading);
    const before = this.#inRoom;
    this.#sensors = new Map(sensors.map((sensor) => [sensor.no, sensor]));
    this.#inRoom = new Map();
    for (const sensor of sensors) {
      this.#inRoom.set(sensor.roomId, [...(this.#inRoom.get(sensor.roomId) ?? []), sensor]);
      if (sensor.battery !== null && !this.#battery.has(sensor.no))
        this.#battery.set(sensor.no, sensor.battery);
    }
    const rooms = new Set([...before.keys(), ...this.#inRoom.keys()]);
    return new Set([...rooms].filter((id) => signature(before.get(id)) !== signature(this.#inRoom.get(id))));
  }

  /** Takes committed readings; returns those of trusted sensors with their offset applied. Times ahead of ours never count. */
  take(readings: readonly CommittedReading[]): { roomId: string; at: number; celsius: number }[] {
    const counted: { roomId: string; at: number; celsius: number }[] = [];
    for (const { sensorNo, at, celsius, humidity, battery, future } of readings) {
      if (future) continue;
      if (battery !== null) this.#battery.set(sensorNo, battery);
      this.#keep({ sensorNo, at, celsius, humidity });
      const sensor = this.#sensors.get(sensorNo);
      if (sensor) counted.push({ roomId: sensor.roomId, at, celsius: celsius + sensor.offsetCelsius });
    }
    return counted;
  }

  /** Mean over the room's sensors that are heard; when none is, the last value known, marked stale. Null: never heard. */
  air(roomId: string, now: number): LatestAir | null {
    const heard = (this.#inRoom.get(roomId) ?? []).flatMap((sensor) => {
      const newest = this.#newest.get(sensor.no);
      return newest ? [{ sensor, newest }] : [];
    });
    if (heard.length === 0) return null;
    const at = Math.max(...heard.map(({ newest }) => newest.at));
    const fresh = heard.filter(
      ({ sensor, newest }) => now - newest.at <= staleAfterMs(sensor.intervalSeconds),
    );
    const stale = fresh.length === 0;
    const counted = stale ? heard.filter(({ newest }) => newest.at === at) : fresh;
    const humidities = counted.flatMap(({ sensor, newest }) =>
      newest.humidity === null ? [] : [Math.min(100, Math.max(0, newest.humidity + sensor.offsetHumidity))],
    );
    return {
      celsius: mean(counted.map(({ sensor, newest }) => newest.celsius + sensor.offsetCelsius)),
      humidity: humidities.length === 0 ? null : mean(humidities),
      at,
      stale,
    };
  }

  /** Highest temperature of rooms from a time on by what is rolled up, offsets applied. */
  async peaks(roomIds: readonly string[], from: number): Promise<Map<string, number>> {
    const sensors = roomIds.flatMap((roomId) => this.#inRoom.get(roomId) ?? []);
    const measured = await this.repository.peaks(
      sensors.map(({ no }) => no),
      from,
    );
    const peaks = new Map<string, number>();
    for (const { no, roomId, offsetCelsius } of sensors) {
      const peak = measured.get(no);
      if (peak !== undefined)
        peaks.set(roomId, Math.max(peak + offsetCelsius, peaks.get(roomId) ?? -Infinity));
    }
    return peaks;
  }

  /** Lowest battery of the room's sensors, %; null when none tells. */
  battery(roomId: string): number | null {
    const levels = (this.#inRoom.get(roomId) ?? []).flatMap(({ no }) => this.#battery.get(no) ?? []);
    return levels.length === 0 ? null : Math.min(...levels);
  }

  #keep(reading: NewestReading): void {
    const known = this.#newest.get(reading.sensorNo);
    if (!known || reading.at >= known.at) this.#newest.set(reading.sensorNo, reading);
  }
}

function signature(sensors: readonly LiveSensor[] | undefined): string {
  return JSON.stringify((sensors ?? []).map(({ no, offsetCelsius }) => [no, offsetCelsius]));
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
