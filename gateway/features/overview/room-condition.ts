import type { RoomNow } from '#shared/contract/overview';

export type Condition = RoomNow['condition'];

/** A condition, told apart further: a room that is fine may lie in its band or, not yet too warm, above it. */
export type RoomState = Condition | 'above-band';

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
  readonly bandHigh: number;
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
export function stateOf(air: RoomAir | null, bounds: RoomBounds, swing: number): RoomState {
  if (air === null) return 'never-heard';
  if (air.stale) return 'silent';
  if (air.celsius > bounds.heatLimit) return 'heat';
  if (air.celsius < bounds.bandLow) return 'cold';
  if (air.humidity !== null && air.humidity > bounds.humidityHigh) return 'damp';
  if (swing > bounds.swingLimit) return 'swinging';
  return air.celsius > bounds.bandHigh ? 'above-band' : 'fine';
}

/** Whether a ten-minute mean agrees with a state; for states that one cell cannot tell, null. */
export function cellAgrees(
  state: RoomState,
  cell: { readonly celsius: number; readonly humidity: number | null },
  bounds: RoomBounds,
): boolean | null {
  const dry = cell.humidity === null || cell.humidity <= bounds.humidityHigh;
  const mild = cell.celsius <= bounds.heatLimit && cell.celsius >= bounds.bandLow && dry;
  switch (state) {
    case 'heat':
      return cell.celsius > bounds.heatLimit;
    case 'cold':
      return cell.celsius < bounds.bandLow;
    case 'damp':
      return cell.humidity === null ? null : cell.humidity > bounds.humidityHigh;
    case 'fine':
      return mild && cell.celsius <= bounds.bandHigh;
    case 'above-band':
      return mild && cell.celsius > bounds.bandHigh;
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
