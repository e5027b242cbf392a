import type { BatchCard } from '#shared/contract/batches';
import type { Rack } from '#shared/contract/racks';
import { list } from '#shared/words/lists';

export interface ReadinessFormats {
  /** "tonight", "tomorrow", "Fri 8 May" */
  readonly daySeenFrom: (instant: string | number, now: number) => string;
  /** "21:10" */
  readonly time: (instant: string | number) => string;
}

/** When a rack is ready to ship: when the last of its batches is. Times in epoch ms. */
export interface RackReadiness {
  readonly rack: Rack;
  readonly batches: readonly BatchCard[];
  readonly vessels: number;
  /** When the last batch became ready; null while one is not. */
  readonly readySince: number | null;
  /** Middle and 10–90 % range of the last batch's gate; null when ready or without a date. */
  readonly expected: { readonly t10: number; readonly t50: number; readonly t90: number } | null;
}

/** Readiness of every rack that holds something. */
export function rackReadiness(racks: readonly Rack[], batches: readonly BatchCard[]): RackReadiness[] {
  return racks.flatMap((rack) => {
    const standing = batches.filter((batch) => batch.rackId === rack.id);
    if (standing.length === 0) return [];
    const vessels = standing.reduce((sum, batch) => sum + batch.vessels, 0);
    const open = standing.filter((batch) => batch.ship.state !== 'reached');
    return [
      { rack, batches: standing, vessels, readySince: readySince(standing, open), expected: expected(open) },
    ];
  });
}

function readySince(standing: readonly BatchCard[], open: readonly BatchCard[]): number | null {
  if (open.length > 0) return null;
  return latest(standing.map((batch) => batch.ship.reachedAt ?? batch.pouredAt));
}

function expected(open: readonly BatchCard[]): RackReadiness['expected'] {
  if (open.length === 0 || open.some((batch) => batch.ship.t50 === null)) return null;
  const middle = (batch: BatchCard) => batch.ship.t50 ?? batch.pouredAt;
  return {
    t10: latest(open.map((batch) => batch.ship.t10 ?? middle(batch))),
    t50: latest(open.map(middle)),
    t90: latest(open.map((batch) => batch.ship.t90 ?? middle(batch))),
  };
}

function latest(instants: readonly string[]): number {
  return Math.max(...instants.map((instant) => Date.parse(instant)));
}

/**
 * The line under a wall: what is ready now, or which rack is next.
 * @param now epoch ms
 */
export function readyLine(
  racks: readonly Rack[],
  batches: readonly BatchCard[],
  formats: ReadinessFormats,
  now: number,
): { readonly lead: string; readonly rest: string } | null {
  const ready = readyPlaces(racks, batches);
  if (ready.length > 0) return { lead: 'Ready now:', rest: list(ready) };
  const next = rackReadiness(racks, batches)
    .filter((one) => one.expected !== null && one.expected.t50 > now)
    .sort((a, b) => (a.expected?.t50 ?? 0) - (b.expected?.t50 ?? 0))[0];
  if (!next?.expected) return null;
  return { lead: 'Next ready:', rest: `${next.rack.name} ${spread(next.expected, formats, now)}` };
}

/** "tonight 21:10 (20:00 to 22:30)" within a day, else "Thu 7 May (Tue 5 May to Sat 9 May)". */
export function spread(
  range: { readonly t10: number; readonly t50: number; readonly t90: number },
  formats: ReadinessFormats,
  now: number,
): string {
  const day = (time: number) => formats.daySeenFrom(Math.max(time, now), now);
  if (day(range.t10) === day(range.t50) && day(range.t50) === day(range.t90)) {
    return `${day(range.t50)} ${formats.time(range.t50)} (${formats.time(Math.max(range.t10, now))} to ${formats.time(range.t90)})`;
  }
  return `${day(range.t50)} (${day(range.t10)} to ${day(range.t90)})`;
}

/** "Rack 2" for whole racks, "Rack 2 shelves 1 and 2" for shelves that are ready. */
function readyPlaces(racks: readonly Rack[], batches: readonly BatchCard[]): string[] {
  return racks.flatMap((rack) => {
    const filled = rack.shelves
      .map((shelf) => ({ shelf, standing: batches.filter((batch) => batch.shelfId === shelf.id) }))
      .filter(({ standing }) => standing.length > 0);
    const ready = filled.filter(({ standing }) => standing.every((batch) => batch.ship.state === 'reached'));
    if (ready.length === 0) return [];
    if (ready.length === filled.length) return [rack.name];
    const positions = ready.map(({ shelf }) => shelf.position).sort((a, b) => a - b);
    return [`${rack.name} ${positions.length === 1 ? 'shelf' : 'shelves'} ${list(positions.map(String))}`];
  });
}
