import { studioRoutes } from '#shared/contract/studios';
import { type Mounted, mount } from '../../http/mount.js';
import type { Studios } from './studios.js';

export function mountStudios(studios: Studios): Mounted[] {
  return [
    mount(studioRoutes.list, ({ person }) => studios.list(person())),
    mount(studioRoutes.create, ({ body, actor }) => studios.create(body, actor())),
    mount(studioRoutes.change, ({ params, body, actor }) => studios.change(params.studioId, body, actor())),
  ];
}
