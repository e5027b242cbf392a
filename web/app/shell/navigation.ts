import type { Permission } from '#shared/contract/roles';
import type { IconName } from '../ui/icon-paths';

export interface NavigationItem {
  readonly path: string;
  readonly label: string;
  readonly icon: IconName;
  /** Needed in at least one studio; null: everybody. */
  readonly permission: Permission | null;
}

/** Pages in the order of the rail; the first four that a person may see stand on the phone's bar. */
export const NAVIGATION: readonly NavigationItem[] = [
  { path: '/', label: 'Rooms', icon: 'rooms', permission: null },
  { path: '/racks', label: 'Racks', icon: 'racks', permission: null },
  { path: '/batches', label: 'Batches', icon: 'batches', permission: null },
  { path: '/alerts', label: 'Alerts', icon: 'alerts', permission: 'alerts.read' },
  { path: '/pour', label: 'Pour', icon: 'pour', permission: 'batches.pour' },
  { path: '/materials', label: 'Materials', icon: 'materials', permission: 'materials.read' },
  { path: '/compare', label: 'Compare', icon: 'compare', permission: 'compare.read' },
  { path: '/settings', label: 'Settings', icon: 'settings', permission: null },
];

/** Whether a page of the navigation is the one shown; a room's page belongs to Rooms. */
export function isCurrent(path: string, url: string): boolean {
  const shown = url.split(/[?#]/)[0] ?? '';
  if (path === '/') return shown === '/' || shown === '' || shown.startsWith('/rooms/');
  return shown === path || shown.startsWith(`${path}/`);
}
