import type { CureKinetics } from '#shared/cure/kinetics';

export type WaxFamilyName =
  | 'soy-container'
  | 'soy-pillar'
  | 'paraffin-container'
  | 'paraffin-pillar'
  | 'parasoy'
  | 'coconut'
  | 'palm'
  | 'beeswax'
  | 'rapeseed';

export interface WaxFamily {
  readonly kinetics: CureKinetics;
  /** Where the wax melts and congeals, °C. */
  readonly melt: readonly [number, number];
  /** Pouring temperature, °C. */
  readonly pour: readonly [number, number];
}

/** Where the numbers below come from; shown wherever they are used. */
export const STARTING_GUESS =
  'Starting guess: common practice, no source. Energies and exponents are modelling choices until your own tests calibrate them.';

interface Row {
  test: number;
  ship: number;
  scent: number;
  g: number;
  n: number;
  hard: number;
  scentE: number;
  frosting: CureKinetics['frosting'];
  from: number | null;
  melt: [number, number];
  pour: [number, number];
  maxLoad: number;
  cap: number;
  soft: number;
}

const family = (row: Row): WaxFamily => ({
  melt: row.melt,
  pour: row.pour,
  kinetics: {
    setLagHours: 6,
    testDays: row.test,
    shipDays: row.ship,
    scentDays: row.scent,
    hardeningAtTest: row.g,
    exponent: row.n,
    hardeningEnergy: row.hard,
    scentEnergy: row.scentE,
    frosting: row.frosting,
    frostingFrom: row.from,
    capC: row.cap,
    softC: row.soft,
    loadReference: 6,
    loadSensitivity: 0,
    maxLoad: row.maxLoad,
    calibration: null,
  },
});

/**
 * Defaults of each wax family: days at 21 °C to the wick test, to shipping and until scent has settled, hardening at the
 * test (g), exponent (n), energies in kJ/mol, frosting limit, melting and pouring range, largest load, cap and soft point.
 * Common practice, no source; every number can be changed.
 */
export const WAX_FAMILY_DEFAULTS: Readonly<Record<WaxFamilyName, WaxFamily>> = {
  'soy-container': family({
    ...{ test: 14, ship: 14, scent: 14, g: 0.9, n: 0.5, hard: 50, scentE: 60, frosting: 'yes', from: 25 },
    ...{ melt: [46, 52], pour: [55, 65], maxLoad: 10, cap: 27, soft: 38 },
  }),
  'soy-pillar': family({
    ...{ test: 10, ship: 14, scent: 10, g: 0.9, n: 0.6, hard: 50, scentE: 60, frosting: 'yes', from: 27 },
    ...{ melt: [52, 60], pour: [68, 77], maxLoad: 8, cap: 29, soft: 42 },
  }),
  'paraffin-container': family({
    ...{ test: 1.5, ship: 2, scent: 1.5, g: 0.95, n: 1, hard: 40, scentE: 50, frosting: 'no', from: null },
    ...{ melt: [48, 58], pour: [65, 75], maxLoad: 10, cap: 30, soft: 40 },
  }),
  'paraffin-pillar': family({
    ...{ test: 1.5, ship: 2, scent: 1.5, g: 0.95, n: 1, hard: 40, scentE: 50, frosting: 'no', from: null },
    ...{ melt: [58, 66], pour: [80, 88], maxLoad: 6, cap: 32, soft: 46 },
  }),
  parasoy: family({
    ...{ test: 5, ship: 7, scent: 5, g: 0.92, n: 0.7, hard: 45, scentE: 55, frosting: 'slight', from: 27 },
    ...{ melt: [49, 56], pour: [60, 75], maxLoad: 10, cap: 28, soft: 40 },
  }),
  coconut: family({
    ...{ test: 10, ship: 14, scent: 10, g: 0.9, n: 0.55, hard: 50, scentE: 60, frosting: 'slight', from: 24 },
    ...{ melt: [38, 48], pour: [50, 65], maxLoad: 11, cap: 25, soft: 32 },
  }),
  palm: family({
    ...{ test: 5, ship: 7, scent: 5, g: 0.92, n: 0.7, hard: 45, scentE: 55, frosting: 'no', from: null },
    ...{ melt: [55, 62], pour: [85, 95], maxLoad: 6, cap: 29, soft: 42 },
  }),
  beeswax: family({
    ...{ test: 2, ship: 3, scent: 2, g: 0.95, n: 0.9, hard: 40, scentE: 50, frosting: 'no', from: null },
    ...{ melt: [62, 64], pour: [68, 75], maxLoad: 5, cap: 32, soft: 48 },
  }),
  rapeseed: family({
    ...{ test: 12, ship: 14, scent: 12, g: 0.9, n: 0.5, hard: 50, scentE: 60, frosting: 'yes', from: 25 },
    ...{ melt: [46, 54], pour: [55, 65], maxLoad: 10, cap: 27, soft: 38 },
  }),
};
