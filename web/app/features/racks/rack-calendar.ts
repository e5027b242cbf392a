import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { RouterLink } from '@angular/router';
import { ReadyBar } from '../../ui/ready-bar';
import { type CalendarDay, type CalendarRow, DAYS } from './readiness-calendar';

/** Four weeks of racks: each batch a bar from its pour to the middle of its ready range; on a phone a list with small bars. */
@Component({
  selector: 'sr-rack-calendar',
  imports: [ReadyBar, RouterLink],
  templateUrl: './rack-calendar.html',
  styleUrl: './rack-calendar.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RackCalendar {
  readonly rows = input.required<readonly CalendarRow[]>();
  readonly days = input.required<readonly CalendarDay[]>();

  protected readonly columns = DAYS;
  /** The room is told once for the racks that follow each other in it. */
  protected readonly racks = computed(() =>
    this.rows().map((row, index, rows) => ({ row, first: rows[index - 1]?.roomId !== row.roomId })),
  );
}
