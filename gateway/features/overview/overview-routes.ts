import { overviewRoutes } from '#shared/contract/overview';
import { type Mounted, mount } from '../../http/mount.js';
import type { Overview } from './overview.js';

export function mountOverview(overview: Overview): Mounted[] {
  return [mount(overviewRoutes.walls, ({ person }) => overview.walls(person()))];
}
