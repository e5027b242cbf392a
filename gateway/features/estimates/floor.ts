import { cellOf } from '#shared/cure/grid';
import type { BatchFacts } from './batch-facts-repository.js';

/** The curing batches of all studios and where they stood and stand. */
export class Floor {
  readonly #batches = new Map<string, BatchFacts>();
  /** Batches that ever stood in a room. */
  readonly #inRoom = new Map<string, Set<string>>();

  get(batchId: string): BatchFacts | undefined {
    return this.#batches.get(batchId);
  }

  all(): BatchFacts[] {
    return [...this.#batches.values()];
  }

  put(facts: BatchFacts): void {
    this.remove(facts.id);
    this.#batches.set(facts.id, facts);
    for (const { roomId } of facts.stays) {
      const ids = this.#inRoom.get(roomId);
      if (ids) ids.add(facts.id);
      else this.#inRoom.set(roomId, new Set([facts.id]));
    }
  }

  remove(batchId: string): void {
    const facts = this.#batches.get(batchId);
    if (!facts) return;
    for (const { roomId } of facts.stays) this.#inRoom.get(roomId)?.delete(batchId);
    this.#batches.delete(batchId);
  }

  replace(batches: readonly BatchFacts[]): void {
    this.#batches.clear();
    this.#inRoom.clear();
    for (const facts of batches) this.put(facts);
  }

  /** Ids of a studio's curing batches, oldest pour first. */
  curingIn(studioId: string): string[] {
    return this.all()
      .filter((facts) => facts.studioId === studioId)
      .sort((a, b) => a.pouredAt - b.pouredAt || (a.code < b.code ? -1 : 1))
      .map(({ id }) => id);
  }

  /** Batches that stand in a room now. */
  standing(roomId: string): BatchFacts[] {
    const found: BatchFacts[] = [];
    for (const id of this.#inRoom.get(roomId) ?? []) {
      const facts = this.#batches.get(id);
      const last = facts?.stays.at(-1);
      if (facts && last?.to === null && last.roomId === roomId) found.push(facts);
    }
    return found;
  }

  /** Batches that stood in one of these rooms at or after the room's first changed cell. */
  touchedBy(changed: ReadonlyMap<string, number>): BatchFacts[] {
    const found = new Set<BatchFacts>();
    for (const [roomId, fromCell] of changed) {
      for (const id of this.#inRoom.get(roomId) ?? []) {
        const facts = this.#batches.get(id);
        const stoodThen = facts?.stays.some(
          (stay) => stay.roomId === roomId && (stay.to === null || cellOf(stay.to) > fromCell),
        );
        if (facts && stoodThen) found.add(facts);
      }
    }
    return [...found];
  }
}
