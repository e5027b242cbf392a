import { swingDamage } from '#shared/cure/frosting';
import { RainflowCounter } from '#shared/cure/rainflow';
import type { Segment } from '#shared/cure/stays';

/**
 * The swings one batch has gone through, carried on from cell to cell over its stays. Counted anew only when a cell it has
 * already seen was changed, or a room's history was built anew.
 */
export class BatchCycles {
  #counter = new RainflowCounter();
  #closedDamage = 0;
  #next = -Infinity;
  #seen = '';
  #segments = 0;

  /** C of the frosting index over the observed cells of the segments; filled cells are left out. */
  damage(segments: readonly Segment[]): number {
    const end = segments.at(-1)?.to ?? -Infinity;
    const seen = segments
      .map((segment) =>
        segment.kind === 'room'
          ? `${segment.room.serial}:${segment.from}:${segment.room.rewrites};`
          : `-${segment.from};`,
      )
      .join('');
    // The stretch that was the last one may have grown or ended, but not before what was counted.
    const resumed = segments[this.#segments - 1];
    const carriesOn = resumed !== undefined && resumed.to >= this.#next && seen.startsWith(this.#seen);
    if (!carriesOn) {
      this.#closedDamage = 0;
      this.#next = -Infinity;
      this.#counter = new RainflowCounter((range) => (this.#closedDamage += swingDamage(range)));
    }
    this.#seen = seen;
    this.#segments = segments.length;
    for (const segment of segments) {
      if (segment.kind === 'hole') continue;
      for (let cell = Math.max(segment.from, this.#next); cell < segment.to; cell++) {
        const celsius = segment.room.observed(cell);
        if (!Number.isNaN(celsius)) this.#counter.push(celsius);
      }
    }
    this.#next = end;
    return this.#counter.residual().reduce((sum, range) => sum + swingDamage(range), this.#closedDamage);
  }
}
