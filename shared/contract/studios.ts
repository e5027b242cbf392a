import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { ROLES } from '#shared/contract/roles';
import { defineRoute } from '#shared/contract/route';

export const studio = z.object({
  id: f.id,
  name: z.string(),
  timeZone: z.string(),
  unit: z.enum(['C', 'F']),
  address: z.string(),
  pressureHpa: z.number(),
  /** Minutes after local midnight; null: no quiet hours. */
  quietFrom: f.minuteOfDay.nullable(),
  quietTo: f.minuteOfDay.nullable(),
  /** Whom alerts reach first, and after escalateAfterMinutes without acknowledgement the next; the owner last. */
  recipients: z.array(f.id),
  escalateAfterMinutes: z.number().int(),
  version: f.version,
  role: z.enum(ROLES),
});
export type Studio = z.infer<typeof studio>;

export const studioFields = z
  .object({
    name: f.name,
    timeZone: f.timeZone,
    unit: z.enum(['C', 'F']),
    address: z.string().trim().max(200).default(''),
    pressureHpa: z
      .number()
      .min(700, 'Pressure lies between 700 and 1,080 hPa.')
      .max(1080, 'Pressure lies between 700 and 1,080 hPa.')
      .default(1013.25),
    quietFrom: f.minuteOfDay.nullable().default(null),
    quietTo: f.minuteOfDay.nullable().default(null),
    recipients: z.array(f.id).max(20).default([]),
    escalateAfterMinutes: z.number().int().min(5).max(1440).default(30),
  })
  .strict();

export const studioRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/studios',
    scope: 'self',
    permission: null,
    title: 'The own studios with the role held in each',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: z.array(studio),
  }),
  create: defineRoute({
    method: 'POST',
    path: '/api/studios',
    scope: 'company',
    permission: 'studios.create',
    title: 'Create a studio',
    params: f.none,
    query: f.none,
    body: studioFields,
    reply: studio,
  }),
  change: defineRoute({
    method: 'PUT',
    path: '/api/studios/:studioId',
    scope: 'studio',
    permission: 'studios.write',
    title: 'Change a studio',
    params: f.studioParams,
    query: f.none,
    body: studioFields.extend({ version: f.version }),
    reply: studio,
  }),
};
