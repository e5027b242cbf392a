import type { BatchCard } from '#shared/contract/batches';
import type { StudioFormats } from '../time/studio-formats';
import type { StudioLive } from './studio-live';

/** A room this close below a frosting limit may be above it on the next warm day, K. */
const CLOSE_KELVIN = 2;

/** Free places of a shelf in vessels of 75 mm, as far as the curing batches tell. */
function freeOn(shelfId: string, capacity: number, batches: readonly BatchCard[]): number {
  return (
    capacity -
    batches.filter((batch) => batch.shelfId === shelfId).reduce((sum, { vessels }) => sum + vessels, 0)
  );
}

/**
 * Shelves of a studio room by room, those that suit best first: rooms below the wax's frosting limit, then shelves with
 * room for all vessels.
 * @param frostingFrom limit of the wax, °C; null for waxes that do not frost or are not known
 */
export function shelfGroups(
  studio: StudioLive,
  vessels: number,
  frostingFrom: number | null,
  formats: StudioFormats,
) {
  const groups = studio.rooms().map((room) => {
    const { celsius, stale } = room.now();
    const tooWarm = frostingFrom !== null && celsius !== null && !stale && celsius > frostingFrom;
    const shelves = room.info().racks.flatMap((rack) =>
      rack.shelves.map((shelf) => {
        const free = freeOn(shelf.id, shelf.capacity, room.batches());
        const words =
          free === shelf.capacity ? `empty, room for ${free}` : free <= 0 ? 'full' : `room for ${free}`;
        return { id: shelf.id, name: `${rack.name}, shelf ${shelf.position}`, room: words, free };
      }),
    );
    const fitness =
      celsius === null
        ? ''
        : tooWarm
          ? `${formats.temperature(celsius)} now, too warm for this wax`
          : `${stale ? 'last ' : ''}${formats.temperature(celsius)}${stale ? '' : ' now'}`;
    const close = frostingFrom !== null && celsius !== null && celsius > frostingFrom - CLOSE_KELVIN;
    return { roomName: room.info().name, fitness, tooWarm, close, stale, shelves };
  });
  const suggestion = groups
    .filter(({ tooWarm, stale }) => !tooWarm && !stale)
    .flatMap(({ roomName, close, shelves }) =>
      shelves.filter(({ free }) => free >= vessels).map((shelf) => ({ roomName, close, ...shelf })),
    )
    // A room close to the limit comes last; the tightest fit leaves the large gaps for large batches.
    .sort((a, b) => Number(a.close) - Number(b.close) || a.free - b.free)[0];
  return {
    groups: [...groups].sort((a, b) => Number(a.tooWarm) - Number(b.tooWarm)),
    suggestion: suggestion ?? null,
  };
}

/** What speaks against a shelf, in words; none where it suits. @param places room needed, in vessels of 75 mm */
export function shelfDoubts(
  groups: ReturnType<typeof shelfGroups>['groups'],
  shelfId: string,
  places: number,
): { readonly tooWarm: string; readonly full: string } {
  const group = groups.find(({ shelves }) => shelves.some(({ id }) => id === shelfId));
  const shelf = group?.shelves.find(({ id }) => id === shelfId);
  return {
    tooWarm: group?.tooWarm
      ? `${group.roomName} is above the frosting limit of this wax now: it may cure sooner and frost.`
      : '',
    full:
      shelf && shelf.free < places
        ? `This shelf has room for ${Math.max(0, shelf.free)} more vessels of 75 mm; this batch takes ${places}.`
        : '',
  };
}
