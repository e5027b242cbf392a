import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { waxFamily } from '#shared/contract/materials';
import { STUDIO_ROLES } from '#shared/contract/roles';
import { roomLimits } from '#shared/contract/rooms';

/** First line of a demo scenario: everything but the readings. Things refer to each other by keys of the scenario. */
export const demoScenario = z.object({
  /** The instant the story is told at. */
  now: f.instant,
  people: z.array(
    z.object({
      key: z.string(),
      name: z.string(),
      email: z.string(),
      /** null: invited, has not accepted. */
      password: z.string().nullable(),
      owner: z.boolean(),
      memberships: z.array(z.object({ studio: z.string(), role: z.enum(STUDIO_ROLES) })),
    }),
  ),
  studios: z.array(
    z.object({
      key: z.string(),
      name: z.string(),
      timeZone: z.string(),
      unit: z.enum(['C', 'F']),
      address: z.string(),
      pressureHpa: z.number(),
      quietFrom: z.number().nullable(),
      quietTo: z.number().nullable(),
      /** Keys of people. */
      recipients: z.array(z.string()),
      rooms: z.array(
        z.object({
          key: z.string(),
          name: z.string(),
          limits: roomLimits,
          notes: z.string(),
          racks: z.array(z.object({ key: z.string(), name: z.string(), shelves: z.array(z.number().int()) })),
          sensors: z.array(
            z.object({
              deviceId: z.string(),
              name: z.string(),
              offsetCelsius: z.number(),
              intervalSeconds: z.number(),
            }),
          ),
        }),
      ),
    }),
  ),
  waxes: z.array(z.object({ key: z.string(), name: z.string(), family: waxFamily })),
  fragrances: z.array(
    z.object({ key: z.string(), name: z.string(), flashPoint: z.number(), certificateMaxLoad: z.number() }),
  ),
  designs: z.array(
    z.object({
      key: z.string(),
      name: z.string(),
      wax: z.string(),
      fragrance: z.string().nullable(),
      loadPercentOfWax: z.number(),
      wick: z.string(),
      vessel: z.string(),
      vesselDiameterMm: z.number(),
      fillGrams: z.number(),
    }),
  ),
  batches: z.array(
    z.object({
      code: z.string(),
      studio: z.string(),
      design: z.string(),
      vessels: z.number().int(),
      pouredAt: f.instant,
      pouredBy: z.string(),
      pourCelsius: z.number(),
      notes: z.string(),
      stays: z.array(
        z.object({ rack: z.string(), shelf: z.number().int(), from: f.instant, to: f.instant.nullable() }),
      ),
      ended: z.object({ as: z.enum(['dispatched', 'scrapped']), at: f.instant }).nullable(),
      tests: z.array(
        z.object({ at: f.instant, passed: z.boolean(), note: z.string(), signedBy: z.string() }),
      ),
    }),
  ),
});
export type DemoScenario = z.infer<typeof demoScenario>;

/** Every further line: payloads of one device as it would have sent them, oldest first. */
export const demoReadings = z.object({ device: z.string(), payloads: z.array(z.string()) });
