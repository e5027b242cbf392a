import { ChangeDetectionStrategy, Component, computed, input, linkedSignal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import type { RoomSeries } from '#shared/contract/rooms';
import type { StudioFormats } from '../../core/time/studio-formats';
import { DataTable } from '../../ui/data-table';

const PAGE = 72;
const NONE = '–';

/** The chart's figures as a table, the newest first. */
@Component({
  selector: 'sr-series-table',
  imports: [DataTable, MatButton],
  template: `<sr-data-table label="Temperature, humidity and dew point">
      <table class="sr-table">
        <thead>
          <tr>
            <th scope="col">{{ formats().city }} time</th>
            <th scope="col" class="num">{{ formats().unitSign }}</th>
            <th scope="col" class="num">lowest</th>
            <th scope="col" class="num">highest</th>
            <th scope="col" class="num">% humidity</th>
            <th scope="col" class="num">dew point {{ formats().unitSign }}</th>
          </tr>
        </thead>
        <tbody>
          @for (row of rows(); track row.at) {
            <tr>
              <th scope="row">{{ row.time }}</th>
              @if (row.gap) {
                <td class="gap" colspan="5">no reading</td>
              } @else {
                <td class="num">{{ row.t }}</td>
                <td class="num">{{ row.low }}</td>
                <td class="num">{{ row.high }}</td>
                <td class="num">{{ row.rh }}</td>
                <td class="num">{{ row.dewPoint }}</td>
              }
            </tr>
          }
        </tbody>
      </table>
    </sr-data-table>
    @if (shown() < series().points.length) {
      <button mat-button type="button" (click)="shown.set(shown() + 3 * page)">
        Show more of {{ series().points.length }} lines
      </button>
    }`,
  styles: `
    sr-data-table {
      max-inline-size: 760px;
    }
    tbody th {
      color: var(--mat-sys-on-surface);
      font-weight: 400;
    }
    .gap {
      color: var(--sr-still);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SeriesTable {
  readonly series = input.required<RoomSeries>();
  readonly formats = input.required<StudioFormats>();

  protected readonly page = PAGE;
  protected readonly shown = linkedSignal({ source: this.series, computation: () => PAGE });
  protected readonly rows = computed(() => {
    const formats = this.formats();
    const degrees = (value: number | null) => (value === null ? NONE : formats.temperatureFigure(value));
    return this.series()
      .points.slice(-this.shown())
      .reverse()
      .map((point) => ({
        at: point.at,
        time: formats.dayAndTime(point.at),
        gap: point.t === null,
        t: degrees(point.t),
        low: degrees(point.tMin),
        high: degrees(point.tMax),
        rh: point.rh === null ? NONE : point.rh.toFixed(0),
        dewPoint: degrees(point.dewPoint),
      }));
  });
}
