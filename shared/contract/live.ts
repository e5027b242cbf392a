import { z } from 'zod';
import * as f from '#shared/contract/fields';
import type { Notice } from '#shared/contract/alerts';
import { alert } from '#shared/contract/alerts';
import { batchCard } from '#shared/contract/batches';
import { ribbon, roomNow } from '#shared/contract/overview';
import type { Permission } from '#shared/contract/roles';

/** Typed events of the live connection (Socket.IO, WebSocket transport only). */

/** At most one per studio and second; `seq` counts up by one per studio, a hole means: ask for a resync. */
export const liveFrame = z.object({
  studioId: f.id,
  seq: z.number().int(),
  at: f.instant,
  rooms: z.array(roomNow),
  /** A finished ten-minute cell appended to a room's ribbon. */
  ribbons: z.array(z.object({ roomId: f.id, ribbon })),
  batches: z.array(batchCard),
  /** Ids of batches that are no longer curing. */
  goneBatches: z.array(f.id),
  alerts: z.array(alert),
});
export type LiveFrame = z.infer<typeof liveFrame>;

/** Sent on joining and on resync: `seq` is the last frame it contains; the page then loads /api/overview. */
export const liveWelcome = z.object({
  at: f.instant,
  studios: z.array(z.object({ studioId: f.id, seq: z.number().int() })),
  domainSpeed: z.number(),
});
export type LiveWelcome = z.infer<typeof liveWelcome>;

export const goodbye = z.object({
  reason: z.enum(['expired', 'role-changed', 'signed-out', 'gateway-stopping']),
});

export interface ServerToClient {
  welcome: (welcome: LiveWelcome) => void;
  frame: (frame: LiveFrame) => void;
  notice: (notice: Notice) => void;
  /** Racks, rooms, studios or people changed: load the overview again. */
  layout: (change: { studioId: string }) => void;
  goodbye: (why: z.infer<typeof goodbye>) => void;
}

export interface ClientToServer {
  /** A fresh access token before the old one ends; answers whether it was taken. */
  token: (accessToken: string, done: (taken: boolean) => void) => void;
  resync: (studioId: string, done: (welcome: LiveWelcome | null) => void) => void;
}

/** Permission a person needs in the studio an event is about; null: events about the own session or person only. */
export const LIVE_PERMISSIONS = {
  welcome: null,
  frame: 'readiness.read',
  notice: null,
  layout: 'readiness.read',
  goodbye: null,
  token: null,
  resync: 'readiness.read',
} as const satisfies Record<keyof ServerToClient | keyof ClientToServer, Permission | null>;

/** Frames hold alerts and what tells of recipes only for people with all of these in the studio; others get them without. */
export const FULL_FRAME_PERMISSIONS = ['alerts.read', 'batches.recipe'] as const satisfies Permission[];
