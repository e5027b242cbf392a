import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import { LiveStore } from '../core/live/live-store';
import { clockTime } from '../core/time/zoned-time';
import { StatusMark } from '../ui/status-mark';

/** Says that figures are not live while the connection is lost; goes away by itself. */
@Component({
  selector: 'sr-connection-banner',
  imports: [StatusMark],
  template: `@if (lostAt(); as time) {
    <p>
      <sr-status-mark status="silent" />
      <span
        ><b>Connection lost at {{ time }}.</b> Figures below are the last known. Trying again by itself.</span
      >
    </p>
  }`,
  styles: `
    p {
      display: flex;
      gap: 10px;
      align-items: center;
      padding: 9px 16px;
      background: var(--mat-sys-inverse-surface);
      color: var(--mat-sys-inverse-on-surface);
    }
    sr-status-mark {
      color: inherit;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ConnectionBanner {
  private readonly live = inject(LiveStore);

  protected readonly lostAt = computed(() => {
    const connection = this.live.connection();
    if (connection.state !== 'lost') return null;
    return clockTime(connection.since, Intl.DateTimeFormat().resolvedOptions().timeZone);
  });
}
