import { computed, inject, Injectable, signal } from '@angular/core';
import type { Alert, alertRoutes } from '#shared/contract/alerts';
import type { ReplyOf } from '#shared/contract/route';
import { Api } from '../../core/api/api';
import { ApiError } from '../../core/api/api-error';
import { Loadable } from '../../core/api/loadable';
import { LiveStore } from '../../core/live/live-store';
import { Session } from '../../core/session/session';

export type AlertStory = ReplyOf<typeof alertRoutes.get>;

/** One alert with every step, and what can be done about it. */
@Injectable()
export class AlertStore {
  private readonly api = inject(Api);
  private readonly live = inject(LiveStore);
  private readonly session = inject(Session);
  private readonly writableStudioId = signal<string | null>(null);
  readonly story = new Loadable<AlertStory>();
  /** Studio of the alert once it was found. */
  readonly studio = computed(
    () => this.live.studios().find(({ id }) => id === this.writableStudioId()) ?? null,
  );

  /** Loads an alert. Without a named studio, or in another than that, it is looked for studio by studio. */
  async load(alertId: string, named: string | undefined): Promise<void> {
    await this.story.load(async () => {
      const own = this.live.studios().filter(({ id }) => this.session.may('alerts.read', id));
      const holding = own.filter((studio) => studio.alerts().some(({ id }) => id === alertId));
      for (const studioId of new Set([named ?? [], [...holding, ...own].map(({ id }) => id)].flat())) {
        try {
          const story = await this.api.call<typeof alertRoutes.get>(
            'GET',
            '/api/studios/:studioId/alerts/:alertId',
            { params: { studioId, alertId } },
          );
          this.writableStudioId.set(studioId);
          return story;
        } catch (error) {
          if (!(error instanceof ApiError) || error.status !== 404) throw error;
        }
      }
      throw new ApiError(404, null);
    });
  }

  /** @throws ApiError */
  acknowledge(note: string): Promise<void> {
    return this.change((params) =>
      this.api.call<typeof alertRoutes.acknowledge>(
        'POST',
        '/api/studios/:studioId/alerts/:alertId/acknowledge',
        { params, body: { note } },
      ),
    );
  }

  /** @param hours 0.25–24 @throws ApiError */
  shelve(hours: number, reason: string): Promise<void> {
    return this.change((params) =>
      this.api.call<typeof alertRoutes.shelve>('POST', '/api/studios/:studioId/alerts/:alertId/shelve', {
        params,
        body: { hours, reason },
      }),
    );
  }

  /** @throws ApiError */
  unshelve(): Promise<void> {
    return this.change((params) =>
      this.api.call<typeof alertRoutes.unshelve>('POST', '/api/studios/:studioId/alerts/:alertId/unshelve', {
        params,
      }),
    );
  }

  /** @throws ApiError */
  handOver(personId: string, note: string): Promise<void> {
    return this.change((params) =>
      this.api.call<typeof alertRoutes.handOver>('POST', '/api/studios/:studioId/alerts/:alertId/hand-over', {
        params,
        body: { personId, note },
      }),
    );
  }

  private async change(
    send: (params: { studioId: string; alertId: string }) => Promise<Alert>,
  ): Promise<void> {
    const [studioId, alertId] = [this.writableStudioId(), this.story.value()?.alert.id];
    if (studioId === null || alertId === undefined) return;
    await send({ studioId, alertId });
    await this.load(alertId, studioId);
  }
}
