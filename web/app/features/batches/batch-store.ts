import { computed, inject, Injectable, signal } from '@angular/core';
import type { BatchPage, batchRoutes, CurvePoint } from '#shared/contract/batches';
import { Api } from '../../core/api/api';
import { ApiError } from '../../core/api/api-error';
import { Loadable } from '../../core/api/loadable';
import { LiveStore } from '../../core/live/live-store';

/** One batch: its page, its curve, and what can be done with it. */
@Injectable()
export class BatchStore {
  private readonly api = inject(Api);
  private readonly live = inject(LiveStore);
  private readonly writableStudioId = signal<string | null>(null);
  readonly page = new Loadable<BatchPage>();
  readonly curve = new Loadable<readonly CurvePoint[]>();
  /** Studio of the batch once it was found. */
  readonly studio = computed(() => {
    const found = this.live.studios().find(({ id }) => id === this.writableStudioId());
    return found ?? null;
  });

  /** Loads a batch. Without a named studio it is looked for among the curing ones, then studio by studio. */
  async load(batchId: string, named: string | undefined): Promise<void> {
    await this.page.load(async () => {
      const studios = this.live.studios();
      const curing = studios.find((studio) => studio.batches().some(({ id }) => id === batchId));
      const candidates = [named ?? curing?.id ?? [], studios.map(({ id }) => id)].flat();
      for (const studioId of new Set(candidates)) {
        try {
          const page = await this.get(studioId, batchId);
          this.writableStudioId.set(studioId);
          return page;
        } catch (error) {
          if (!(error instanceof ApiError) || error.status !== 404) throw error;
        }
      }
      throw new ApiError(404, null);
    });
    const studioId = this.writableStudioId();
    if (studioId === null || this.page.value() === null) return;
    await this.curve.load(async () => {
      const { points } = await this.api.call<typeof batchRoutes.curve>(
        'GET',
        '/api/studios/:studioId/batches/:batchId/curve',
        { params: { studioId, batchId } },
      );
      return points;
    });
  }

  /** @throws ApiError */
  async move(body: { version: number; shelfId: string; at?: string; overfill: boolean }): Promise<void> {
    this.page.set(
      await this.api.call<typeof batchRoutes.move>('POST', '/api/studios/:studioId/batches/:batchId/move', {
        params: this.params(),
        body,
      }),
    );
  }

  /** @throws ApiError */
  async end(body: {
    version: number;
    as: 'dispatched' | 'scrapped';
    at?: string;
    reason?: string;
  }): Promise<void> {
    this.page.set(
      await this.api.call<typeof batchRoutes.end>('POST', '/api/studios/:studioId/batches/:batchId/end', {
        params: this.params(),
        body,
      }),
    );
  }

  /** @throws ApiError */
  async recordTest(body: { at: string; passed: boolean; note: string }): Promise<void> {
    this.page.set(
      await this.api.call<typeof batchRoutes.recordTest>(
        'POST',
        '/api/studios/:studioId/batches/:batchId/verdicts',
        { params: this.params(), body },
      ),
    );
  }

  private get(studioId: string, batchId: string): Promise<BatchPage> {
    return this.api.call<typeof batchRoutes.get>('GET', '/api/studios/:studioId/batches/:batchId', {
      params: { studioId, batchId },
      query: {},
    });
  }

  private params(): { studioId: string; batchId: string } {
    return { studioId: this.writableStudioId() ?? '', batchId: this.page.value()?.card.id ?? '' };
  }
}
