import type { BatchCard } from '#shared/contract/batches';
import { nextGate } from '#shared/words/gate-words';
import { tradeName } from '#shared/words/room-state';
import type { StudioFormats } from '../../core/time/studio-formats';
import { figure } from '../../core/units/measure-words';

export const COLUMNS = [
  'code',
  'design',
  'next',
  'place',
  'wax',
  'poured',
  'vessels',
  'hardening',
  'cureAge',
  'frosting',
] as const;
export type Column = (typeof COLUMNS)[number];

export const COLUMN_WORDS: Readonly<Record<Column, string>> = {
  code: 'Batch',
  design: 'Design',
  wax: 'Wax',
  poured: 'Poured',
  vessels: 'Vessels',
  place: 'Where',
  hardening: 'Hardened',
  cureAge: 'Cure age',
  next: 'What is next',
  frosting: 'Frosting index',
};
/** Columns that only people see who may see recipes. */
export const RECIPE_COLUMNS: ReadonlySet<Column> = new Set(['design', 'wax', 'frosting']);
export const FIGURE_COLUMNS: ReadonlySet<Column> = new Set(['vessels', 'hardening', 'cureAge', 'frosting']);
/** Shown until somebody chooses otherwise. */
export const USUAL_COLUMNS: readonly Column[] = COLUMNS.filter((column) => column !== 'cureAge');
/** The same on a phone: what fits beside each other. */
export const NARROW_COLUMNS: readonly Column[] = ['code', 'design', 'next', 'place'];

export interface ListSorting {
  readonly by: Column;
  readonly direction: 'ascending' | 'descending';
}

/** One batch as a line of the list: a text for each column. */
export interface BatchLine {
  readonly id: string;
  readonly texts: Readonly<Record<Column, string>>;
  /** Frosting-prone wax above its limit right now. */
  readonly atRisk: boolean;
}

/**
 * What was loaded, with what the live connection has told since laid over it.
 * @param live curing batches of the studio as they are now
 */
export function withLive(loaded: readonly BatchCard[], live: readonly BatchCard[]): BatchCard[] {
  const now = new Map(live.map((batch) => [batch.id, batch]));
  return loaded.map((batch) => now.get(batch.id) ?? batch);
}

/** @param placeOf "Loft, Rack 2" of a rack, or '' @param now epoch ms */
export function batchLine(
  batch: BatchCard,
  formats: StudioFormats,
  placeOf: (rackId: string) => string,
  now: number,
): BatchLine {
  const curing = batch.status === 'curing';
  return {
    id: batch.id,
    atRisk: batch.atRisk,
    texts: {
      code: batch.code,
      design: batch.designName ?? '',
      wax: tradeName(batch.waxFamily),
      poured: formats.day(batch.pouredAt),
      vessels: String(batch.vessels),
      place: batch.rackId !== null ? placeOf(batch.rackId) : curing ? 'no shelf' : '',
      hardening: batch.hardening === null ? '–' : `${figure(batch.hardening * 100, 0)} %`,
      cureAge: batch.cureAgeDays === null ? '–' : `${figure(batch.cureAgeDays, 1)} d`,
      next: curing ? nextGate(batch, formats, now).sentence : batch.status,
      frosting: batch.frosting === null ? '' : figure(batch.frosting.index, 0),
    },
  };
}

/** Sorts by what a column means, not by how it is written; equal ones newest first. */
export function sortedBatches(
  batches: readonly BatchCard[],
  { by, direction }: ListSorting,
  placeOf: (rackId: string) => string,
): BatchCard[] {
  const turn = direction === 'ascending' ? 1 : -1;
  const key = (batch: BatchCard) => sortKey(batch, by, placeOf);
  return [...batches].sort((a, b) => turn * compared(key(a), key(b)) || b.pouredAt.localeCompare(a.pouredAt));
}

function sortKey(batch: BatchCard, by: Column, placeOf: (rackId: string) => string): string | number {
  switch (by) {
    case 'code':
      return batch.code;
    case 'design':
      return batch.designName ?? '';
    case 'wax':
      return tradeName(batch.waxFamily);
    case 'poured':
      return Date.parse(batch.pouredAt);
    case 'vessels':
      return batch.vessels;
    case 'place':
      return batch.rackId === null ? '' : placeOf(batch.rackId);
    case 'hardening':
      return batch.hardening ?? -1;
    case 'cureAge':
      return batch.cureAgeDays ?? -1;
    case 'next':
      return nextAt(batch);
    case 'frosting':
      return batch.frosting?.index ?? -1;
  }
}

/** When the next gate is passed: what is ready comes first, what has no date last. */
function nextAt(batch: BatchCard): number {
  if (batch.ship.state === 'reached') return 0;
  const gate = batch.wickTest.state === 'reached' ? batch.ship : batch.wickTest;
  const at = gate.reachedAt ?? gate.t50;
  return at === null ? Infinity : Date.parse(at);
}

/** Figures by size; texts as people sort them, Q-9 before Q-10. */
function compared(a: string | number, b: string | number): number {
  if (typeof a === 'number' && typeof b === 'number') return a === b ? 0 : a < b ? -1 : 1;
  return String(a).localeCompare(String(b), 'en', { numeric: true });
}
