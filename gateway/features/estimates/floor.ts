import { cellOf } from '#shared/cure/grid';
import type { BatchFacts, DesignFacts } from './batch-facts-repository.js';

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

  /** Takes these batches instead of all others; returns the ids of those that were not there just like that before. */
  replace(batches: readonly BatchFacts[]): string[] {
    const before = new Map(this.#batches);
    const sameDesign = memoised((a: DesignFacts, b: DesignFacts) => JSON.stringify(a) === JSON.stringify(b));
    this.#batches.clear();
    this.#inRoom.clear();
    for (const facts of batches) this.put(facts);
    return batches
      .filter((facts) => {
        const old = before.get(facts.id);
        return !old || !sameDesign(old.design, facts.design) || !sameBatch(old, facts);
      })
      .map(({ id }) => id);
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

function sameBatch(a: BatchFacts, b: BatchFacts): boolean {
  const { design: _a, ...left } = a;
  const { design: _b, ...right } = b;
  return JSON.stringify(left) === JSON.stringify(right);
}

/** Many batches share a design: each pair is compared once. */
function memoised<T extends object>(compare: (a: T, b: T) => boolean): (a: T, b: T) => boolean {
  const known = new Map<T, Map<T, boolean>>();
  return (a, b) => {
    const ofA = known.get(a) ?? new Map<T, boolean>();
    if (ofA.size === 0) known.set(a, ofA);
    let same = ofA.get(b);
    if (same === undefined) {
      same = compare(a, b);
      ofA.set(b, same);
    }
    return same;
  };
}
