import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  signal,
  untracked,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect } from '@angular/material/select';
import { RouterLink } from '@angular/router';
import type { BatchCard, batchRoutes } from '#shared/contract/batches';
import { nextGate } from '#shared/words/gate-words';
import { tradeName } from '#shared/words/room-state';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { LiveStore } from '../../core/live/live-store';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { figure } from '../../core/units/measure-words';
import { DataTable } from '../../ui/data-table';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { SortHeader, type Sorting } from '../../ui/sort-header';

type Status = 'curing' | 'ended' | 'all';
type Column = 'code' | 'design' | 'poured' | 'vessels' | 'hardening' | 'next' | 'frosting';

const A_PAGE = 100;
const SEARCH_PAUSE_MS = 250;

/** Batches of a studio: found by code or design, sorted, page by page. */
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
  ],
  templateUrl: './batches-page.html',
  styles: `
    .filters {
      display: flex;
      flex-wrap: wrap;
      gap: 10px;
      align-items: center;
      margin-block-end: 14px;
    }
    .filters mat-form-field {
      inline-size: 170px;
    }
    .warn {
      color: var(--sr-heat);
      font-weight: 600;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class BatchesPage {
  private readonly api = inject(Api);
  private readonly session = inject(Session);
  private readonly clock = inject(StudioClock);
  private readonly formatsOf = inject(Formats);
  protected readonly live = inject(LiveStore);
  private readonly chosen = signal<string | null>(null);
  protected readonly status = signal<Status>('curing');
  protected readonly search = signal('');
  protected readonly sorting = signal<Sorting<Column>>({ by: 'poured', direction: 'descending' });
  protected readonly found = new Loadable<{ total: number; batches: BatchCard[] }>();
  private searchTimer: ReturnType<typeof setTimeout> | undefined;
  protected readonly studio = computed(
    () => this.live.studios().find(({ id }) => id === this.chosen()) ?? this.live.studios()[0] ?? null,
  );
  protected readonly mayPour = computed(() => this.session.may('batches.pour', this.studio()?.id ?? ''));
  protected readonly recipe = computed(() => this.session.may('batches.recipe', this.studio()?.id ?? ''));
  protected readonly rows = computed(() => {
    const studio = this.studio();
    if (studio === null) return [];
    const formats = this.formatsOf.of(studio.studio());
    const now = this.clock.cell();
    const places = new Map(
      studio
        .rooms()
        .flatMap((room) =>
          room.info().racks.map((rack) => [rack.id, `${room.info().name}, ${rack.name}`] as const),
        ),
    );
    return this.sorted(this.found.value()?.batches ?? []).map((batch) => ({
      id: batch.id,
      code: batch.code,
      design: batch.designName ?? '',
      wax: tradeName(batch.waxFamily),
      poured: formats.day(batch.pouredAt),
      vessels: batch.vessels,
      place:
        batch.rackId === null
          ? batch.status === 'curing'
            ? 'no shelf'
            : ''
          : (places.get(batch.rackId) ?? ''),
      hardening: batch.hardening === null ? '–' : `${Math.round(batch.hardening * 100)} %`,
      next: batch.status === 'curing' ? nextGate(batch, formats, now).sentence : batch.status,
      frosting: batch.frosting === null ? '' : figure(batch.frosting.index, 0),
      risk: batch.atRisk,
    }));
  });

  constructor() {
    effect(() => {
      this.studio();
      this.status();
      untracked(() => void this.load());
    });
  }

  protected choose(studioId: string): void {
    this.chosen.set(studioId);
  }

  protected searchFor(text: string): void {
    this.search.set(text);
    clearTimeout(this.searchTimer);
    this.searchTimer = setTimeout(() => void this.load(), SEARCH_PAUSE_MS);
  }

  protected load(): Promise<void> {
    return this.found.load(() => this.page(0));
  }

  protected more(): Promise<void> {
    const known = this.found.value()?.batches ?? [];
    return this.found.load(async () => {
      const page = await this.page(known.length);
      return { total: page.total, batches: [...known, ...page.batches] };
    });
  }

  private async page(offset: number): Promise<{ total: number; batches: BatchCard[] }> {
    const studioId = this.studio()?.id;
    if (studioId === undefined) return { total: 0, batches: [] };
    const search = this.search().trim();
    return this.api.call<typeof batchRoutes.list>('GET', '/api/studios/:studioId/batches', {
      params: { studioId },
      query: { status: this.status(), offset, limit: A_PAGE, ...(search === '' ? {} : { search }) },
    });
  }

  private sorted(batches: readonly BatchCard[]): BatchCard[] {
    const { by, direction } = this.sorting();
    const key: Readonly<Record<Column, (batch: BatchCard) => string | number>> = {
      code: (batch) => Number(/\d+/.exec(batch.code)?.[0] ?? 0),
      design: (batch) => batch.designName ?? '',
      poured: (batch) => Date.parse(batch.pouredAt),
      vessels: (batch) => batch.vessels,
      hardening: (batch) => batch.hardening ?? -1,
      next: (batch) => Date.parse(batch.ship.reachedAt ?? batch.ship.t50 ?? '9999-01-01'),
      frosting: (batch) => batch.frosting?.index ?? -1,
    };
    const turn = direction === 'ascending' ? 1 : -1;
    return [...batches].sort((a, b) => {
      const [x, y] = [key[by](a), key[by](b)];
      return turn * (typeof x === 'string' ? x.localeCompare(String(y)) : x - Number(y));
    });
  }
}
