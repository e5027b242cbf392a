import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { RoomMeasures } from '#shared/contract/rooms';
import type { StudioFormats } from '../../core/time/studio-formats';
import { HOUR_MS } from '../../core/time/zoned-time';
import { shareWords } from '../../core/units/measure-words';

const NONE = '–';

/** What the room has done over the period of the chart. */
@Component({
  selector: 'sr-room-measures-list',
  template: `<dl>
    @for (measure of list(); track measure.name) {
      <div>
        <dt>{{ measure.name }}</dt>
        <dd>{{ measure.value }}</dd>
        @if (measure.note) {
          <dd class="note">{{ measure.note }}</dd>
        }
      </div>
    }
  </dl>`,
  styles: `
    dl {
      display: flex;
      flex-wrap: wrap;
      gap: 18px 34px;
    }
    dt {
      font-size: 14px;
      color: var(--mat-sys-on-surface-variant);
    }
    dd {
      font-size: 24px;
      font-weight: 500;
      line-height: 1.15;
    }
    .note {
      max-inline-size: 24ch;
      font-size: 13px;
      font-weight: 400;
      color: var(--mat-sys-on-surface-variant);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomMeasuresList {
  readonly measures = input.required<RoomMeasures>();
  readonly formats = input.required<StudioFormats>();

  protected readonly list = computed(() => {
    const m = this.measures();
    const f = this.formats();
    const written = (value: number | null, write: (value: number) => string) =>
      value === null ? NONE : write(value);
    return [
      { name: 'Time in its band', value: written(m.inBand, (share) => shareWords(share)), note: '' },
      {
        name: 'Mean kinetic temperature',
        value: written(m.meanKineticCelsius, f.temperature),
        note: `plain mean ${written(m.meanCelsius, f.temperature)}; the kinetic mean weighs warm hours more`,
      },
      {
        name: 'Lowest to highest',
        value: `${written(m.minCelsius, f.temperatureFigure)} to ${written(m.maxCelsius, f.temperature)}`,
        note: '',
      },
      { name: 'Daily swing', value: written(m.dailySwing, f.difference), note: 'mean of the local days' },
      {
        name: 'Swings counted',
        value: written(m.swingsCounted, (count) => count.toLocaleString('en-GB')),
        note: `of ${f.difference(2)} or more; a half cycle counts ½`,
      },
      { name: 'Mean humidity', value: written(m.meanHumidity, f.humidity), note: '' },
      {
        name: 'Observed',
        value: f.duration(m.observedHours * HOUR_MS),
        note: m.gapHours > 0 ? `${f.duration(m.gapHours * HOUR_MS)} without readings` : 'without a gap',
      },
    ];
  });
}
