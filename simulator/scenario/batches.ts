import type { DemoScenario } from '#shared/contract/demo-scenario';
import { WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';
import { hashed } from '../physics/seeded-noise.js';
import { DEMO_DESIGNS, DEMO_POUR, DEMO_WAXES } from './goods.js';
import { DEMO_STUDIOS, type DemoStudio } from './places.js';

type Batch = DemoScenario['batches'][number];

const DAY_MS = 86_400_000;
const HOUR_MS = 3_600_000;
const FIRST_POUR_DAYS_AGO = 88;
/** One pour in this many days on average, by studio. */
const DAYS_A_POUR: Readonly<Record<string, number>> = { quay: 0.75, barn: 1.15, juniper: 1.3 };
/** Who pours and who signs. */
const POURER: Readonly<Record<string, string>> = { quay: 'tomas', barn: 'tomas', juniper: 'orla' };
const SIGNER: Readonly<Record<string, string>> = { quay: 'ines', barn: 'joonas', juniper: 'joonas' };

interface Place {
  readonly rack: string;
  readonly shelf: number;
  readonly room: string;
  readonly capacity: number;
  /** When the last batch leaves; epoch ms. */
  freeFrom: number;
}

/** Batches of ninety days: poured, placed, some moved, tested, dispatched; the later ones still curing. */
export function demoBatches(seed: number, now: number): Batch[] {
  return DEMO_STUDIOS.flatMap((studio, index) => batchesOf(studio, seed + index * 1000, now));
}

function batchesOf(studio: DemoStudio, seed: number, now: number): Batch[] {
  const places = placesOf(studio);
  const letter = studio.name.charAt(0);
  const batches: Batch[] = [];
  const tested = new Map<string, number>();
  let pour = 0;
  for (let at = now - FIRST_POUR_DAYS_AGO * DAY_MS; at < now - 7 * HOUR_MS; pour++) {
    const random = (salt: number) => hashed(seed, pour, salt);
    const design = DEMO_DESIGNS[Math.floor(random(1) ** 1.3 * DEMO_DESIGNS.length)] ?? DEMO_DESIGNS[0];
    if (!design) break;
    const family = DEMO_WAXES.find(({ key }) => key === design.wax)?.family ?? 'soy-container';
    const { kinetics } = WAX_FAMILY_DEFAULTS[family];
    const pouredAt = workingHour(at, random(2));
    const vessels = 12 + 6 * Math.floor(random(3) * 4);
    const ready = Math.max(kinetics.testDays, kinetics.shipDays) * 1.1;
    const leaves = pouredAt + (ready + 1 + random(4) * 6) * DAY_MS;
    const ended =
      leaves < now
        ? { as: random(5) < 0.04 ? ('scrapped' as const) : ('dispatched' as const), at: iso(leaves) }
        : null;
    const place = freePlace(places, pouredAt, vessels, random(6));
    const stays: Batch['stays'] = [];
    if (place) {
      const end = ended ? leaves : Infinity;
      const moves = random(7) < 0.16 ? pouredAt + (2 + random(8) * 4) * DAY_MS : Infinity;
      const second =
        moves < Math.min(end, now) ? freePlace(places, moves, vessels, random(9), place.room) : null;
      stays.push({
        rack: place.rack,
        shelf: place.shelf,
        from: iso(pouredAt),
        to: second ? iso(moves) : (ended?.at ?? null),
      });
      place.freeFrom = second ? moves : end;
      if (second) {
        stays.push({ rack: second.rack, shelf: second.shelf, from: iso(moves), to: ended?.at ?? null });
        second.freeFrom = end;
      }
    }
    const testAt = pouredAt + (kinetics.testDays * 1.12 + random(10) * 2) * DAY_MS;
    const due = (tested.get(design.key) ?? -Infinity) < testAt - 30 * DAY_MS;
    const mayTest = testAt < now - DAY_MS && (ended === null || testAt < leaves) && stays.length > 0;
    const tests: Batch['tests'] = [];
    if (due && mayTest) {
      tested.set(design.key, testAt);
      const passed = random(11) > 0.15;
      tests.push({
        at: iso(testAt),
        passed,
        note: passed ? 'Full pool after three hours, no mushrooming.' : 'Tunnels: one wick size up.',
        signedBy: SIGNER[studio.key] ?? 'marit',
      });
    }
    batches.push({
      code: `${letter}-${101 + pour}`,
      studio: studio.key,
      design: design.key,
      vessels,
      pouredAt: iso(pouredAt),
      pouredBy: POURER[studio.key] ?? 'marit',
      pourCelsius: (DEMO_POUR[design.wax] ?? 60) + Math.round(random(12) * 3),
      notes: '',
      stays,
      ended,
      tests,
    });
    at += (DAYS_A_POUR[studio.key] ?? 2) * DAY_MS * (0.5 + random(13));
  }
  return batches;
}

function placesOf(studio: DemoStudio): Place[] {
  return studio.rooms.flatMap((room) =>
    Array.from({ length: room.racks }, (_, rack) =>
      room.shelves.map((capacity, shelf) => ({
        rack: rackKey(room.key, rack),
        shelf: shelf + 1,
        room: room.key,
        capacity,
        freeFrom: -Infinity,
      })),
    ).flat(),
  );
}

/** Name of a rack within the scenario. */
export function rackKey(room: string, index: number): string {
  return `${room}/${index + 1}`;
}

/** A free shelf with room enough; one of the first few, so that racks fill from the left. */
function freePlace(
  places: readonly Place[],
  at: number,
  vessels: number,
  random: number,
  notIn?: string,
): Place | null {
  const free = places.filter(
    (place) => place.freeFrom <= at && place.capacity >= vessels && place.room !== notIn,
  );
  return free[Math.floor(random * Math.min(free.length, 14))] ?? null;
}

/** Between 8 and 16 UTC of the day. */
function workingHour(at: number, random: number): number {
  const day = Math.floor(at / DAY_MS) * DAY_MS;
  return day + Math.round((8 + random * 8) * 4) * (HOUR_MS / 4);
}

function iso(ms: number): string {
  return new Date(Math.round(ms / 60_000) * 60_000).toISOString();
}
