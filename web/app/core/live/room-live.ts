import { computed, type Signal, signal } from '@angular/core';
import type { BatchCard } from '#shared/contract/batches';
import type { Ribbon, RoomNow, RoomWall } from '#shared/contract/overview';
import { mergedRibbon } from './ribbon-merge';

/** What of a room changes only when somebody changes it. */
export type RoomInfo = Pick<RoomWall, 'id' | 'name' | 'position' | 'limits' | 'racks'>;

/** One room as it is now; each part is a signal of its own, so that a frame redraws only what it touches. */
export class RoomLive {
  readonly id: string;
  readonly studioId: string;
  readonly info: Signal<RoomInfo>;
  readonly now: Signal<RoomNow>;
  /** What `now` says of them, for what need not change with every reading. */
  readonly condition = computed(() => this.now().condition);
  readonly stale = computed(() => this.now().stale);
  readonly ribbon: Signal<Ribbon>;
  /** Curing batches standing in the room. */
  readonly batches: Signal<readonly BatchCard[]>;

  private readonly writableInfo;
  private readonly writableNow;
  private readonly writableRibbon;
  private readonly writableBatches = signal<readonly BatchCard[]>([]);

  constructor(studioId: string, wall: RoomWall) {
    this.id = wall.id;
    this.studioId = studioId;
    this.writableInfo = signal<RoomInfo>(wall);
    this.writableNow = signal(wall.now);
    this.writableRibbon = signal(wall.ribbon);
    this.info = this.writableInfo.asReadonly();
    this.now = this.writableNow.asReadonly();
    this.ribbon = this.writableRibbon.asReadonly();
    this.batches = this.writableBatches.asReadonly();
  }

  /** Takes the room from a fresh overview. */
  takeWall(wall: RoomWall): void {
    this.writableInfo.set(wall);
    this.writableNow.set(wall.now);
    this.writableRibbon.set(wall.ribbon);
  }

  takeNow(now: RoomNow): void {
    this.writableNow.set(now);
  }

  /** Takes finished cells; they replace or continue what is known. */
  takeRibbon(cells: Ribbon): void {
    this.writableRibbon.update((before) => mergedRibbon(before, cells));
  }

  takeBatches(batches: readonly BatchCard[]): void {
    this.writableBatches.set(batches);
  }
}
