import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { defineRoute } from '#shared/contract/route';

export const sensor = z.object({
  id: f.id,
  studioId: f.id,
  roomId: f.id,
  name: z.string(),
  /** MQTT client id and user name; the last part of its topic. */
  deviceId: z.string(),
  topic: z.string(),
  /** Averaged into the room when trusted. */
  trusted: z.boolean(),
  offsetCelsius: z.number(),
  offsetHumidity: z.number(),
  intervalSeconds: z.number().int(),
  /** Readings older than this many days are not taken over MQTT. */
  acceptLateDays: z.number().int(),
  retired: z.boolean(),
  health: z.object({
    state: z.enum(['fine', 'silent', 'stuck', 'drifting', 'never-heard', 'retired']),
    lastHeardAt: f.instant.nullable(),
    lastCelsius: z.number().nullable(),
    lastHumidity: z.number().nullable(),
    battery: z.number().nullable(),
    /** Readings that came with a time more than five minutes ahead. */
    futureReadings: z.number().int(),
    /** Same time, another value: the first was kept. */
    conflicts: z.number().int(),
    quarantined: z.number().int(),
    connected: z.boolean(),
  }),
  version: f.version,
});
export type Sensor = z.infer<typeof sensor>;

const sensorFields = z
  .object({
    roomId: f.id,
    name: f.name,
    trusted: z.boolean().default(true),
    offsetCelsius: z
      .number()
      .min(-5, 'An offset beyond ±5 K means the sensor should be replaced.')
      .max(5, 'An offset beyond ±5 K means the sensor should be replaced.')
      .default(0),
    offsetHumidity: z.number().min(-20).max(20).default(0),
    intervalSeconds: z.number().int().min(1).max(86_400).default(60),
    acceptLateDays: z.number().int().min(1).max(36_500).default(7),
  })
  .strict();
const sensorParams = z.object({ studioId: f.id, sensorId: f.id }).strict();
/** The secret is shown once and kept only as a hash. */
export const enrolled = z.object({ sensor, secret: z.string() });

export const quarantined = z.object({
  id: z.string(),
  receivedAt: f.instant,
  sensorId: f.id.nullable(),
  topic: z.string(),
  payload: z.string(),
  reason: z.string(),
});

export const sensorRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/sensors',
    scope: 'studio',
    permission: 'sensors.read',
    title: 'Sensors of a studio with their health',
    params: f.studioParams,
    query: f.none,
    body: f.noBody,
    reply: z.array(sensor),
  }),
  enrol: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/sensors',
    scope: 'studio',
    permission: 'sensors.write',
    title: 'Enrol a sensor; the answer holds its secret, shown once',
    params: f.studioParams,
    query: f.none,
    body: sensorFields,
    reply: enrolled,
  }),
  change: defineRoute({
    method: 'PUT',
    path: '/api/studios/:studioId/sensors/:sensorId',
    scope: 'studio',
    permission: 'sensors.write',
    title: 'Change a sensor; a new offset or trust recomputes the room (the room itself cannot be changed)',
    params: sensorParams,
    query: f.none,
    body: sensorFields.omit({ roomId: true }).extend({ version: f.version }),
    reply: sensor,
  }),
  newSecret: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/sensors/:sensorId/secret',
    scope: 'studio',
    permission: 'sensors.write',
    title: 'Replace a lost secret; the old one stops working at once',
    params: sensorParams,
    query: f.none,
    body: f.noBody,
    reply: enrolled,
  }),
  retire: defineRoute({
    method: 'DELETE',
    path: '/api/studios/:studioId/sensors/:sensorId',
    scope: 'studio',
    permission: 'sensors.write',
    title: 'Retire a sensor; its readings stay',
    params: sensorParams,
    query: f.none,
    body: f.noBody,
    reply: f.nothing,
  }),
  quarantine: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/quarantine',
    scope: 'studio',
    permission: 'quarantine.read',
    title: 'The latest messages that could not be taken, with the reason',
    params: f.studioParams,
    query: z.object({ limit: z.coerce.number().int().min(1).max(500).default(100) }).strict(),
    body: f.noBody,
    reply: z.array(quarantined),
  }),
};
