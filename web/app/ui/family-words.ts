import type { Wax } from '#shared/contract/materials';

/** Wax families as the trade says them. */
export const FAMILY_WORDS: Readonly<Record<Wax['family'], string>> = {
  'soy-container': 'soy, container',
  'soy-pillar': 'soy, pillar',
  'paraffin-container': 'paraffin, container',
  'paraffin-pillar': 'paraffin, pillar',
  parasoy: 'parasoy',
  coconut: 'coconut blend',
  palm: 'palm',
  beeswax: 'beeswax',
  rapeseed: 'rapeseed, container',
};
