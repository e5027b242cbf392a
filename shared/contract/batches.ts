import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { waxFamily } from '#shared/contract/materials';
import { defineRoute } from '#shared/contract/route';

/** Where a gate stands. Times: t50 is the date to show, t10–t90 the range; null means past or never within the horizon. */
export const gate = z.object({
  state: z.enum(['reached', 'expected', 'blocked', 'unknown']),
  /** First cell at which the equivalent days were reached. */
  reachedAt: f.instant.nullable(),
  /** Already past now: t10, t50 or t90 at or before now. */
  t10: f.instant.nullable(),
  t50: f.instant.nullable(),
  t90: f.instant.nullable(),
  chanceNow: z.number(),
  /** Sentences' keys: what else stands in the way of this gate. */
  blockedBy: z.array(z.enum(['re-softened', 'no-passing-test', 'no-readings'])),
});
export type GateView = z.infer<typeof gate>;

/** The part of a batch a wall block, a calendar bar or a list line needs; a viewer gets it whole, recipe fields null. */
export const batchCard = z.object({
  id: f.id,
  studioId: f.id,
  code: z.string(),
  designName: z.string().nullable(),
  waxFamily: waxFamily.nullable(),
  vessels: z.number().int(),
  pouredAt: f.instant,
  status: z.enum(['curing', 'dispatched', 'scrapped']),
  shelfId: f.id.nullable(),
  rackId: f.id.nullable(),
  roomId: f.id.nullable(),
  /** 0–1 */
  hardening: z.number().nullable(),
  scent: z.number().nullable(),
  cureAgeDays: z.number().nullable(),
  wickTest: gate,
  ship: gate,
  recheckDue: z.boolean(),
  frosting: z.object({ index: z.number(), level: z.enum(['low', 'watch', 'high']) }).nullable(),
  /** Frosting-prone wax standing above its limit right now. */
  atRisk: z.boolean(),
  resoftened: z.boolean(),
  version: f.version,
});
export type BatchCard = z.infer<typeof batchCard>;

export const stay = z.object({
  id: f.id,
  shelfId: f.id,
  roomId: f.id,
  roomName: z.string(),
  rackName: z.string(),
  shelfPosition: z.number().int(),
  from: f.instant,
  to: f.instant.nullable(),
});
export type Stay = z.infer<typeof stay>;

export const burnVerdict = z.object({
  id: f.id,
  at: f.instant,
  passed: z.boolean(),
  note: z.string(),
  signedBy: z.string(),
  hardeningAtTest: z.number(),
  cureAgeDays: z.number(),
});
export type BurnVerdict = z.infer<typeof burnVerdict>;

/** Why the date moved: entries add up to calendar hours minus cure-age hours. */
export const shift = z.object({
  from: f.instant,
  to: f.instant,
  roomId: f.id.nullable(),
  roomName: z.string().nullable(),
  meanCelsius: z.number().nullable(),
  /** Positive: later. */
  hours: z.number(),
  because: z.enum(['colder', 'warmer', 'gap', 're-softened', 'at-reference']),
});
export type Shift = z.infer<typeof shift>;

export const curvePoint = z.object({
  at: f.instant,
  forecast: z.boolean(),
  hardening: z.number(),
  scent: z.number(),
  cureAgeDays: z.number(),
  /** 10–90 % range of the cure age, days; equal to cureAgeDays when there is no spread. */
  lowDays: z.number(),
  highDays: z.number(),
});
export type CurvePoint = z.infer<typeof curvePoint>;

export const estimate = z.object({
  asOf: f.instant,
  cureAgeHardeningDays: z.number(),
  cureAgeScentDays: z.number(),
  hardening: z.number(),
  scent: z.number(),
  set: z.object({ at: f.instant, reached: z.boolean() }),
  wickTest: gate,
  ship: gate,
  recheck: z.object({
    due: z.boolean(),
    at: f.instant.nullable(),
    because: z.enum(['hardened', 'time', 'none']),
    hardenedSinceTest: z.number().nullable(),
  }),
  frosting: z
    .object({
      index: z.number(),
      level: z.enum(['low', 'watch', 'high']),
      degreeHours: z.number(),
      cycleDamage: z.number(),
    })
    .nullable(),
  gaps: z.array(
    z.object({
      from: f.instant,
      to: f.instant,
      fill: z.enum(['line', 'hour-of-day', 'last-known']),
      sdDays: z.number(),
    }),
  ),
  resoftened: z.array(z.object({ from: f.instant, to: f.instant })),
  hoursOutsideTestedRange: z.number(),
  /** The numbers behind the date; null for a viewer, whom they would tell the wax. */
  numbers: z
    .object({
      testDays: z.number(),
      scentDays: z.number(),
      shipDays: z.number(),
      cvD: z.number(),
      sdEnergy: z.number(),
      sdRoom: z.number(),
      sdGapsDays: z.number(),
      spread: z.number(),
      meanCelsius: z.number().nullable(),
      calibrated: z.boolean(),
      provenance: z.string(),
    })
    .nullable(),
});
export type EstimateView = z.infer<typeof estimate>;

