import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { roomParams } from '#shared/contract/rooms';
import { defineRoute } from '#shared/contract/route';

export const ALERT_KINDS = [
  'too-warm',
  'too-cold',
  'too-damp',
  'condensation',
  'swinging',
  'silent',
  'stuck',
  'battery',
  'intake-silent',
] as const;
export const alertKind = z.enum(ALERT_KINDS);
export type AlertKind = z.infer<typeof alertKind>;

export const SEVERITIES = ['notice', 'warning', 'critical'] as const;
export const severity = z.enum(SEVERITIES);
export type Severity = z.infer<typeof severity>;

/** What an alert's sentences are made of; text is written from it for each unit and zone (shared/words). */
export const alertFacts = z.object({
  kind: alertKind,
  severity,
  studioName: z.string(),
  roomName: z.string().nullable(),
  sensorName: z.string().nullable(),
  /** °C, K, %, days, minutes or battery %, by kind. */
  value: z.number().nullable(),
  worst: z.number().nullable(),
  limit: z.number().nullable(),
  /** Dew point °C for condensation. */
  dewPoint: z.number().nullable(),
  /** Temperature °C of the room where the value is something else (too cold, condensation). */
  celsius: z.number().nullable().optional(),
  since: f.instant,
  lastHeardAt: f.instant.nullable(),
  batches: z.array(z.object({ id: f.id, code: z.string(), waxFamily: z.string(), shelf: z.string() })),
});
export type AlertFacts = z.infer<typeof alertFacts>;

export const alert = z.object({
  id: f.id,
  studioId: f.id,
  roomId: f.id.nullable(),
  sensorId: f.id.nullable(),
  facts: alertFacts,
  /** open: still so; returned: over, but nobody acknowledged; cleared: over. */
  state: z.enum(['open', 'acknowledged', 'returned', 'cleared']),
  raisedAt: f.instant,
  clearedAt: f.instant.nullable(),
  acknowledged: z.object({ by: z.string(), at: f.instant, note: z.string() }).nullable(),
  shelved: z.object({ by: z.string(), until: f.instant, reason: z.string() }).nullable(),
  holder: z.object({ id: f.id, name: z.string() }).nullable(),
  version: f.version,
});
export type Alert = z.infer<typeof alert>;

export const alertStep = z.object({
  at: f.instant,
  what: z.enum([
    'raised',
    'worse',
    'acknowledged',
    'shelved',
    'unshelved',
    'handed-over',
    'mailed',
    'mail-failed',
    'escalated',
    'held-quiet',
    'returned',
    'cleared',
  ]),
  who: z.string().nullable(),
  note: z.string(),
  value: z.number().nullable(),
});
export type AlertStep = z.infer<typeof alertStep>;

/** One rule of a room. Times in minutes; `clearBy` is the deadband in the unit of the limit. */
export const rule = z
  .object({
    kind: alertKind,
    enabled: z.boolean(),
    severity,
    onDelayMinutes: z.number().min(0).max(720),
    offDelayMinutes: z.number().min(0).max(720),
    clearBy: z.number().min(0).max(20),
  })
  .strict();
export type Rule = z.infer<typeof rule>;

const alertParams = z.object({ studioId: f.id, alertId: f.id }).strict();

export const notice = z.object({
  id: f.id,
  at: f.instant,
  studioId: f.id,
  alertId: f.id.nullable(),
  text: z.string(),
  read: z.boolean(),
});
export type Notice = z.infer<typeof notice>;

export const alertRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/alerts',
    scope: 'studio',
    permission: 'alerts.read',
    title: 'Alerts: open, shelved or past',
    params: f.studioParams,
    query: z
      .object({
        view: z.enum(['open', 'shelved', 'past']).default('open'),
        before: f.instant.optional(),
        limit: z.coerce.number().int().min(1).max(200).default(50),
      })
      .strict(),
    body: f.noBody,
    reply: z.array(alert),
  }),
  get: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/alerts/:alertId',
    scope: 'studio',
    permission: 'alerts.read',
    title: 'One alert with every step',
    params: alertParams,
    query: f.none,
    body: f.noBody,
    reply: z.object({ alert, steps: z.array(alertStep) }),
  }),
  acknowledge: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/alerts/:alertId/acknowledge',
    scope: 'studio',
    permission: 'alerts.acknowledge',
    title: 'Acknowledge with a note',
    params: alertParams,
    query: f.none,
    body: z.object({ note: f.note.default('') }).strict(),
    reply: alert,
  }),
  shelve: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/alerts/:alertId/shelve',
    scope: 'studio',
    permission: 'alerts.shelve',
    title: 'Shelve with a reason for up to 24 hours',
    params: alertParams,
    query: f.none,
    body: z
      .object({
        hours: z.number().min(0.25).max(24, 'Shelve for 24 hours at most.').default(8),
        reason: f.reason,
      })
      .strict(),
    reply: alert,
  }),
  unshelve: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/alerts/:alertId/unshelve',
    scope: 'studio',
    permission: 'alerts.shelve',
    title: 'Take off the shelf before its time',
    params: alertParams,
    query: f.none,
    body: f.noBody,
    reply: alert,
  }),
  handOver: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/alerts/:alertId/hand-over',
    scope: 'studio',
    permission: 'alerts.acknowledge',
    title: 'Hand over to another person of the studio',
    params: alertParams,
    query: f.none,
    body: z.object({ personId: f.id, note: f.note.default('') }).strict(),
    reply: alert,
  }),
  rules: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/rooms/:roomId/rules',
    scope: 'studio',
    permission: 'rules.read',
    title: 'Alert rules of a room',
    params: roomParams,
    query: f.none,
    body: f.noBody,
    reply: z.array(rule),
  }),
  setRules: defineRoute({
    method: 'PUT',
    path: '/api/studios/:studioId/rooms/:roomId/rules',
    scope: 'studio',
    permission: 'rules.write',
    title: 'Set the alert rules of a room',
    params: roomParams,
    query: f.none,
    body: z.array(rule).max(20),
    reply: z.array(rule),
  }),
  notices: defineRoute({
    method: 'GET',
    path: '/api/me/notices',
    scope: 'self',
    permission: null,
    title: 'Own notices, newest first',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: z.array(notice),
  }),
  readNotices: defineRoute({
    method: 'POST',
    path: '/api/me/notices/read',
    scope: 'self',
    permission: null,
    title: 'Mark all own notices as read',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: f.nothing,
  }),
};
