import type { Notice } from '#shared/contract/alerts';

/** What the parts of the gateway tell each other after something is safely in the database. */

/** A reading that was committed just now (not a repeat); values as measured, before calibration offsets. */
export interface CommittedReading {
  readonly sensorNo: number;
  readonly sensorId: string;
  readonly studioId: string;
  readonly roomId: string;
  /** Device time, or time of receipt for a device without a clock; epoch ms. */
  readonly at: number;
  readonly celsius: number;
  readonly humidity: number | null;
  readonly battery: number | null;
  /** More than five minutes ahead of the gateway's clock: kept, flagged, never the latest. */
  readonly future: boolean;
}

/** Ten-minute cells of a room whose content may have changed, inclusive; epoch-aligned indexes (shared/cure/grid). */
export interface CellsChanged {
  readonly roomId: string;
  readonly studioId: string;
  readonly fromCell: number;
  readonly toCell: number;
}

/** Batches whose estimate or facts changed. */
export interface BatchesChanged {
  readonly studioId: string;
  readonly batchIds: readonly string[];
}

/** An alert that changed in any way. */
export interface AlertChanged {
  readonly studioId: string;
  readonly alertId: string;
}

/** Rooms, racks, sensors, limits or waxes changed: whoever caches them must read them again. */
export interface LayoutChanged {
  readonly studioId: string;
  readonly roomId: string | null;
}

/** Roles, password or state of a person changed: sessions and sockets must be looked at again. */
export interface PersonChanged {
  readonly personId: string;
  readonly reason: 'role-changed' | 'signed-out';
  /** Only this session, or all of them when null. */
  readonly sessionId: string | null;
}

/** A notice was written for a person; it is shown at once wherever they are signed in. */
export interface NoticeWritten {
  readonly personId: string;
  readonly notice: Notice;
}
