import type { Alert } from '#shared/contract/alerts';
import type { BatchCard } from '#shared/contract/batches';
import type { Ribbon, RoomNow } from '#shared/contract/overview';

type Soon<T> = T | Promise<T>;

/** Where frames get their contents: the same facts the overview page is made of. */
export interface FrameSource {
  roomNow(roomIds: readonly string[]): Soon<RoomNow[]>;
  /** Finished cells of rooms from the given cell on, of the last 24 hours at most. */
  ribbons(fromCells: ReadonlyMap<string, number>): Soon<{ roomId: string; ribbon: Ribbon }[]>;
  /** Those of the batches that are still curing; for a viewer without what tells of recipe and tests. */
  cards(batchIds: readonly string[], forViewer: boolean): Soon<BatchCard[]>;
  alerts(alertIds: readonly string[]): Soon<Alert[]>;
}
