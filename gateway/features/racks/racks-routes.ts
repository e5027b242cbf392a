import { rackRoutes } from '#shared/contract/racks';
import { type Mounted, mount } from '../../http/mount.js';
import type { Racks } from './racks.js';

export function mountRacks(racks: Racks): Mounted[] {
  return [
    mount(rackRoutes.list, ({ params }) => racks.list(params.studioId)),
    mount(rackRoutes.create, ({ params, body, actor }) =>
      racks.create(params.studioId, params.roomId, body, actor()),
    ),
    mount(rackRoutes.change, ({ params, body, actor }) =>
      racks.change(params.studioId, params.rackId, body, actor()),
    ),
    mount(rackRoutes.remove, async ({ params, actor }) => {
      await racks.remove(params.studioId, params.rackId, actor());
      return null;
    }),
  ];
}
