import { z } from 'zod';

/** Schemas of single fields that several contracts use. */

export const none = z.object({}).strict();
export const noBody = z.undefined().or(z.object({}).strict());
export const nothing = z.null();

export const id = z.uuid();
/** ISO 8601 in UTC, e.g. 2026-05-01T10:00:00.000Z */
export const instant = z.iso.datetime({ offset: true });
export const localDate = z.iso.date();
export const name = z.string().trim().min(1, 'Give a name.').max(80, 'Keep the name under 80 characters.');
export const note = z.string().trim().max(2000, 'Keep the note under 2,000 characters.');
export const reason = z
  .string()
  .trim()
  .min(3, 'Write a reason of at least three characters.')
  .max(500, 'Keep the reason under 500 characters.');
export const email = z.email('Give an e-mail address such as ines@example.org.').max(200);
export const password = z
  .string()
  .min(8, 'Use at least 8 characters; 15 or more are advised.')
  .max(200, 'Use at most 200 characters.');
/** °C; wide enough for any cure room and a broken heater. */
export const celsius = z.number().min(-40).max(80);
export const humidity = z.number().min(0).max(100);
/** Minutes after local midnight. */
export const minuteOfDay = z.number().int().min(0).max(1439);
/** IANA time zone name that this runtime knows. */
export const timeZone = z.string().refine(
  (zone) => {
    try {
      new Intl.DateTimeFormat('en', { timeZone: zone });
      return true;
    } catch {
      return false;
    }
  },
  { error: 'Give a time zone name such as Europe/Lisbon.' },
);
export const studioParams = z.object({ studioId: id }).strict();
/** Optimistic lock: the version the person saw. A newer one on the server answers 409 with the current thing. */
export const version = z.number().int().min(1);
