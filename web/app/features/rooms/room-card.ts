import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { RouterLink } from '@angular/router';
import type { RoomLive } from '../../core/live/room-live';
import { RoomTexts } from '../../core/live/room-text';
import type { StudioLive } from '../../core/live/studio-live';
import { StudioClock } from '../../core/time/studio-clock';
import { RackWall } from '../../ui/rack-wall';
import { RoomFigures } from '../../ui/room-figures';
import { StateSentence } from '../../ui/state-sentence';
import { type Status } from '../../ui/status-mark';
import { TemperatureRibbon } from '../../ui/temperature-ribbon';
import { wallLayout } from '../../ui/wall-layout';

/** One room on the home page: figures, state sentence, ribbon and the wall of its racks. */
@Component({
  selector: 'sr-room-card',
  imports: [RackWall, RoomFigures, RouterLink, StateSentence, TemperatureRibbon],
  templateUrl: './room-card.html',
  styleUrl: './room-card.scss',
  host: { '[class]': "room().condition() + (many() ? ' many' : '')" },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomCard {
  readonly studio = input.required<StudioLive>();
  readonly room = input.required<RoomLive>();
  /** One of so many that those out of view are left undrawn. */
  readonly many = input(false);

  private readonly texts = inject(RoomTexts);
  private readonly clock = inject(StudioClock);

  protected readonly text = computed(() => this.texts.of(this.studio(), this.room()));
  protected readonly info = computed(() => this.room().info());
  protected readonly figures = computed(() => this.text().figures());
  protected readonly state = computed(() => this.text().state());
  protected readonly status = computed<Status>(() => {
    const condition = this.room().condition();
    if (condition === 'fine') return 'good';
    return condition === 'never-heard' ? 'silent' : condition;
  });
  protected readonly racks = computed(() =>
    wallLayout(this.info().racks, this.room().batches(), this.text().blockWords(), this.clock.cell()),
  );
  protected readonly edge = computed(() => {
    const { limits } = this.info();
    const { formats } = this.text();
    return {
      low: formats().temperatureFigure(limits.bandLow, 0),
      high: formats().temperatureFigure(limits.bandHigh, 0),
    };
  });
}
