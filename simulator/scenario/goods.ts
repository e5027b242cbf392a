import type { DemoScenario } from '#shared/contract/demo-scenario';

/** Five wax families, invented names. */
export const DEMO_WAXES: DemoScenario['waxes'] = [
  { key: 'soy', name: 'Meadow soy', family: 'soy-container' },
  { key: 'rapeseed', name: 'Yellowfield rapeseed', family: 'rapeseed' },
  { key: 'parasoy', name: 'Meadow blend', family: 'parasoy' },
  { key: 'coconut', name: 'Lagoon coconut', family: 'coconut' },
  { key: 'paraffin', name: 'Harbour paraffin', family: 'paraffin-container' },
];

export const DEMO_FRAGRANCES: DemoScenario['fragrances'] = [
  { key: 'fig', name: 'Fig Leaf', flashPoint: 92, certificateMaxLoad: 9.5 },
  { key: 'cedar', name: 'Cedar Hall', flashPoint: 98, certificateMaxLoad: 11 },
  { key: 'salt', name: 'Salt and Sage', flashPoint: 78, certificateMaxLoad: 8 },
  { key: 'orange', name: 'Orange Peel', flashPoint: 61, certificateMaxLoad: 7 },
  { key: 'clove', name: 'Clove Tree', flashPoint: 104, certificateMaxLoad: 6 },
  { key: 'rain', name: 'Rain on Slate', flashPoint: 88, certificateMaxLoad: 10 },
];

const jar = { vessel: 'Straight jar 75 mm', vesselDiameterMm: 75, fillGrams: 220 };
const tin = { vessel: 'Tin 77 mm', vesselDiameterMm: 77, fillGrams: 160 };
const bowl = { vessel: 'Bowl 95 mm', vesselDiameterMm: 95, fillGrams: 380 };

/** Eleven designs. */
export const DEMO_DESIGNS: DemoScenario['designs'] = [
  {
    key: 'fig-75',
    name: 'Fig Leaf in 75 mm',
    wax: 'soy',
    fragrance: 'fig',
    loadPercentOfWax: 8,
    wick: 'Cotton 12',
    ...jar,
  },
  {
    key: 'cedar-75',
    name: 'Cedar Hall in 75 mm',
    wax: 'soy',
    fragrance: 'cedar',
    loadPercentOfWax: 8,
    wick: 'Cotton 14',
    ...jar,
  },
  {
    key: 'salt-75',
    name: 'Salt and Sage in 75 mm',
    wax: 'rapeseed',
    fragrance: 'salt',
    loadPercentOfWax: 7,
    wick: 'Cotton 14',
    ...jar,
  },
  {
    key: 'orange-tin',
    name: 'Orange Peel in a tin',
    wax: 'parasoy',
    fragrance: 'orange',
    loadPercentOfWax: 6,
    wick: 'Cotton 10',
    ...tin,
  },
  {
    key: 'clove-tin',
    name: 'Clove Tree in a tin',
    wax: 'parasoy',
    fragrance: 'clove',
    loadPercentOfWax: 5,
    wick: 'Cotton 10',
    ...tin,
  },
  {
    key: 'rain-bowl',
    name: 'Rain on Slate in a bowl',
    wax: 'coconut',
    fragrance: 'rain',
    loadPercentOfWax: 9,
    wick: 'Wood 13',
    ...bowl,
  },
  {
    key: 'fig-bowl',
    name: 'Fig Leaf in a bowl',
    wax: 'coconut',
    fragrance: 'fig',
    loadPercentOfWax: 8,
    wick: 'Wood 13',
    ...bowl,
  },
  {
    key: 'cedar-par',
    name: 'Cedar Hall, paraffin',
    wax: 'paraffin',
    fragrance: 'cedar',
    loadPercentOfWax: 7,
    wick: 'Cotton 8',
    ...jar,
  },
  {
    key: 'orange-par',
    name: 'Orange Peel, paraffin',
    wax: 'paraffin',
    fragrance: 'orange',
    loadPercentOfWax: 6,
    wick: 'Cotton 8',
    ...jar,
  },
  {
    key: 'plain-75',
    name: 'Unscented in 75 mm',
    wax: 'soy',
    fragrance: null,
    loadPercentOfWax: 0,
    wick: 'Cotton 12',
    ...jar,
  },
  {
    key: 'rain-75',
    name: 'Rain on Slate in 75 mm',
    wax: 'rapeseed',
    fragrance: 'rain',
    loadPercentOfWax: 8,
    wick: 'Cotton 14',
    ...jar,
  },
];

/** Pouring temperature by wax, °C. */
export const DEMO_POUR: Readonly<Record<string, number>> = {
  soy: 58,
  rapeseed: 60,
  parasoy: 66,
  coconut: 56,
  paraffin: 70,
};

/** Invented people, one per role and a few more. */
export const DEMO_PEOPLE: DemoScenario['people'] = [
  {
    key: 'marit',
    name: 'Marit Osei',
    email: 'marit@larkrise.example',
    password: 'wax-and-patience',
    owner: true,
    memberships: [],
  },
  {
    ...{
      key: 'ines',
      name: 'Ines Aldous',
      email: 'ines@larkrise.example',
      password: 'wax-and-patience',
      owner: false,
    },
    memberships: [{ studio: 'quay', role: 'lead' }],
  },
  {
    ...{
      key: 'joonas',
      name: 'Joonas Harker',
      email: 'joonas@larkrise.example',
      password: 'wax-and-patience',
      owner: false,
    },
    memberships: [
      { studio: 'barn', role: 'lead' },
      { studio: 'juniper', role: 'lead' },
    ],
  },
  {
    ...{
      key: 'tomas',
      name: 'Tomas Wren',
      email: 'tomas@larkrise.example',
      password: 'wax-and-patience',
      owner: false,
    },
    memberships: [
      { studio: 'quay', role: 'maker' },
      { studio: 'barn', role: 'maker' },
    ],
  },
  {
    ...{
      key: 'orla',
      name: 'Orla Quist',
      email: 'orla@larkrise.example',
      password: 'wax-and-patience',
      owner: false,
    },
    memberships: [{ studio: 'juniper', role: 'maker' }],
  },
  {
    ...{
      key: 'dispatch',
      name: 'Nia Dispatch',
      email: 'dispatch@larkrise.example',
      password: 'wax-and-patience',
      owner: false,
    },
    memberships: [{ studio: 'quay', role: 'viewer' }],
  },
  {
    ...{ key: 'petra', name: 'Petra Lind', email: 'petra@larkrise.example', password: null, owner: false },
    memberships: [{ studio: 'barn', role: 'viewer' }],
  },
];
