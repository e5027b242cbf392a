import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
} from '@angular/core';
import { RouterLink } from '@angular/router';
import { LiveStore } from '../../core/live/live-store';
import { RoomTexts } from '../../core/live/room-text';
import { PageTitles } from '../../core/page-titles';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { ChartShell, type ChartView } from '../../ui/chart-shell';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { Icon } from '../../ui/icon';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { RackWall } from '../../ui/rack-wall';
import { RoomFigures } from '../../ui/room-figures';
import { StateSentence } from '../../ui/state-sentence';
import type { Status } from '../../ui/status-mark';
import { wallLayout } from '../../ui/wall-layout';
import { WallLegend } from '../../ui/wall-legend';
import { PeriodPicker } from './period-picker';
import { RoomChartView } from './room-chart';
import { RoomLimitsList } from './room-limits-list';
import { RoomMarks } from './room-marks';
import { RoomMeasuresList } from './room-measures-list';
import { RoomSensors } from './room-sensors';
import { RoomStore } from './room-store';
import { SeriesTable } from './series-table';

const RELOAD_MS = 15_000;

/** One room: its wall large, its chart, its sensors, what it has done, its limits and notes. */
@Component({
  selector: 'sr-room-page',
  imports: [
    ChartShell,
    EmptyNote,
    ErrorNote,
    Icon,
    LoadingNote,
    PageHeader,
    PeriodPicker,
    RackWall,
    RoomChartView,
    RoomFigures,
    RoomLimitsList,
    RoomMarks,
    RoomMeasuresList,
    RoomSensors,
    RouterLink,
    SeriesTable,
    StateSentence,
    WallLegend,
  ],
  providers: [RoomStore],
  templateUrl: './room-page.html',
  styleUrl: './room-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomPage {
  /** From the address. */
  readonly roomId = input.required<string>();

  protected readonly live = inject(LiveStore);
  protected readonly store = inject(RoomStore);
  private readonly session = inject(Session);
  private readonly texts = inject(RoomTexts);
  private readonly clock = inject(StudioClock);
  private readonly titles = inject(PageTitles);
  private loadedAt = 0;

  protected readonly view = signal<ChartView>('chart');
  /** The room with everything its page shows live; undefined while unknown or not one's own. */
  protected readonly place = computed(() => this.live.room(this.roomId()));
  protected readonly text = computed(() => {
    const place = this.place();
    return place ? this.texts.of(place.studio, place.room) : null;
  });
  protected readonly racks = computed(() => {
    const place = this.place();
    const text = this.text();
    if (!place || !text) return [];
    const { info, batches } = place.room;
    return wallLayout(info().racks, batches(), text.blockWords(), this.clock.cell());
  });
  protected readonly status = computed<Status>(() => {
    const condition = this.place()?.room.condition() ?? 'fine';
    if (condition === 'fine') return 'good';
    return condition === 'never-heard' ? 'silent' : condition;
  });
  /** "Quay Street, Lisbon 15:42" */
  protected readonly note = computed(() => {
    const formats = this.text()?.formats();
    const place = this.place();
    return formats && place
      ? `${place.studio.studio().name}, ${formats.city} ${formats.time(this.clock.minute())}`
      : '';
  });
  protected readonly may = computed(() => {
    const studioId = this.place()?.studio.id ?? '';
    return {
      sensors: this.session.may('sensors.read', studioId),
      write: this.session.may('rooms.write', studioId),
    };
  });
  /** What the chart shows, in one sentence. */
  protected readonly summary = computed(() => {
    const measures = this.store.measures();
    const formats = this.text()?.formats();
    if (!measures || !formats) return '';
    if (measures.minCelsius === null || measures.maxCelsius === null) return 'No reading in this period.';
    const gap =
      measures.gapHours > 0 ? `, ${formats.duration(measures.gapHours * 3_600_000)} without readings` : '';
    return `${formats.temperatureFigure(measures.minCelsius)} to ${formats.temperature(measures.maxCelsius)}${gap}.`;
  });
  /** "Alerts reach Ines Aldous first, then Tomas Reeve, each after 30 min without acknowledgement; the owner last." */
  protected readonly recipients = computed(() => {
    const people = this.store.people();
    const studio = this.place()?.studio.studio();
    if (!people || !studio) return '';
    const names = studio.recipients.map(
      (id) => people.find((person) => person.id === id)?.name ?? 'somebody who left',
    );
    if (names.length === 0) return 'Alerts reach the owner; nobody else is named.';
    return `Alerts reach ${names.join(', then ')}, each after ${studio.escalateAfterMinutes} min without acknowledgement, the owner last.`;
  });

  constructor() {
    const known = computed(() => this.place()?.studio.id ?? null);
    effect(() => {
      const studioId = known();
      const roomId = this.roomId();
      if (studioId !== null) untracked(() => this.open(studioId, roomId));
    });
    effect(() => this.titles.name(this.place()?.room.info().name ?? 'Room'));
    // A finished cell moves a chart that ends now; in the fast demo not with every cell.
    effect(() => {
      this.place()?.room.ribbon();
      untracked(() => this.follow());
    });
  }

  private open(studioId: string, roomId: string): void {
    this.loadedAt = performance.now();
    this.store.open(studioId, roomId);
  }

  private follow(): void {
    const { kind } = this.store.period();
    const soon = performance.now() - this.loadedAt < RELOAD_MS;
    if (soon || (kind !== '6h' && kind !== '24h') || this.store.seriesLoading()) return;
    this.loadedAt = performance.now();
    this.store.loadPeriod();
  }
}
