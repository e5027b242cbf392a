import { z } from 'zod';

/** What a room has done over a period; shared by the room page and the comparison. */
export const PERIOD_MEASURES = {
  observedHours: z.number(),
  gapHours: z.number(),
  /** Share of observed time inside the room's band, 0–1; null when nothing was observed. */
  inBand: z.number().nullable(),
  meanCelsius: z.number().nullable(),
  /** Mean kinetic temperature (ΔH/R = 10 000 K), °C. */
  meanKineticCelsius: z.number().nullable(),
  /** Mean of (daily maximum − daily minimum) over the studio's local days, K. */
  dailySwing: z.number().nullable(),
  /** Half cycles and cycles of at least 2 K counted by rainflow. */
  swingsCounted: z.number().nullable(),
  minCelsius: z.number().nullable(),
  maxCelsius: z.number().nullable(),
  meanHumidity: z.number().nullable(),
};
