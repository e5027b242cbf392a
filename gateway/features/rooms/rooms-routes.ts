import { roomRoutes } from '#shared/contract/rooms';
import { type Mounted, mount } from '../../http/mount.js';
import type { Rooms } from './rooms.js';

export function mountRooms(rooms: Rooms): Mounted[] {
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
  ];
}
