import type { PersonChanged } from '../announcements.js';

const KEPT = 500;

/** The latest changes of people, so that a connection made while one was told can be compared with it. */
export class RecentChanges {
  readonly #latest: PersonChanged[] = [];
  #count = 0;

  /** How many changes have been told so far. */
  get count(): number {
    return this.#count;
  }

  add(change: PersonChanged): void {
    this.#count++;
    this.#latest.push(change);
    if (this.#latest.length > KEPT) this.#latest.shift();
  }

  /** Why a person looked up when `count` changes had been told must be looked up again, or null. */
  since(count: number, person: { id: string; sessionId: string }): PersonChanged['reason'] | null {
    const missed = this.#count - count;
    if (missed > this.#latest.length) return 'role-changed';
    const change = this.#latest
      .slice(this.#latest.length - missed)
      .find(
        ({ personId, sessionId }) =>
          personId === person.id && (sessionId === null || sessionId === person.sessionId),
      );
    return change?.reason ?? null;
  }
}
