import { computed, inject, Injectable, signal } from '@angular/core';
import type { alertRoutes, Notice } from '#shared/contract/alerts';
import { Announcer } from '../announcer/announcer';
import { Api } from '../api/api';

/** The person's own notices, newest first. */
@Injectable({ providedIn: 'root' })
export class NoticesStore {
  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  private readonly writableNotices = signal<readonly Notice[]>([]);

  readonly notices = this.writableNotices.asReadonly();
  readonly unread = computed(() => this.writableNotices().filter((notice) => !notice.read).length);

  /** Loads the notices. @throws ApiError */
  async load(): Promise<void> {
    this.writableNotices.set(await this.api.call<typeof alertRoutes.notices>('GET', '/api/me/notices'));
  }

  /** Takes a notice that has just arrived over the live connection. */
  arrived(notice: Notice): void {
    if (this.writableNotices().some((known) => known.id === notice.id)) return;
    this.writableNotices.update((before) => [notice, ...before]);
    this.announcer.say(notice.text);
  }

  /** Marks all as read. @throws ApiError */
  async markAllRead(): Promise<void> {
    await this.api.call<typeof alertRoutes.readNotices>('POST', '/api/me/notices/read');
    this.writableNotices.update((before) => before.map((notice) => ({ ...notice, read: true })));
  }

  /** Forgets all when somebody signs out. */
  clear(): void {
    this.writableNotices.set([]);
  }
}
