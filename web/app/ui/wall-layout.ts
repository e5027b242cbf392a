import type { BatchCard } from '#shared/contract/batches';
import type { Rack } from '#shared/contract/racks';

/** A batch on its shelf, ready to be drawn. */
export interface BlockView {
  readonly id: string;
  readonly code: string;
  /** What comes next, e.g. "test"; '' when nothing does. */
  readonly what: string;
  /** When, e.g. "Fri 8 May", or "ready". */
  readonly when: string;
  /** Everything the block shows, in one sentence for screen readers. */
  readonly label: string;
  /** 0–1; 0 when unknown. */
  readonly hardening: number;
  readonly scent: number;
  /** Part of the shelf it fills, 0–1. */
  readonly share: number;
  readonly ready: boolean;
  readonly risk: boolean;
  /** Part of the way from the pour to the last gate that lies behind, 0–1. */
  readonly passed: number;
  /** Where on that way the next gate stands, 0–1; null when there is none ahead. */
  readonly gateAt: number | null;
}

export interface ShelfView {
  readonly id: string;
  /** 1 is the top shelf. */
  readonly position: number;
  readonly capacity: number;
  readonly vessels: number;
  readonly blocks: readonly BlockView[];
}

export interface RackView {
  readonly id: string;
  readonly name: string;
  readonly shelves: readonly ShelfView[];
}

export interface BlockWords {
  readonly what: string;
  readonly when: string;
  readonly label: string;
}

const SMALLEST_SHARE = 0.12;

/**
 * The wall of a room: racks side by side, shelves from the top, each batch where it stands, the oldest first.
 * @param words what a block says
 * @param now epoch ms
 */
export function wallLayout(
  racks: readonly Rack[],
  batches: readonly BatchCard[],
  words: (batch: BatchCard) => BlockWords,
  now: number,
): RackView[] {
  const onShelf = new Map<string, BatchCard[]>();
  for (const batch of batches) {
    if (batch.shelfId === null) continue;
    const there = onShelf.get(batch.shelfId);
    if (there) there.push(batch);
    else onShelf.set(batch.shelfId, [batch]);
  }
  return [...racks]
    .sort((a, b) => a.position - b.position || a.name.localeCompare(b.name, 'en', { numeric: true }))
    .map((rack) => ({
      id: rack.id,
      name: rack.name,
      shelves: [...rack.shelves]
        .sort((a, b) => a.position - b.position)
        .map((shelf) => shelfView(shelf, onShelf.get(shelf.id) ?? [], words, now)),
    }));
}

function shelfView(
  shelf: Rack['shelves'][number],
  batches: BatchCard[],
  words: (batch: BatchCard) => BlockWords,
  now: number,
): ShelfView {
  const sorted = batches.sort((a, b) => a.pouredAt.localeCompare(b.pouredAt) || a.code.localeCompare(b.code));
  const vessels = sorted.reduce((sum, batch) => sum + batch.vessels, 0);
  const full = Math.max(shelf.capacity, vessels);
  return {
    id: shelf.id,
    position: shelf.position,
    capacity: shelf.capacity,
    vessels,
    blocks: sorted.map((batch) => ({
      id: batch.id,
      code: batch.code,
      ...words(batch),
      hardening: batch.hardening ?? 0,
      scent: batch.scent ?? 0,
      share: Math.max(SMALLEST_SHARE, batch.vessels / full),
      ready: batch.ship.state === 'reached',
      risk: batch.atRisk,
      ...way(batch, now),
    })),
  };
}

/** How far a batch has come between its pour and the ship gate, and where the next gate stands on that way. */
function way(batch: BatchCard, now: number): { passed: number; gateAt: number | null } {
  const poured = Date.parse(batch.pouredAt);
  const ship = gateTime(batch.ship);
  const test = gateTime(batch.wickTest);
  const end = Math.max(ship ?? 0, test ?? 0);
  if (batch.ship.state === 'reached') return { passed: 1, gateAt: null };
  if (end <= poured) return { passed: 0, gateAt: null };
  const part = (time: number) => Math.min(1, Math.max(0, (time - poured) / (end - poured)));
  const next = batch.wickTest.state === 'reached' ? ship : test;
  return { passed: part(now), gateAt: next === null ? null : part(next) };
}

function gateTime(gate: BatchCard['ship']): number | null {
  const time = gate.reachedAt ?? gate.t50;
  return time === null ? null : Date.parse(time);
}
