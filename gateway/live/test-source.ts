import type { Alert } from '#shared/contract/alerts';
import type { BatchCard } from '#shared/contract/batches';
import type { RoomNow } from '#shared/contract/overview';
import type { FrameSource } from './frame-source.js';

/** A room as it is now, for specs. */
export function roomNowOf(roomId: string, celsius: number): RoomNow {
  return {
    roomId,
    celsius,
    humidity: 48,
    dewPoint: 10.1,
    at: '2026-05-04T12:00:00.000Z',
    stale: false,
    condition: 'fine',
    since: null,
    heatLimit: 25,
    peakToday: 23.4,
    slippedHours: 0,
    battery: 87,
  };
}

/** What specs put into frames, and how often each was asked for. */
export class TestSource implements FrameSource {
  readonly celsius = new Map<string, number>();
  readonly curing = new Set<string>();
  readonly alertRooms = new Map<string, string | null>();
  asked = 0;
  fails = false;
  /** Makes frames as large as wanted. */
  padding = '';

  roomNow(roomIds: readonly string[]): RoomNow[] {
    this.asked++;
    if (this.fails) throw new Error('the source fails');
    return roomIds.map((roomId) => roomNowOf(roomId, this.celsius.get(roomId) ?? 20));
  }

  ribbons(fromCells: ReadonlyMap<string, number>) {
    return [...fromCells].map(([roomId, fromCell]) => ({
      roomId,
      ribbon: { from: new Date(Math.max(0, fromCell) * 600_000).toISOString(), celsius: [21.5] },
    }));
  }

  cards(batchIds: readonly string[], forViewer: boolean): BatchCard[] {
    return batchIds
      .filter((id) => this.curing.has(id))
      .map((id) => ({
        id,
        designName: forViewer ? null : `Harvest ${this.padding}`,
        waxFamily: forViewer ? null : 'soy',
      }))
      .map((card) => card as unknown as BatchCard);
  }

  async alerts(alertIds: readonly string[]): Promise<Alert[]> {
    return alertIds.map((id) => ({ id, roomId: this.alertRooms.get(id) ?? null }) as unknown as Alert);
  }
}
