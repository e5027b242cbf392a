import { DAY_MS, HOUR_MS } from '../../core/time/zoned-time';

/** A stretch of time looked at: one that ends now, or one of one's own choice. Epoch ms. */
export type Period =
  { readonly kind: PeriodName } | { readonly kind: 'own'; readonly from: number; readonly to: number };

export type PeriodName = '6h' | '24h' | '7d' | '30d' | '1y';

export const PERIODS: readonly { readonly name: PeriodName; readonly label: string; readonly ms: number }[] =
  [
    { name: '6h', label: '6 h', ms: 6 * HOUR_MS },
    { name: '24h', label: '24 h', ms: DAY_MS },
    { name: '7d', label: '7 d', ms: 7 * DAY_MS },
    { name: '30d', label: '30 d', ms: 30 * DAY_MS },
    { name: '1y', label: '1 y', ms: 365 * DAY_MS },
  ];

/** First and last instant of a period, seen from now. */
export function span(period: Period, now: number): { readonly from: number; readonly to: number } {
  if (period.kind === 'own') return period;
  const ms = PERIODS.find(({ name }) => name === period.kind)?.ms ?? DAY_MS;
  return { from: now - ms, to: now };
}
