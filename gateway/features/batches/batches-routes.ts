import { batchRoutes } from '#shared/contract/batches';
import { type Mounted, mount } from '../../http/mount.js';
import type { Batches } from './batches.js';

export function mountBatches(batches: Batches): Mounted[] {
  return [
    mount(batchRoutes.list, ({ params, query, actor }) => batches.list(params.studioId, query, actor().role)),
    mount(batchRoutes.pour, ({ params, body, actor }) => batches.pour(params.studioId, body, actor())),
    mount(batchRoutes.get, ({ params, query, actor }) =>
      batches.get(params.studioId, params.batchId, query.at, actor().role),
    ),
    mount(batchRoutes.curve, ({ params }) => batches.curve(params.studioId, params.batchId)),
    mount(batchRoutes.move, ({ params, body, actor }) =>
      batches.move(params.studioId, params.batchId, body, actor()),
    ),
    mount(batchRoutes.end, ({ params, body, actor }) =>
      batches.end(params.studioId, params.batchId, body, actor()),
    ),
    mount(batchRoutes.recordTest, ({ params, body, actor }) =>
      batches.recordTest(params.studioId, params.batchId, body, actor()),
    ),
  ];
}
