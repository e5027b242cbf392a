import type { Alert } from '#shared/contract/alerts';
import type { RoomNow, StudioWall } from '#shared/contract/overview';
import type { Rack } from '#shared/contract/racks';
import { may } from '#shared/contract/roles';
import type { Room } from '#shared/contract/rooms';
import type { Studio } from '#shared/contract/studios';
import type { Clock } from '../../clock.js';
import type { SignedInPerson } from '../../http/actor.js';
import type { Estimates } from '../estimates/estimates.js';
import type { RoomsNow } from './rooms-now.js';

export interface OverviewParts {
  /** The person's own studios with the role held in each, in the order in which they are shown. */
  readonly studios: { list(person: SignedInPerson): Promise<Studio[]> };
  readonly rooms: { list(studioId: string): Promise<Room[]> };
  readonly racks: { listAll(studioIds: readonly string[]): Promise<Rack[]> };
  /** Open, acknowledged and shelved alerts of studios. */
  readonly alerts: { openIn(studioIds: readonly string[]): Promise<Alert[]> };
  readonly estimates: Pick<Estimates, 'cardsOfStudio' | 'settled'>;
  readonly roomsNow: Pick<RoomsNow, 'of' | 'ribbons' | 'settled'>;
  readonly clock: Clock;
}

/** Everything the first screen needs in one answer. */
export class Overview {
  constructor(private readonly parts: OverviewParts) {}

  async walls(person: SignedInPerson): Promise<{ at: string; studios: StudioWall[] }> {
    const { studios: studiosOf, rooms: roomsOf, racks: racksOf, alerts: alertsOf } = this.parts;
    const studios = await studiosOf.list(person);
    const withAlerts = studios.filter(({ role }) => may(role, 'alerts.read')).map(({ id }) => id);
    const [rooms, racks, alerts] = await Promise.all([
      Promise.all(studios.map(({ id }) => roomsOf.list(id))),
      racksOf.listAll(studios.map(({ id }) => id)),
      withAlerts.length === 0 ? [] : alertsOf.openIn(withAlerts),
    ]);
    // A room that was added just now must already be known here.
    await Promise.all([this.parts.roomsNow.settled(), this.parts.estimates.settled()]);
    return {
      at: new Date(this.parts.clock.now()).toISOString(),
      studios: studios.map((studio, index) => ({
        studio,
        rooms: this.#roomWalls(rooms[index] ?? [], racks),
        batches: this.parts.estimates.cardsOfStudio(studio.id, !may(studio.role, 'batches.recipe')),
        alerts: alerts.filter((alert) => alert.studioId === studio.id),
      })),
    };
  }

  #roomWalls(rooms: readonly Room[], racks: readonly Rack[]): StudioWall['rooms'] {
    const ids = rooms.map(({ id }) => id);
    const now = new Map(this.parts.roomsNow.of(ids).map((room) => [room.roomId, room]));
    const ribbons = new Map(this.parts.roomsNow.ribbons(ids).map(({ roomId, ribbon }) => [roomId, ribbon]));
    const nothing = { from: new Date(this.parts.clock.now()).toISOString(), celsius: [] };
    return rooms.map(({ id, name, position, limits }) => ({
      ...{ id, name, position, limits },
      now: now.get(id) ?? neverHeard(id),
      ribbon: ribbons.get(id) ?? nothing,
      racks: racks.filter((rack) => rack.roomId === id),
    }));
  }
}

function neverHeard(roomId: string): RoomNow {
  return {
    roomId,
    ...{ celsius: null, humidity: null, dewPoint: null, at: null, stale: true, condition: 'never-heard' },
    ...{ since: null, heatLimit: null, peakToday: null, slippedHours: 0, battery: null },
  };
}
