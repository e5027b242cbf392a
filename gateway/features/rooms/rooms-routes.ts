import { roomRoutes } from '#shared/contract/rooms';
import { type Mounted, mount } from '../../http/mount.js';
import type { RoomSeries } from './room-series.js';
import type { Rooms } from './rooms.js';

export function mountRooms(rooms: Rooms, series: RoomSeries): Mounted[] {
  return [
    mount(roomRoutes.list, ({ params }) => rooms.list(params.studioId)),
    mount(roomRoutes.create, ({ params, body, actor }) => rooms.create(params.studioId, body, actor())),
    mount(roomRoutes.change, ({ params, body, actor }) =>
      rooms.change(params.studioId, params.roomId, body, actor()),
    ),
    mount(roomRoutes.remove, async ({ params, actor }) => {
      await rooms.remove(params.studioId, params.roomId, actor());
      return null;
    }),
    mount(roomRoutes.series, ({ params, query, actor }) =>
      series.series(params.studioId, params.roomId, query, actor().role),
    ),
    mount(roomRoutes.measures, ({ params, query }) => series.measures(params.studioId, params.roomId, query)),
  ];
}
