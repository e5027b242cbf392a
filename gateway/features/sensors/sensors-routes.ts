import { sensorRoutes } from '#shared/contract/sensors';
import { type Mounted, mount } from '../../http/mount.js';
import type { Sensors } from './sensors.js';

export function mountSensors(sensors: Sensors): Mounted[] {
  return [
    mount(sensorRoutes.list, ({ params }) => sensors.list(params.studioId)),
    mount(sensorRoutes.enrol, ({ params, body, actor }) => sensors.enrol(params.studioId, body, actor())),
    mount(sensorRoutes.change, ({ params, body, actor }) =>
      sensors.change(params.studioId, params.sensorId, body, actor()),
    ),
    mount(sensorRoutes.newSecret, ({ params, actor }) =>
      sensors.newSecret(params.studioId, params.sensorId, actor()),
    ),
    mount(sensorRoutes.retire, async ({ params, actor }) => {
      await sensors.retire(params.studioId, params.sensorId, actor());
      return null;
    }),
    mount(sensorRoutes.quarantine, ({ params, query }) => sensors.quarantine(params.studioId, query.limit)),
  ];
}
