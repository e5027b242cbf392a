import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { defineRoute } from '#shared/contract/route';

export const WAX_FAMILIES = [
  'soy-container',
  'soy-pillar',
  'paraffin-container',
  'paraffin-pillar',
  'parasoy',
  'coconut',
  'palm',
  'beeswax',
  'rapeseed',
] as const;
export const waxFamily = z.enum(WAX_FAMILIES);

/** The cure numbers of one wax; days are equivalent days at 21 °C. */
export const kinetics = z
  .object({
    setLagHours: z.number().min(0.5).max(72),
    testDays: z.number().min(0.25).max(120),
    shipDays: z.number().min(0.25).max(120),
    scentDays: z.number().min(0.25).max(120),
    hardeningAtTest: z.number().min(0.5).max(0.999),
    exponent: z.number().min(0.2).max(3),
    hardeningEnergy: z.number().min(0).max(150),
    scentEnergy: z.number().min(0).max(150),
    frosting: z.enum(['yes', 'slight', 'no']),
    frostingFrom: f.celsius.nullable(),
    capC: f.celsius,
    softC: f.celsius,
    loadReference: z.number().min(0).max(20),
    loadSensitivity: z.number().min(-0.2).max(0.5),
    maxLoad: z.number().min(0).max(20),
    calibration: z
      .object({ cvD: z.number().min(0.01).max(1), sdEnergy: z.number().min(0).max(50) })
      .nullable(),
  })
  .strict();

export const wax = z.object({
  id: f.id,
  name: z.string(),
  family: waxFamily,
  kinetics,
  pourLow: z.number(),
  pourHigh: z.number(),
  /** "starting guess, common practice, no source" until a studio calibrates it. */
  provenance: z.string(),
  version: f.version,
});
export type Wax = z.infer<typeof wax>;

export const fragrance = z.object({
  id: f.id,
  name: z.string(),
  flashPoint: z.number().nullable(),
  certificateMaxLoad: z.number().nullable(),
});
export type Fragrance = z.infer<typeof fragrance>;

export const design = z.object({
  id: f.id,
  name: z.string(),
  waxId: f.id,
  fragranceId: f.id.nullable(),
  /** Fragrance load in per cent of the wax. */
  loadPercentOfWax: z.number(),
  wick: z.string(),
  vessel: z.string(),
  vesselDiameterMm: z.number(),
  /** Finished mix per vessel, g. */
  fillGrams: z.number(),
  lastTest: z.object({ at: f.instant, passed: z.boolean(), batchCode: z.string().nullable() }).nullable(),
  version: f.version,
});
export type Design = z.infer<typeof design>;

const designFields = z
  .object({
    name: f.name,
    waxId: f.id,
    fragranceId: f.id.nullable(),
    loadPercentOfWax: z
      .number()
      .min(0, 'A load cannot be negative.')
      .max(20, 'A load above 20 % of the wax is not poured.'),
    wick: f.name,
    vessel: f.name,
    vesselDiameterMm: z.number().min(20).max(400),
    fillGrams: z.number().min(5).max(20_000),
  })
  .strict();

export const materialRoutes = {
  waxes: defineRoute({
    method: 'GET',
    path: '/api/waxes',
    scope: 'company',
    permission: 'materials.read',
    title: 'Waxes with their cure numbers',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: z.array(wax),
  }),
  createWax: defineRoute({
    method: 'POST',
    path: '/api/waxes',
    scope: 'company',
    permission: 'materials.write',
    title: 'Add a wax; cure numbers start from its family',
    params: f.none,
    query: f.none,
    body: z.object({ name: f.name, family: waxFamily }).strict(),
    reply: wax,
  }),
  changeWax: defineRoute({
    method: 'PUT',
    path: '/api/waxes/:waxId',
    scope: 'company',
    permission: 'materials.write',
    title: 'Change the cure numbers of a wax; every estimate on it is made anew',
    params: z.object({ waxId: f.id }).strict(),
    query: f.none,
    body: z.object({ name: f.name, kinetics, provenance: f.reason, version: f.version }).strict(),
    reply: wax,
  }),
  fragrances: defineRoute({
    method: 'GET',
    path: '/api/fragrances',
    scope: 'company',
    permission: 'materials.read',
    title: 'Fragrance oils',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: z.array(fragrance),
  }),
  createFragrance: defineRoute({
    method: 'POST',
    path: '/api/fragrances',
    scope: 'company',
    permission: 'materials.write',
    title: 'Add a fragrance oil',
    params: f.none,
    query: f.none,
    body: z
      .object({
        name: f.name,
        flashPoint: z.number().min(20).max(250).nullable(),
        certificateMaxLoad: z.number().min(0).max(100).nullable(),
      })
      .strict(),
    reply: fragrance,
  }),
  designs: defineRoute({
    method: 'GET',
    path: '/api/designs',
    scope: 'company',
    permission: 'materials.read',
    title: 'Designs with their latest test',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: z.array(design),
  }),
  createDesign: defineRoute({
    method: 'POST',
    path: '/api/designs',
    scope: 'company',
    permission: 'materials.write',
    title: 'Add a design: wax, fragrance, load, wick and vessel',
    params: f.none,
    query: f.none,
    body: designFields,
    reply: design,
  }),
};