export const batchPage = z.object({
  card: batchCard,
  /** null for a viewer */
  recipe: z
    .object({
      designId: f.id,
      waxName: z.string(),
      fragranceName: z.string().nullable(),
      loadPercentOfWax: z.number(),
      loadPercentOfMix: z.number(),
      wick: z.string(),
      vessel: z.string(),
      waxGrams: z.number(),
      fragranceGrams: z.number(),
      pourCelsius: z.number().nullable(),
      pouredBy: z.string(),
    })
    .nullable(),
  notes: z.string(),
  stays: z.array(stay),
  estimate: estimate.nullable(),
  shifts: z.array(shift),
  verdicts: z.array(burnVerdict),
});
export type BatchPage = z.infer<typeof batchPage>;

const batchParams = z.object({ studioId: f.id, batchId: f.id }).strict();
const vessels = z.number().int('Count whole vessels.').min(1, 'Pour at least one vessel.').max(100_000);

export const batchRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/batches',
    scope: 'studio',
    permission: 'batches.read',
    title: 'Batches of a studio, newest first',
    params: f.studioParams,
    query: z
      .object({
        status: z.enum(['curing', 'ended', 'all']).default('curing'),
        search: z.string().max(80).optional(),
        offset: z.coerce.number().int().min(0).default(0),
        limit: z.coerce.number().int().min(1).max(500).default(100),
      })
      .strict(),
    body: f.noBody,
    reply: z.object({ total: z.number().int(), batches: z.array(batchCard) }),
  }),
  pour: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/batches',
    scope: 'studio',
    permission: 'batches.pour',
    title: 'Start a batch; with a shelf it is placed at once',
    params: f.studioParams,
    query: f.none,
    body: z
      .object({
        code: z.string().trim().min(1).max(24).optional(),
        designId: f.id,
        vessels,
        pouredAt: f.instant,
        pourCelsius: z.number().min(20).max(140).nullable().default(null),
        shelfId: f.id.nullable().default(null),
        /** Places the batch even where the shelf has no room for all of it. */
        overfill: z.boolean().default(false),
        notes: f.note.default(''),
      })
      .strict(),
    reply: batchPage,
  }),
  get: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/batches/:batchId',
    scope: 'studio',
    permission: 'batches.read',
    title: 'A batch with its stays, estimate and the reasons its date moved',
    params: batchParams,
    query: z.object({ at: f.instant.optional() }).strict(),
    body: f.noBody,
    reply: batchPage,
  }),
  curve: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/batches/:batchId/curve',
    scope: 'studio',
    permission: 'batches.read',
    title: 'Cure curve with its range, past and forecast',
    params: batchParams,
    query: f.none,
    body: f.noBody,
    reply: z.object({ points: z.array(curvePoint).max(500) }),
  }),
  move: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/batches/:batchId/move',
    scope: 'studio',
    permission: 'batches.move',
    title: 'Place or move a batch onto a shelf',
    params: batchParams,
    query: f.none,
    body: z
      .object({
        version: f.version,
        shelfId: f.id,
        at: f.instant.optional(),
        overfill: z.boolean().default(false),
      })
      .strict(),
    reply: batchPage,
  }),
  end: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/batches/:batchId/end',
    scope: 'studio',
    permission: 'batches.release',
    title: 'Dispatch or scrap a batch; dispatch before the ship gate needs a reason',
    params: batchParams,
    query: f.none,
    body: z
      .object({
        version: f.version,
        as: z.enum(['dispatched', 'scrapped']),
        at: f.instant.optional(),
        reason: f.reason.optional(),
      })
      .strict(),
    reply: batchPage,
  }),
  recordTest: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/batches/:batchId/verdicts',
    scope: 'studio',
    permission: 'tests.sign',
    title: 'Record a signed wick-test verdict for the design of this batch',
    params: batchParams,
    query: f.none,
    body: z.object({ at: f.instant, passed: z.boolean(), note: f.note.default('') }).strict(),
    reply: batchPage,
  }),
};
