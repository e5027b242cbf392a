import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import { MatIconButton } from '@angular/material/button';
import { MatMenu, MatMenuItem, MatMenuTrigger } from '@angular/material/menu';
import { RouterLink } from '@angular/router';
import { LiveStore } from '../core/live/live-store';
import { NoticesStore } from '../core/notices/notices-store';
import { StudioClock } from '../core/time/studio-clock';
import { Formats } from '../core/time/studio-formats';
import { Icon } from '../ui/icon';

const SHOWN = 12;

/** The person's own notices: how many are unread, and the newest of them. */
@Component({
  selector: 'sr-notices-bell',
  imports: [Icon, MatIconButton, MatMenu, MatMenuItem, MatMenuTrigger, RouterLink],
  template: `<button
      matIconButton
      type="button"
      [matMenuTriggerFor]="menu"
      [attr.aria-label]="unread() === 0 ? 'Notices' : 'Notices, ' + unread() + ' unread'"
    >
      <sr-icon name="alerts" />
      @if (unread() > 0) {
        <span class="count" aria-hidden="true">{{ unread() > 99 ? '99+' : unread() }}</span>
      }
    </button>
    <mat-menu #menu="matMenu" xPosition="before" class="sr-notices">
      @if (unread() > 0) {
        <button mat-menu-item type="button" (click)="markRead()">Mark all as read</button>
      }
      @for (line of lines(); track line.id) {
        <a mat-menu-item [routerLink]="line.link" [class.sr-unread]="!line.read">
          <span class="sr-when">{{ line.when }}</span> {{ line.text }}
        </a>
      } @empty {
        <p class="sr-menu-head" role="presentation">No notices.</p>
      }
    </mat-menu>`,
  styles: `
    button {
      position: relative;
    }
    sr-icon {
      font-size: 18px;
    }
    .count {
      position: absolute;
      inset: 2px 0 auto auto;
      min-inline-size: 18px;
      padding: 0 4px;
      border-radius: 9px;
      background: var(--mat-sys-error);
      color: var(--mat-sys-on-error);
      font-size: 12px;
      font-weight: 600;
      line-height: 18px;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class NoticesBell {
  private readonly store = inject(NoticesStore);
  private readonly live = inject(LiveStore);
  private readonly clock = inject(StudioClock);
  private readonly formats = inject(Formats);

  protected readonly unread = this.store.unread;
  protected readonly lines = computed(() =>
    this.store
      .notices()
      .slice(0, SHOWN)
      .map((notice) => {
        const studio = this.live.studio(notice.studioId)?.studio();
        return {
          id: notice.id,
          text: notice.text,
          read: notice.read,
          link: notice.alertId === null ? '/alerts' : `/alerts/${notice.alertId}`,
          when: studio ? this.formats.of(studio).timeSeenFrom(notice.at, this.clock.minute()) : '',
        };
      }),
  );

  protected markRead(): void {
    void this.store.markAllRead().catch(() => undefined);
  }
}
