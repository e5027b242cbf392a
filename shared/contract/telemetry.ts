import { z } from 'zod';

/** MQTT topics and payloads. */

/** Topic on which one device publishes: stillroom/<studio id>/<device id>/reading */
export function readingTopic(studioId: string, deviceId: string): string {
  return `stillroom/${studioId}/${deviceId}/reading`;
}

/** Parts of a reading topic, or null if it is not one. */
export function parseReadingTopic(topic: string): { studioId: string; deviceId: string } | null {
  const parts = topic.split('/');
  const [root, studioId, deviceId, leaf] = parts;
  if (parts.length !== 4 || root !== 'stillroom' || leaf !== 'reading' || !studioId || !deviceId) return null;
  return { studioId, deviceId };
}

/** Demo only: the simulator tells the gateway which time it plays and how fast. Topic demoClockTopic. */
export const demoClockTopic = 'stillroom/demo/clock';
export const demoClock = z
  .object({
    /** Domain time at the real time `realAt`, both epoch milliseconds. */
    domainAt: z.number().int(),
    realAt: z.number().int(),
    /** Domain seconds per real second. */
    speed: z.number().min(0).max(20_000),
  })
  .strict();
export type DemoClock = z.infer<typeof demoClock>;

/**
 * Plain JSON payload, one reading or an array of up to 500.
 * `t` °C, `rh` %, `at` ISO 8601 with zone or epoch seconds; without `at` the gateway's time of receipt counts.
 * `boot` and `seq` make a reading without a clock recognisable when it is sent again. `bat` battery %.
 */
export const plainReading = z.object({
  t: z.number(),
  rh: z.number().optional(),
  at: z.union([z.iso.datetime({ offset: true }), z.number()]).optional(),
  boot: z.number().int().nonnegative().optional(),
  seq: z.number().int().nonnegative().optional(),
  bat: z.number().min(0).max(100).optional(),
});
export type PlainReading = z.infer<typeof plainReading>;

/** One SenML record (RFC 8428, section 4): base and regular fields that a temperature or humidity reading uses. */
export const senmlRecord = z.looseObject({
  bn: z.string().optional(),
  bt: z.number().optional(),
  bu: z.string().optional(),
  bv: z.number().optional(),
  bs: z.number().optional(),
  bver: z.number().optional(),
  n: z.string().optional(),
  u: z.string().optional(),
  v: z.number().optional(),
  vs: z.string().optional(),
  vb: z.boolean().optional(),
  vd: z.string().optional(),
  s: z.number().optional(),
  t: z.number().optional(),
  ut: z.number().optional(),
});
export type SenmlRecord = z.infer<typeof senmlRecord>;
export const senmlPack = z.array(senmlRecord).min(1).max(2000);

/** Plausible limits; outside, a reading is quarantined. */
export const PLAUSIBLE = { celsius: { min: -40, max: 80 }, humidity: { min: 0, max: 100 } } as const;
/** A device time this far ahead of the gateway's is flagged and never becomes the latest. */
export const FUTURE_TOLERANCE_MS = 5 * 60_000;
