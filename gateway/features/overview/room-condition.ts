import type { RoomNow } from '#shared/contract/overview';

export type Condition = RoomNow['condition'];

/** What is known of a room's air right now. */
export interface RoomAir {
  readonly celsius: number;
  readonly humidity: number | null;
  /** Too old to speak of now. */
  readonly stale: boolean;
}

/** What a room's air is held against. */
export interface RoomBounds {
  readonly bandLow: number;
  /** Heat limit in force, °C. */
  readonly heatLimit: number;
  readonly humidityHigh: number;
  /** Largest calm range of temperature within 24 h, K. */
  readonly swingLimit: number;
}

/**
 * The worst that can be said of a room: silence before anything else, for then nothing is known; heat before cold before damp
 * before swinging. @param swing highest less lowest ten-minute mean of the last 24 hours, K
 */
export function conditionOf(air: RoomAir | null, bounds: RoomBounds, swing: number): Condition {
  if (air === null) return 'never-heard';
  if (air.stale) return 'silent';
  if (air.celsius > bounds.heatLimit) return 'heat';
  if (air.celsius < bounds.bandLow) return 'cold';
  if (air.humidity !== null && air.humidity > bounds.humidityHigh) return 'damp';
  return swing > bounds.swingLimit ? 'swinging' : 'fine';
}

/** Whether a ten-minute mean agrees with a condition; for conditions that one cell cannot tell, null. */
export function cellAgrees(
  condition: Condition,
  cell: { readonly celsius: number; readonly humidity: number | null },
  bounds: RoomBounds,
): boolean | null {
  switch (condition) {
    case 'heat':
      return cell.celsius > bounds.heatLimit;
    case 'cold':
      return cell.celsius < bounds.bandLow;
    case 'damp':
      return cell.humidity === null ? null : cell.humidity > bounds.humidityHigh;
    case 'fine':
      return (
        cell.celsius <= bounds.heatLimit &&
        cell.celsius >= bounds.bandLow &&
        (cell.humidity === null || cell.humidity <= bounds.humidityHigh)
      );
    case 'swinging':
    case 'silent':
    case 'never-heard':
      return null;
  }
}

/** Data is stale after three reporting intervals, but not before 15 minutes. */
export function staleAfterMs(intervalSeconds: number): number {
  return Math.max(15 * 60_000, 3 * intervalSeconds * 1000);
}
