import type { Alert } from '#shared/contract/alerts';

/** What is known of the past so far. */
export interface Past {
  /** The newest first. */
  readonly alerts: readonly Alert[];
  readonly more: boolean;
}

interface Pages {
  readonly alerts: readonly Alert[];
  readonly done: boolean;
}

/**
 * Past alerts of several studios as one list. Each studio is read page by page at its own pace, and only as far back is shown
 * as all of them are known, so that nothing is left out in between.
 */
export class PastAlerts {
  private readonly pages = new Map<string, Pages>();

  /** @param ask gives at most `pageSize` alerts of a studio raised before an instant, the newest first */
  constructor(
    private readonly studioIds: readonly string[],
    private readonly pageSize: number,
    private readonly ask: (studioId: string, before: string | undefined) => Promise<readonly Alert[]>,
  ) {}

  /** Reads further back and answers all that is known. Nothing changes when a studio cannot be read. */
  async further(): Promise<Past> {
    const horizon = this.horizon();
    const behind = this.studioIds.filter((id) => {
      const known = this.pages.get(id);
      return !known || (!known.done && (known.alerts.at(-1)?.raisedAt ?? '') === horizon);
    });
    const read = await Promise.all(
      behind.map(async (id) => {
        const known = this.pages.get(id)?.alerts ?? [];
        const page = await this.ask(id, known.at(-1)?.raisedAt);
        return [id, { alerts: [...known, ...page], done: page.length < this.pageSize }] as const;
      }),
    );
    for (const [id, pages] of read) this.pages.set(id, pages);
    return this.known();
  }

  private known(): Past {
    const horizon = this.horizon();
    const alerts = [...this.pages.values()]
      .flatMap((pages) => pages.alerts)
      .filter(({ raisedAt }) => raisedAt >= horizon)
      .sort((a, b) => b.raisedAt.localeCompare(a.raisedAt));
    return { alerts, more: [...this.pages.values()].some(({ done }) => !done) };
  }

  /** The latest instant before which some studio is not known. */
  private horizon(): string {
    const open = [...this.pages.values()].filter(({ done }) => !done);
    return open.map(({ alerts }) => alerts.at(-1)?.raisedAt ?? '').reduce((a, b) => (a > b ? a : b), '');
  }
}
