import { alertRoutes } from '#shared/contract/alerts';
import { auditRoutes } from '#shared/contract/audit';
import { batchRoutes } from '#shared/contract/batches';
import { compareRoutes } from '#shared/contract/compare';
import { materialRoutes } from '#shared/contract/materials';
import { overviewRoutes } from '#shared/contract/overview';
import { peopleRoutes } from '#shared/contract/people';
import { rackRoutes } from '#shared/contract/racks';
import { roomRoutes } from '#shared/contract/rooms';
import type { RouteDefinition } from '#shared/contract/route';
import { sensorRoutes } from '#shared/contract/sensors';
import { sessionRoutes } from '#shared/contract/session';
import { studioRoutes } from '#shared/contract/studios';

const FEATURES = {
  session: sessionRoutes,
  people: peopleRoutes,
  studios: studioRoutes,
  rooms: roomRoutes,
  racks: rackRoutes,
  sensors: sensorRoutes,
  materials: materialRoutes,
  batches: batchRoutes,
  alerts: alertRoutes,
  overview: overviewRoutes,
  compare: compareRoutes,
  audit: auditRoutes,
};

/** Every route of the product with its name; the access test and the API description walk this list. */
export const ALL_ROUTES: readonly { readonly name: string; readonly route: RouteDefinition }[] =
  Object.entries(FEATURES).flatMap(([feature, routes]) =>
    Object.entries(routes).map(([name, route]) => ({
      name: `${feature}.${name}`,
      route: route as RouteDefinition,
    })),
  );
