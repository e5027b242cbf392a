import { materialRoutes } from '#shared/contract/materials';
import { type Mounted, mount } from '../../http/mount.js';
import type { Materials } from './materials.js';

export function mountMaterials(materials: Materials): Mounted[] {
  return [
    mount(materialRoutes.waxes, () => materials.waxes()),
    mount(materialRoutes.createWax, ({ body, actor }) => materials.createWax(body, actor())),
    mount(materialRoutes.changeWax, ({ params, body, actor }) =>
      materials.changeWax(params.waxId, body, actor()),
    ),
    mount(materialRoutes.fragrances, () => materials.fragrances()),
    mount(materialRoutes.createFragrance, ({ body, actor }) => materials.createFragrance(body, actor())),
    mount(materialRoutes.designs, () => materials.designs()),
    mount(materialRoutes.createDesign, ({ body, actor }) => materials.createDesign(body, actor())),
  ];
}
