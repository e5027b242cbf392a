import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  untracked,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect } from '@angular/material/select';
import { Router, RouterLink } from '@angular/router';
import type { BatchCard, batchRoutes } from '#shared/contract/batches';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { LiveStore } from '../../core/live/live-store';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { DataTable } from '../../ui/data-table';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { SortHeader } from '../../ui/sort-header';
import { StatusMark } from '../../ui/status-mark';
import {
  batchLine,
  type Column,
  COLUMN_WORDS,
  COLUMNS,
  FIGURE_COLUMNS,
  type ListSorting,
  RECIPE_COLUMNS,
  sortedBatches,
  withLive,
} from './batch-list';
import { ChosenColumns } from './chosen-columns';

type Status = 'curing' | 'ended' | 'all';

/** What was loaded, and for which question. */
interface Found {
  readonly studioId: string;
  readonly total: number;
  readonly batches: readonly BatchCard[];
}

const A_PAGE = 100;
const SEARCH_PAUSE_MS = 250;

/** Batches of a studio: found by code, design, wax or fragrance; sorted; page by page. */
@Component({
  selector: 'sr-batches-page',
  imports: [
    DataTable,
    EmptyNote,
    ErrorNote,
    LoadingNote,
    MatButton,
    MatButtonToggle,
    MatButtonToggleGroup,
    MatFormField,
    MatInput,
    MatLabel,
    MatOption,
    MatSelect,
    PageHeader,
    RouterLink,
    SortHeader,
    StatusMark,
  ],
  templateUrl: './batches-page.html',
  styleUrl: './batches-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class BatchesPage {
  // From the address.
  readonly status = input('curing', {
    transform: (text?: string): Status => (text === 'ended' || text === 'all' ? text : 'curing'),
  });
  readonly studio = input('', { transform: (text?: string) => text ?? '' });
  readonly search = input('', { transform: (text?: string) => text ?? '' });
  /** "next" or "-next". */
  readonly sort = input('', { transform: (text?: string) => text ?? '' });

  private readonly api = inject(Api);
  private readonly router = inject(Router);
  private readonly session = inject(Session);
  private readonly clock = inject(StudioClock);
  private readonly formatsOf = inject(Formats);
  protected readonly live = inject(LiveStore);
  protected readonly chosen = inject(ChosenColumns);
  protected readonly found = new Loadable<Found>();
  protected readonly figureColumns = FIGURE_COLUMNS;
  protected readonly words = COLUMN_WORDS;
  private searchTimer: ReturnType<typeof setTimeout> | undefined;
  /** Number of curing batches: changes when one was poured or has left. */
  private readonly curing = computed(() => this.place()?.batches().length ?? 0);

  /** The studio shown. */
  protected readonly place = computed(
    () => this.live.studios().find(({ id }) => id === this.studio()) ?? this.live.studios()[0] ?? null,
  );
  private readonly studioId = computed(() => this.place()?.id ?? null);
  protected readonly mayPour = computed(() => this.session.may('batches.pour', this.studioId() ?? ''));
  protected readonly recipe = computed(() => this.session.may('batches.recipe', this.studioId() ?? ''));
  protected readonly sorting = computed<ListSorting>(() => {
    const text = this.sort();
    const by = COLUMNS.find((column) => column === text.replace('-', '')) ?? 'poured';
    return { by, direction: text !== '' && !text.startsWith('-') ? 'ascending' : 'descending' };
  });
  /** Columns this person may see. */
  protected readonly possible = computed(() =>
    COLUMNS.filter((column) => this.recipe() || !RECIPE_COLUMNS.has(column)),
  );
  protected readonly columns = computed(() =>
    this.possible().filter((column) => column === 'code' || this.chosen.columns().includes(column)),
  );
  private readonly racks = computed(() => {
    const rooms = this.place()?.rooms() ?? [];
    return new Map(
      rooms.flatMap((room) =>
        room.info().racks.map((rack) => [rack.id, `${room.info().name}, ${rack.name}`] as const),
      ),
    );
  });
  /** What was found for the studio shown; an answer for another one is not mixed in. */
  protected readonly shown = computed(() => {
    const [found, place] = [this.found.value(), this.place()];
    return found && place && found.studioId === place.id ? found : null;
  });
  protected readonly lines = computed(() => {
    const [found, place] = [this.shown(), this.place()];
    if (!found || !place) return [];
    const formats = this.formatsOf.of(place.studio());
    const now = this.clock.cell();
    const placeOf = (rackId: string) => this.racks().get(rackId) ?? '';
    const batches = withLive(found.batches, place.batches());
    return sortedBatches(batches, this.sorting(), placeOf).map((batch) =>
      batchLine(batch, formats, placeOf, now),
    );
  });
  protected readonly counted = computed(() => {
    const found = this.shown();
    if (!found) return '';
    const vessels = found.batches.reduce((sum, batch) => sum + batch.vessels, 0);
    const usual = this.sorting().by === 'poured' && this.sorting().direction === 'descending';
    const part = found.batches.length < found.total;
    return [
      `${part ? `${found.batches.length} of ${found.total}` : found.total} batches, ${vessels} vessels.`,
      part && !usual ? 'Sorted among those shown.' : '',
    ].join(' ');
  });

  constructor() {
    effect(() => {
      if (this.studioId() === null) return;
      this.status();
      this.search();
      this.curing();
      untracked(() => void this.load());
    });
  }

  protected choose(change: { status?: string; studio?: string; search?: string; sort?: string }): void {
    const queryParams = Object.fromEntries(
      Object.entries(change).map(([key, value]) => [key, value === '' || value === 'curing' ? null : value]),
    );
    void this.router.navigate([], { queryParams, queryParamsHandling: 'merge', replaceUrl: true });
  }

  protected searchFor(text: string): void {
    clearTimeout(this.searchTimer);
    this.searchTimer = setTimeout(() => this.choose({ search: text.trim() }), SEARCH_PAUSE_MS);
  }

  protected sortBy({ by, direction }: { by: string; direction: ListSorting['direction'] }): void {
    this.choose({ sort: direction === 'ascending' ? by : `-${by}` });
  }

  protected showColumns(columns: readonly Column[]): void {
    this.chosen.choose(columns);
  }

  /** Loads as many as are shown already, a page at least. */
  protected load(): Promise<void> {
    const known = this.shown()?.batches.length ?? 0;
    return this.found.load(() => this.read(0, Math.min(500, Math.max(A_PAGE, known))));
  }

  protected more(): Promise<void> {
    const known = this.shown()?.batches ?? [];
    return this.found.load(async () => {
      const page = await this.read(known.length, A_PAGE);
      const ids = new Set(known.map(({ id }) => id));
      return { ...page, batches: [...known, ...page.batches.filter(({ id }) => !ids.has(id))] };
    });
  }

  private async read(offset: number, limit: number): Promise<Found> {
    const studioId = this.studioId() ?? '';
    const search = this.search();
    const page = await this.api.call<typeof batchRoutes.list>('GET', '/api/studios/:studioId/batches', {
      params: { studioId },
      query: { status: this.status(), offset, limit, ...(search === '' ? {} : { search }) },
    });
    return { studioId, ...page };
  }
}
