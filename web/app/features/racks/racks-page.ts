import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect } from '@angular/material/select';
import { Router, RouterLink } from '@angular/router';
import { list } from '#shared/words/lists';
import { tradeName } from '#shared/words/room-state';
import { LiveStore } from '../../core/live/live-store';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats, type StudioFormats } from '../../core/time/studio-formats';
import { DAY_MS, instantOfLocal } from '../../core/time/zoned-time';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import {
  calendarDays,
  calendarRow,
  type CalendarRow,
  calendarStart,
  type GateName,
  isReadyBy,
  nextFriday,
  type RackInStudio,
} from './readiness-calendar';
import { readinessSentence } from './readiness-sentence';
import { RackCalendar } from './rack-calendar';
import { RackTable } from './rack-table';

type View = 'calendar' | 'table';

/** What the page shows; kept in the address, so that it survives going back and can be sent to somebody. */
interface Choice {
  readonly gate: GateName;
  readonly studio: string;
  readonly wax: string;
  readonly by: string;
  readonly view: View;
}

const DEFAULTS: Choice = { gate: 'ship', studio: '', wax: '', by: '', view: 'calendar' };

/** The calendar of readiness: one row a rack, four weeks across. */
@Component({
  selector: 'sr-racks-page',
  imports: [
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
    RackCalendar,
    RackTable,
    RouterLink,
  ],
  templateUrl: './racks-page.html',
  styleUrl: './racks-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RacksPage {
  // From the address.
  readonly gate = input(DEFAULTS.gate, {
    transform: (text?: string): GateName => (text === 'wickTest' ? text : DEFAULTS.gate),
  });
  readonly view = input(DEFAULTS.view, {
    transform: (text?: string): View => (text === 'table' ? text : DEFAULTS.view),
  });
  readonly studio = input('', { transform: (text?: string) => text ?? '' });
  readonly wax = input('', { transform: (text?: string) => text ?? '' });
  /** A day chosen as "ready by", e.g. "2026-05-08"; '' for the end of this week. */
  readonly by = input('', {
    transform: (text?: string) => (/^\d{4}-\d\d-\d\d$/.test(text ?? '') ? (text ?? '') : ''),
  });

  protected readonly live = inject(LiveStore);
  private readonly clock = inject(StudioClock);
  private readonly formatsOf = inject(Formats);
  private readonly router = inject(Router);

  private readonly firstFormats = computed(() => {
    const first = this.live.studios()[0];
    return first ? this.formatsOf.of(first.studio()) : null;
  });
  /** The studios asked for. */
  private readonly studios = computed(() =>
    this.live.studios().filter(({ id }) => this.studio() === '' || id === this.studio()),
  );
  private readonly start = computed(() =>
    calendarStart(this.clock.cell(), this.firstFormats()?.timeZone ?? 'UTC'),
  );
  protected readonly days = computed(() => calendarDays(this.start()));
  /** Wax families on the racks; none for a viewer, who sees no recipe. */
  protected readonly waxes = computed(() => {
    const names = this.live
      .studios()
      .flatMap((studio) => studio.batches().map(({ waxFamily }) => tradeName(waxFamily)));
    return [...new Set(names)].filter((name) => name !== '').sort();
  });
  private readonly places = computed<readonly RackInStudio[]>(() =>
    this.studios().flatMap((live) => {
      const studio = live.studio();
      const formats = this.formatsOf.of(studio);
      return live.rooms().flatMap((room) => {
        const { name, racks } = room.info();
        const batches = room.batches().filter(({ waxFamily }) => this.isAskedFor(waxFamily));
        return racks.map((rack) => ({
          ...{ studioId: live.id, studioName: studio.name, roomId: room.id, roomName: name, rack, formats },
          batches: batches.filter(({ rackId }) => rackId === rack.id),
        }));
      });
    }),
  );
  protected readonly rows = computed(() =>
    this.places().flatMap((place) => calendarRow(place, this.gate(), this.start(), this.clock.cell()) ?? []),
  );
  /** Only what is ready by the chosen day, soonest first; everything while no day is chosen. */
  protected readonly shown = computed<readonly CalendarRow[]>(() => {
    if (this.by() === '') return this.rows();
    return this.rows()
      .filter((row) => isReadyBy(row, this.endOfDay(row.formats)))
      .sort((a, b) => (a.curedAt ?? 0) - (b.curedAt ?? 0));
  });
  protected readonly sentence = computed(() => {
    const formats = this.firstFormats();
    const noon = formats ? instantOfLocal(`${this.day()}T12:00`, formats.timeZone) : 0;
    return readinessSentence(
      this.rows(),
      this.gate(),
      (zone) => this.endOfDay(zone),
      formats?.day(noon) ?? '',
      this.clock.cell(),
    );
  });
  /** Curing batches that stand on no shelf are on no rack either. */
  protected readonly unplaced = computed(() =>
    this.studios().flatMap((studio) =>
      studio
        .unplaced()
        .filter(({ waxFamily }) => this.isAskedFor(waxFamily))
        .map(({ id, code }) => ({ id, code, studioId: studio.id })),
    ),
  );
  protected readonly emptyRacks = computed(() => {
    if (this.wax() !== '') return '';
    const empty = this.places().filter(({ batches }) => batches.length === 0);
    if (empty.length === 0) return '';
    const names = list(empty.map(({ roomName, rack }) => `${roomName} ${rack.name}`));
    return empty.length === 1 ? `${names} stands empty.` : `${empty.length} racks stand empty: ${names}.`;
  });
  /** What a printed sheet says of itself. */
  protected readonly printed = computed(() => {
    const formats = this.firstFormats();
    const studio = this.live.studios().find(({ id }) => id === this.studio());
    const parts = [
      this.gate() === 'ship' ? 'Ready to ship' : 'Ready for the wick test',
      studio?.studio().name ?? 'all studios',
      this.wax() === '' ? '' : `${this.wax()} only`,
      this.by() === '' ? '' : `by ${this.by()}`,
      formats ? `as of ${formats.dayAndTime(this.clock.cell())} in ${formats.city}` : '',
    ];
    return parts.filter((part) => part !== '').join(', ');
  });

  protected choose(change: Partial<Choice>): void {
    const queryParams = Object.fromEntries(
      Object.entries(change).map(([key, value]) => [
        key,
        value === DEFAULTS[key as keyof Choice] ? null : value,
      ]),
    );
    void this.router.navigate([], { queryParams, queryParamsHandling: 'merge', replaceUrl: true });
  }

  protected print(): void {
    window.print();
  }

  private isAskedFor(waxFamily: string | null): boolean {
    return this.wax() === '' || tradeName(waxFamily) === this.wax();
  }

  /** The chosen day, or the next Friday. */
  private day(): string {
    return this.by() || nextFriday(this.clock.cell(), this.firstFormats()?.timeZone ?? 'UTC');
  }

  /** End of that day by a studio's own calendar; days are 23 to 25 hours long. */
  private endOfDay(formats: StudioFormats): number {
    const next = new Date(Date.parse(`${this.day()}T00:00Z`) + DAY_MS).toISOString().slice(0, 10);
    return instantOfLocal(next, formats.timeZone);
  }
}
