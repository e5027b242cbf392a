import { humidityRatio } from '#shared/air/moist-air';
import { humidityOf, type RoomPush, type RoomState, settledRoom, stepRoom } from '../physics/room-model.js';
import { outsideCelsius, outsideHumidity, type Spell } from '../physics/weather.js';
import { DEMO_SPELLS, DEMO_STUCK_HEAT, type DemoRoom, type DemoStudio } from './places.js';

const DAY_MS = 86_400_000;
const HOUR_MS = 3_600_000;
/** Rooms are stepped on a fixed grid, so that the same instants always give the same air. */
export const PHYSICS_STEP_MS = 60_000;
/** Runs before anything is recorded, for the room to forget where it started. */
const SETTLING_MS = 4 * DAY_MS;

/** The air of a room at an instant. */
export interface RoomAir {
  readonly celsius: number;
  readonly humidity: number;
}

/** Spells of a studio's weather relative to the instant the story is told at. */
export function spellsOf(studio: DemoStudio, now: number): Spell[] {
  const known: Readonly<
    Record<string, readonly { fromDaysAgo: number; toDaysAgo: number; warmer: number }[]>
  > = DEMO_SPELLS;
  return (known[studio.key] ?? []).map(({ fromDaysAgo, toDaysAgo, warmer }) => ({
    from: now - fromDaysAgo * DAY_MS,
    to: now - toDaysAgo * DAY_MS,
    warmer,
  }));
}

/** What outside hand is on a room by the story. */
export function storyPush(room: DemoRoom, at: number, now: number): RoomPush {
  const { room: key, hoursAgo, endsInHours } = DEMO_STUCK_HEAT;
  const stuck = room.key === key && at >= now - hoursAgo * HOUR_MS && at < now + endsInHours * HOUR_MS;
  return { heat: stuck ? DEMO_STUCK_HEAT.heat : 0, moisture: 0 };
}

/** Outside air of a studio. */
export function outsideOf(studio: DemoStudio, at: number, spells: readonly Spell[]): RoomAir {
  return {
    celsius: outsideCelsius(studio.climate, at, spells),
    humidity: outsideHumidity(studio.climate, at),
  };
}

/** A room on its way through time, step by step; asked for its air at instants that only move on. */
export class RoomRun {
  #state: RoomState;
  #at: number;
  readonly #spells: readonly Spell[];

  /** @param from first instant that will be asked for, epoch ms  @param now the instant the story is told at */
  constructor(
    private readonly studio: DemoStudio,
    private readonly room: DemoRoom,
    from: number,
    private readonly now: number,
    kept: { readonly state: RoomState; readonly at: number } | null = null,
  ) {
    this.#spells = spellsOf(studio, now);
    const start = Math.floor((from - SETTLING_MS) / PHYSICS_STEP_MS) * PHYSICS_STEP_MS;
    const outside = outsideOf(studio, start, this.#spells);
    this.#at = kept?.at ?? start;
    this.#state =
      kept?.state ??
      settledRoom(room.build, outside.celsius, humidityRatio(outside.celsius, outside.humidity));
  }

  /** What a later run can carry on from. */
  get kept(): { state: RoomState; at: number } {
    return { state: this.#state, at: this.#at };
  }

  /** Air at an instant at or after the last one asked for. @param push what is done to the room instead of the story's own */
  airAt(at: number, push: RoomPush | null = null): RoomAir {
    while (this.#at + PHYSICS_STEP_MS <= at) {
      this.#state = stepRoom(
        this.room.build,
        this.#state,
        this.#at,
        PHYSICS_STEP_MS,
        outsideOf(this.studio, this.#at, this.#spells),
        push ?? storyPush(this.room, this.#at, this.now),
      );
      this.#at += PHYSICS_STEP_MS;
    }
    return { celsius: this.#state.celsius, humidity: humidityOf(this.#state) };
  }
}
