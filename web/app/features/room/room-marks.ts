import { ChangeDetectionStrategy, Component, computed, input, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import type { RoomMark } from '#shared/contract/rooms';
import type { StudioFormats } from '../../core/time/studio-formats';
import { StatusMark } from '../../ui/status-mark';

const SHOWN = 5;

/** What happened in the period: alerts, moves and pours, the newest first. */
@Component({
  selector: 'sr-room-marks',
  imports: [MatButton, RouterLink, StatusMark],
  template: `@if (lines().length > 0) {
    <h3>In this period</h3>
    <ul>
      @for (line of shown(); track $index) {
        <li>
          <sr-status-mark [status]="line.alert ? 'heat' : 'due'" />
          <span class="when">{{ line.when }}</span>
          @if (line.link) {
            <a [routerLink]="line.link">{{ line.text }}</a>
          } @else {
            <span>{{ line.text }}</span>
          }
        </li>
      }
    </ul>
    @if (lines().length > few) {
      <button mat-button type="button" (click)="all.set(!all())" [attr.aria-expanded]="all()">
        {{ all() ? 'Show fewer' : 'Show all ' + lines().length }}
      </button>
    }
  }`,
  styles: `
    ul {
      list-style: none;
      padding: 6px 0 0;
    }
    li {
      display: flex;
      gap: 10px;
      align-items: baseline;
      padding-block: 4px;
    }
    sr-status-mark {
      align-self: center;
    }
    .when {
      flex: none;
      color: var(--mat-sys-on-surface-variant);
    }
    h3 {
      font-size: 16px;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RoomMarks {
  readonly marks = input.required<readonly RoomMark[]>();
  readonly formats = input.required<StudioFormats>();

  protected readonly few = SHOWN;
  protected readonly all = signal(false);
  protected readonly lines = computed(() =>
    [...this.marks()]
      .sort((a, b) => b.from.localeCompare(a.from))
      .map((mark) => ({
        alert: mark.kind === 'alert',
        when: this.formats().dayAndTime(mark.from),
        text: mark.text,
        link:
          mark.alertId !== null
            ? ['/alerts', mark.alertId]
            : mark.batchId !== null
              ? ['/batches', mark.batchId]
              : null,
      })),
  );
  protected readonly shown = computed(() => (this.all() ? this.lines() : this.lines().slice(0, SHOWN)));
}
