import { computed, type Signal, signal } from '@angular/core';
import type { Alert } from '#shared/contract/alerts';
import type { BatchCard } from '#shared/contract/batches';
import type { LiveFrame } from '#shared/contract/live';
import type { StudioWall } from '#shared/contract/overview';
import type { Studio } from '#shared/contract/studios';
import { RoomLive } from './room-live';

/** One studio as it is now. */
export class StudioLive {
  readonly id: string;
  readonly studio: Signal<Studio>;
  /** In the order of the studio. */
  readonly rooms: Signal<readonly RoomLive[]>;
  /** Every curing batch, placed or not. */
  readonly batches: Signal<readonly BatchCard[]>;
  /** Curing batches that stand on no shelf. */
  readonly unplaced: Signal<readonly BatchCard[]>;
  /** Open and shelved alerts, the oldest first; empty for a viewer. */
  readonly alerts: Signal<readonly Alert[]>;

  private readonly writableStudio;
  private readonly writableRooms = signal<readonly RoomLive[]>([]);
  private readonly writableBatches = signal<ReadonlyMap<string, BatchCard>>(new Map());
  private readonly writableAlerts = signal<readonly Alert[]>([]);

  constructor(wall: StudioWall) {
    this.id = wall.studio.id;
    this.writableStudio = signal(wall.studio);
    this.studio = this.writableStudio.asReadonly();
    this.rooms = this.writableRooms.asReadonly();
    this.alerts = this.writableAlerts.asReadonly();
    this.batches = computed(() => [...this.writableBatches().values()]);
    this.unplaced = computed(() => this.batches().filter((batch) => batch.shelfId === null));
    this.takeWall(wall);
  }

  /** Takes the studio from a fresh overview; rooms that stay keep their objects. */
  takeWall(wall: StudioWall): void {
    this.writableStudio.set(wall.studio);
    const known = new Map(this.writableRooms().map((room) => [room.id, room]));
    const rooms = [...wall.rooms]
      .sort((a, b) => a.position - b.position || a.name.localeCompare(b.name))
      .map((roomWall) => {
        const room = known.get(roomWall.id);
        room?.takeWall(roomWall);
        return room ?? new RoomLive(this.id, roomWall);
      });
    this.writableRooms.set(rooms);
    this.writableBatches.set(new Map(wall.batches.map((batch) => [batch.id, batch])));
    const byRoom = groupedByRoom(wall.batches);
    for (const room of rooms) room.takeBatches(byRoom.get(room.id) ?? []);
    this.writableAlerts.set(wall.alerts);
  }

  /** Lays a live frame over what is known; only the rooms it names change. */
  takeFrame(frame: LiveFrame): void {
    const rooms = new Map(this.writableRooms().map((room) => [room.id, room]));
    for (const now of frame.rooms) rooms.get(now.roomId)?.takeNow(now);
    for (const { roomId, ribbon } of frame.ribbons) rooms.get(roomId)?.takeRibbon(ribbon);
    this.takeBatches(frame.batches, frame.goneBatches, rooms);
    if (frame.alerts.length > 0) this.takeAlerts(frame.alerts);
  }

  private takeBatches(
    changed: readonly BatchCard[],
    gone: readonly string[],
    rooms: ReadonlyMap<string, RoomLive>,
  ): void {
    if (changed.length === 0 && gone.length === 0) return;
    const batches = new Map(this.writableBatches());
    const touched = new Set<string>();
    const touch = (batch: BatchCard | undefined) => {
      if (batch?.roomId) touched.add(batch.roomId);
    };
    for (const batch of changed) {
      touch(batches.get(batch.id));
      touch(batch);
      batches.set(batch.id, batch);
    }
    for (const id of gone) {
      touch(batches.get(id));
      batches.delete(id);
    }
    this.writableBatches.set(batches);
    const byRoom = groupedByRoom(batches.values());
    for (const roomId of touched) rooms.get(roomId)?.takeBatches(byRoom.get(roomId) ?? []);
  }

  private takeAlerts(changed: readonly Alert[]): void {
    this.writableAlerts.update((before) => {
      const alerts = new Map(before.map((alert) => [alert.id, alert]));
      for (const alert of changed) {
        if (alert.state === 'cleared') alerts.delete(alert.id);
        else alerts.set(alert.id, alert);
      }
      return [...alerts.values()].sort((a, b) => a.raisedAt.localeCompare(b.raisedAt));
    });
  }
}

function groupedByRoom(batches: Iterable<BatchCard>): ReadonlyMap<string, BatchCard[]> {
  const groups = new Map<string, BatchCard[]>();
  for (const batch of batches) {
    if (batch.roomId === null) continue;
    const group = groups.get(batch.roomId);
    if (group) group.push(batch);
    else groups.set(batch.roomId, [batch]);
  }
  return groups;
}
