import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { alert } from '#shared/contract/alerts';
import { batchCard } from '#shared/contract/batches';
import { rack } from '#shared/contract/racks';
import { roomLimits } from '#shared/contract/rooms';
import { studio } from '#shared/contract/studios';
import { defineRoute } from '#shared/contract/route';

/** A room as it is now; the same shape in the overview, the live snapshot and the live frame. */
export const roomNow = z.object({
  roomId: f.id,
  /** Last known values; `stale` says they must not look live. */
  celsius: z.number().nullable(),
  humidity: z.number().nullable(),
  dewPoint: z.number().nullable(),
  at: f.instant.nullable(),
  stale: z.boolean(),
  /** Worst condition first decides the wash of the wall. */
  condition: z.enum(['fine', 'heat', 'cold', 'damp', 'swinging', 'silent', 'never-heard']),
  /** Since when that condition (or being inside the band) has lasted. */
  since: f.instant.nullable(),
  /** Heat limit in force: from the waxes present or the room. */
  heatLimit: z.number().nullable(),
  /** Highest temperature of the studio's local day so far. */
  peakToday: z.number().nullable(),
  /** Hours that dates here slipped since the same time yesterday; positive is later. */
  slippedHours: z.number(),
  battery: z.number().nullable(),
});
export type RoomNow = z.infer<typeof roomNow>;

/** 144 ten-minute means of the last 24 h, oldest first; null is a gap. */
export const ribbon = z.object({ from: f.instant, celsius: z.array(z.number().nullable()).max(145) });
export type Ribbon = z.infer<typeof ribbon>;

export const roomWall = z.object({
  id: f.id,
  name: z.string(),
  position: z.number().int(),
  limits: roomLimits,
  now: roomNow,
  ribbon,
  racks: z.array(rack),
});
export type RoomWall = z.infer<typeof roomWall>;

export const studioWall = z.object({
  studio,
  rooms: z.array(roomWall),
  /** Curing batches of the studio, placed or not. */
  batches: z.array(batchCard),
  /** Open and shelved alerts; empty for a viewer. */
  alerts: z.array(alert),
});
export type StudioWall = z.infer<typeof studioWall>;

export const overviewRoutes = {
  walls: defineRoute({
    method: 'GET',
    path: '/api/overview',
    scope: 'self',
    permission: null,
    title: 'Every own studio with its rooms, racks, curing batches and open alerts',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: z.object({ at: f.instant, studios: z.array(studioWall) }),
  }),
};
