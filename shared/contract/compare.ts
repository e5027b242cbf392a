import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { WAX_FAMILIES } from '#shared/contract/materials';
import { PERIOD_MEASURES } from '#shared/contract/measures';
import { defineRoute } from '#shared/contract/route';

const interval = z.object({
  n: z.number().int(),
  mean: z.number().nullable(),
  low: z.number().nullable(),
  high: z.number().nullable(),
});

export const studioComparison = z.object({
  studioId: f.id,
  studioName: z.string(),
  ...PERIOD_MEASURES,
  roomDays: z.number(),
  alertsPerRoomDay: z.number().nullable(),
  /** Median minutes from raised to acknowledged. */
  minutesToAnswer: z.number().nullable(),
  /** Per wax family: days to the wick-test gate minus the nominal days at 21 °C, unit the batch, 95 % interval of the mean. */
  daysOverNominal: z.array(z.object({ waxFamily: z.enum(WAX_FAMILIES), ...interval.shape })),
});
export type StudioComparison = z.infer<typeof studioComparison>;

/** Welch's test of two studios on one wax family, Holm-adjusted over all pairs; only with at least 8 batches each. */
export const pairComparison = z.object({
  waxFamily: z.enum(WAX_FAMILIES),
  studioA: f.id,
  studioB: f.id,
  verdict: z.enum(['too-few', 'no-clear-difference', 'different']),
  difference: z.number().nullable(),
  low: z.number().nullable(),
  high: z.number().nullable(),
  pAdjusted: z.number().nullable(),
});

export type PairComparison = z.infer<typeof pairComparison>;

export const compareRoutes = {
  compare: defineRoute({
    method: 'GET',
    path: '/api/compare',
    scope: 'company',
    permission: 'compare.read',
    title: 'Compare the own studios over a period',
    params: f.none,
    query: z.object({ from: f.instant, to: f.instant }).strict(),
    body: f.noBody,
    reply: z.object({
      from: f.instant,
      to: f.instant,
      studios: z.array(studioComparison),
      pairs: z.array(pairComparison),
    }),
  }),
};
