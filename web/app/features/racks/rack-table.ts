import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { RouterLink } from '@angular/router';
import { tradeName } from '#shared/words/room-state';
import { DataTable } from '../../ui/data-table';
import type { CalendarRow } from './readiness-calendar';

/** The calendar as a table: one line a batch. */
@Component({
  selector: 'sr-rack-table',
  imports: [DataTable, RouterLink],
  template: `<sr-data-table label="Readiness of every rack">
    <table class="sr-table">
      <thead>
        <tr>
          <th scope="col">Room</th>
          <th scope="col">Rack</th>
          <th scope="col">Batch</th>
          @if (recipe()) {
            <th scope="col">Design</th>
            <th scope="col">Wax</th>
          }
          <th scope="col" class="num">Vessels</th>
          <th scope="col">Poured</th>
          <th scope="col">{{ gateLabel() }}</th>
        </tr>
      </thead>
      <tbody>
        @for (line of lines(); track line.bar.id) {
          <tr>
            <td>{{ line.row.place }}</td>
            <td>{{ line.row.name }}</td>
            <th scope="row">
              <a [routerLink]="['/batches', line.bar.id]" [queryParams]="{ studio: line.row.studioId }">{{
                line.bar.code
              }}</a>
            </th>
            @if (recipe()) {
              <td>{{ line.bar.batch.designName }}</td>
              <td>{{ line.wax }}</td>
            }
            <td class="num">{{ line.bar.batch.vessels }}</td>
            <td class="day">{{ line.bar.poured }}</td>
            <td class="day" [class.good]="line.bar.ready">{{ line.bar.when }}</td>
          </tr>
        }
      </tbody>
    </table>
  </sr-data-table>`,
  styles: `
    .day {
      white-space: nowrap;
    }
    .good {
      color: var(--sr-good);
      font-weight: 600;
    }
    tr {
      break-inside: avoid;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RackTable {
  readonly rows = input.required<readonly CalendarRow[]>();
  readonly gateLabel = input.required<string>();
  /** Whether design and wax are shown. */
  readonly recipe = input.required<boolean>();

  protected readonly lines = computed(() =>
    this.rows().flatMap((row) => row.bars.map((bar) => ({ row, bar, wax: tradeName(bar.batch.waxFamily) }))),
  );
}
