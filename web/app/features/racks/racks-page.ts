import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect } from '@angular/material/select';
import { RouterLink } from '@angular/router';
import { tradeName } from '#shared/words/room-state';
import { LiveStore } from '../../core/live/live-store';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { DAY_MS, instantOfLocal } from '../../core/time/zoned-time';
import { DataTable } from '../../ui/data-table';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { ReadyBar } from '../../ui/ready-bar';
import {
  calendarDays,
  calendarRow,
  DAYS,
  type GateName,
  placeOf,
  type RackInStudio,
  readinessSentence,
} from './readiness-calendar';

/** The calendar of readiness: one row a rack, four weeks across. */
@Component({
  selector: 'sr-racks-page',
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
    ReadyBar,
    RouterLink,
  ],
  templateUrl: './racks-page.html',
  styleUrl: './racks-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RacksPage {
  protected readonly live = inject(LiveStore);
  private readonly clock = inject(StudioClock);
  private readonly formatsOf = inject(Formats);
  protected readonly gate = signal<GateName>('ship');
  protected readonly studioId = signal('');
  protected readonly wax = signal('');
  /** A day chosen as "ready by"; '' for the end of this week. */
  protected readonly by = signal('');
  protected readonly view = signal<'calendar' | 'table'>('calendar');

  private readonly zone = computed(() => this.live.studios()[0]?.studio().timeZone ?? 'UTC');
  protected readonly days = computed(() => calendarDays(this.clock.cell(), this.zone()));
  protected readonly todayPlace = computed(() => placeOf(this.clock.cell(), this.clock.cell(), this.zone()));
  protected readonly columns = DAYS;
  /** Wax families on the racks; none for a viewer, who sees no recipe. */
  protected readonly waxes = computed(() => {
    const names = this.live
      .studios()
      .flatMap((studio) => studio.batches().map(({ waxFamily }) => tradeName(waxFamily)));
    return [...new Set(names)].filter((name) => name !== '').sort();
  });
  private readonly places = computed<readonly RackInStudio[]>(() =>
    this.live
      .studios()
      .filter(({ id }) => this.studioId() === '' || id === this.studioId())
      .flatMap((live) => {
        const studio = live.studio();
        const formats = this.formatsOf.of(studio);
        return live.rooms().flatMap((room) => {
          const { name, racks } = room.info();
          const batches = room
            .batches()
            .filter(({ waxFamily }) => this.wax() === '' || tradeName(waxFamily) === this.wax());
          return racks.map((rack) => ({
            ...{ studioId: live.id, studioName: studio.name, roomId: room.id, roomName: name, rack, formats },
            batches: batches.filter(({ rackId }) => rackId === rack.id),
          }));
        });
      })
      .filter(({ batches }) => batches.length > 0),
  );
  protected readonly rows = computed(() =>
    this.places().map((place) => calendarRow(place, this.gate(), this.clock.cell())),
  );
  /** Only what is ready by the chosen day, soonest first; everything while no day is chosen. */
  protected readonly shown = computed(() => {
    if (this.by() === '') return this.rows();
    const end = this.endOfBy();
    return this.rows()
      .filter(({ readyAt }) => readyAt !== null && readyAt <= end)
      .sort((a, b) => (a.readyAt ?? 0) - (b.readyAt ?? 0));
  });
  protected readonly sentence = computed(() => {
    const now = this.clock.cell();
    const end = this.endOfBy();
    const first = this.live.studios()[0];
    const words = first ? this.formatsOf.of(first.studio()).daySeenFrom(end - 1, now) : '';
    return readinessSentence(this.rows(), this.gate(), end, words, (id) => this.formats(id), now);
  });

  protected print(): void {
    window.print();
  }

  private formats(studioId: string) {
    const studio = this.live.studios().find(({ id }) => id === studioId);
    return studio ? this.formatsOf.of(studio.studio()) : null;
  }

  /** End of the chosen day, or of the next Friday. */
  private endOfBy(): number {
    if (this.by() !== '') return instantOfLocal(this.by(), this.zone()) + DAY_MS;
    const now = this.clock.cell();
    const days = calendarDays(now, this.zone());
    const ahead = days.slice(12).findIndex(({ label }) => label.startsWith('Fri'));
    const today = days[12];
    if (!today) return now;
    const date = String(today.key).replace(/(\d{4})(\d\d)(\d\d)/, '$1-$2-$3');
    return instantOfLocal(date, this.zone()) + (ahead + 1) * DAY_MS;
  }
}
