import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { defineRoute } from '#shared/contract/route';
import { PERIOD_MEASURES } from '#shared/contract/measures';

/** Limits of a room; the heat limit in force is the lower of `heatLimit` and the frosting limit of what stands in it. */
export const roomLimits = z
  .object({
    bandLow: f.celsius,
    bandHigh: f.celsius,
    /** null: only the waxes present set the limit for heat. */
    heatLimit: f.celsius.nullable(),
    humidityHigh: f.humidity,
    /** Largest daily swing in K that is calm. */
    swingLimit: z.number().min(0.5).max(30),
    /** Days a date may slip by cold before somebody is told. */
    slipDays: z.number().min(0.25).max(30),
  })
  .strict()
  .refine((limits) => limits.bandLow < limits.bandHigh, {
    error: 'The lower edge of the band must be below the upper edge.',
    path: ['bandLow'],
  });
export type RoomLimits = z.infer<typeof roomLimits>;

export const room = z.object({
  id: f.id,
  studioId: f.id,
  name: z.string(),
  position: z.number().int(),
  limits: roomLimits,
  notes: z.string(),
  version: f.version,
});
export type Room = z.infer<typeof room>;

const roomFields = z
  .object({
    name: f.name,
    position: z.number().int().min(0).max(999).default(0),
    limits: roomLimits,
    notes: f.note.default(''),
  })
  .strict();
export const roomParams = z.object({ studioId: f.id, roomId: f.id }).strict();

/** One 10-minute to one-day slice of a room's chart; null where nothing was observed. */
export const seriesPoint = z.object({
  at: f.instant,
  t: z.number().nullable(),
  tMin: z.number().nullable(),
  tMax: z.number().nullable(),
  rh: z.number().nullable(),
  rhMin: z.number().nullable(),
  rhMax: z.number().nullable(),
  dewPoint: z.number().nullable(),
});
export type SeriesPoint = z.infer<typeof seriesPoint>;

export const roomMark = z.object({
  kind: z.enum(['alert', 'move-in', 'move-out', 'pour']),
  from: f.instant,
  to: f.instant.nullable(),
  text: z.string(),
  batchId: f.id.nullable(),
  alertId: f.id.nullable(),
});
export type RoomMark = z.infer<typeof roomMark>;

export const roomSeries = z.object({
  stepMinutes: z.number().int(),
  points: z.array(seriesPoint).max(2000),
  band: z.object({ low: z.number(), high: z.number() }),
  /** Frosting limits of what is standing in the room now: one entry per limit temperature. */
  frostingLimits: z.array(
    z.object({ celsius: z.number(), waxFamilies: z.array(z.string()), batches: z.array(z.string()) }),
  ),
  marks: z.array(roomMark),
});
export type RoomSeries = z.infer<typeof roomSeries>;

export const roomMeasures = z.object({ from: f.instant, to: f.instant, ...PERIOD_MEASURES });
export type RoomMeasures = z.infer<typeof roomMeasures>;

const period = z.object({ from: f.instant, to: f.instant }).strict();

export const roomRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/rooms',
    scope: 'studio',
    permission: 'rooms.read',
    title: 'Rooms of a studio',
    params: f.studioParams,
    query: f.none,
    body: f.noBody,
    reply: z.array(room),
  }),
  create: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/rooms',
    scope: 'studio',
    permission: 'rooms.write',
    title: 'Add a room',
    params: f.studioParams,
    query: f.none,
    body: roomFields,
    reply: room,
  }),
  change: defineRoute({
    method: 'PUT',
    path: '/api/studios/:studioId/rooms/:roomId',
    scope: 'studio',
    permission: 'rooms.write',
    title: 'Change a room and its limits',
    params: roomParams,
    query: f.none,
    body: roomFields.extend({ version: f.version }),
    reply: room,
  }),
  remove: defineRoute({
    method: 'DELETE',
    path: '/api/studios/:studioId/rooms/:roomId',
    scope: 'studio',
    permission: 'rooms.write',
    title: 'Remove a room that never held a batch',
    params: roomParams,
    query: f.none,
    body: f.noBody,
    reply: f.nothing,
  }),
  series: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/rooms/:roomId/series',
    scope: 'studio',
    permission: 'rooms.read',
    title: 'Temperature, humidity and dew point over a period, at most 2,000 points',
    params: roomParams,
    query: period,
    body: f.noBody,
    reply: roomSeries,
  }),
  measures: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/rooms/:roomId/measures',
    scope: 'studio',
    permission: 'rooms.read',
    title: 'What the room has done over a period',
    params: roomParams,
    query: period,
    body: f.noBody,
    reply: roomMeasures,
  }),
};
