import { compareRoutes } from '#shared/contract/compare';
import { type Mounted, mount } from '../../http/mount.js';
import type { Compare } from './compare.js';

export function mountCompare(compare: Compare): Mounted[] {
  return [mount(compareRoutes.compare, ({ person, query }) => compare.compare(person(), query))];
}
