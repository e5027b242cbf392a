import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import { RouterLink } from '@angular/router';
import { LiveStore } from '../../core/live/live-store';
import type { StudioLive } from '../../core/live/studio-live';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { durationWords } from '../../core/time/zoned-time';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { WallLegend } from '../../ui/wall-legend';
import { codes } from '#shared/words/room-state';
import { NeedsList } from './needs-list';
import { type NeedStudio, troubles, workDue } from './needs-now';
import { RoomCard } from './room-card';

const MANY = 24;

/** Home: what needs somebody now, then every studio with its rooms. */
@Component({
  selector: 'sr-rooms-page',
  imports: [EmptyNote, ErrorNote, LoadingNote, NeedsList, PageHeader, RoomCard, RouterLink, WallLegend],
  templateUrl: './rooms-page.html',
  styleUrl: './rooms-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomsPage {
  protected readonly live = inject(LiveStore);
  protected readonly session = inject(Session);
  private readonly clock = inject(StudioClock);
  private readonly formats = inject(Formats);

  protected readonly studios = computed(() =>
    this.live.studios().map((live) => {
      const studio = live.studio();
      const unplaced = live.unplaced();
      return {
        live,
        name: studio.name,
        place: this.place(live),
        unplaced: unplaced.length === 0 ? '' : codes(unplaced),
        mayWrite: this.session.may('rooms.write', live.id),
      };
    }),
  );
  protected readonly many = computed(
    () => this.live.studios().reduce((sum, studio) => sum + studio.rooms().length, 0) > MANY,
  );
  private readonly needStudios = computed(() => this.live.studios().map((studio) => this.needsOf(studio)));
  private readonly troubles = computed(() => troubles(this.needStudios(), this.clock.minute()));
  private readonly workDue = computed(() => workDue(this.needStudios(), this.clock.cell()));
  protected readonly needs = computed(() => [...this.troubles(), ...this.workDue()]);
  private readonly latest = computed(() =>
    Math.max(
      ...this.live
        .studios()
        .flatMap((studio) => studio.rooms().map((room) => room.now().at))
        .map((at) => (at === null ? -Infinity : Date.parse(at))),
    ),
  );
  /** "live, last reading 2 s ago" */
  protected readonly pulse = computed(() => {
    const connection = this.live.connection();
    if (connection.state === 'connecting') return 'connecting…';
    if (connection.state === 'lost') return 'not live';
    if (!Number.isFinite(this.latest())) return 'live, no reading yet';
    return `live, last reading ${durationWords(this.clock.now() - this.latest())} ago`;
  });

  /** "Lisbon 15:42" */
  private place(studio: StudioLive): string {
    const formats = this.formats.of(studio.studio());
    return `${formats.city} ${formats.time(this.clock.minute())}`;
  }

  private needsOf(studio: StudioLive): NeedStudio {
    return {
      id: studio.id,
      name: studio.studio().name,
      formats: this.formats.of(studio.studio()),
      rooms: studio.rooms().map((room) => ({
        id: room.id,
        name: room.info().name,
        silence: room.condition() === 'silent' ? room.now() : null,
        racks: room.info().racks,
        batches: room.batches(),
      })),
      batches: studio.batches(),
      alerts: studio.alerts(),
      tests: this.session.may('batches.recipe', studio.id),
    };
  }
}
