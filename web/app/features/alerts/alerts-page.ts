import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  signal,
  untracked,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import { RouterLink } from '@angular/router';
import type { Alert, alertRoutes } from '#shared/contract/alerts';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { LiveStore } from '../../core/live/live-store';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { StatusMark } from '../../ui/status-mark';
import { type AlertLine, alertLine, byUrgency } from './alert-line';

type View = 'open' | 'shelved' | 'past';

const A_PAGE = 50;
const EMPTY: Readonly<Record<View, { title: string; text: string }>> = {
  open: { title: 'Nothing is open.', text: 'Every room that is heard is within its limits.' },
  shelved: { title: 'Nothing is shelved.', text: '' },
  past: { title: 'No past alerts.', text: '' },
};

/** Alerts of the own studios: open, shelved, past. */
@Component({
  selector: 'sr-alerts-page',
  imports: [
    EmptyNote,
    ErrorNote,
    LoadingNote,
    MatButton,
    MatButtonToggle,
    MatButtonToggleGroup,
    PageHeader,
    RouterLink,
    StatusMark,
  ],
  templateUrl: './alerts-page.html',
  styleUrl: './alerts-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AlertsPage {
  private readonly api = inject(Api);
  private readonly formatsOf = inject(Formats);
  private readonly clock = inject(StudioClock);
  private readonly session = inject(Session);
  protected readonly live = inject(LiveStore);
  protected readonly view = signal<View>('open');
  protected readonly past = new Loadable<Alert[]>();
  protected readonly more = signal(false);
  protected readonly empty = computed(() => EMPTY[this.view()]);

  private readonly studios = computed(() =>
    this.live.studios().filter(({ id }) => this.session.may('alerts.read', id)),
  );
  /** Open and shelved ones are live; past ones are loaded. */
  private readonly alerts = computed<readonly Alert[]>(() => {
    const view = this.view();
    if (view === 'past') return this.past.value() ?? [];
    const all = this.studios().flatMap((studio) => studio.alerts());
    return all.filter((alert) => (alert.shelved !== null) === (view === 'shelved')).sort(byUrgency);
  });
  protected readonly lines = computed<readonly AlertLine[]>(() =>
    this.alerts().flatMap((alert) => {
      const studio = this.studios().find(({ id }) => id === alert.studioId);
      return studio ? [alertLine(alert, this.formatsOf.of(studio.studio()), this.clock.minute())] : [];
    }),
  );

  constructor() {
    effect(() => {
      if (this.view() !== 'past' || this.studios().length === 0) return;
      untracked(() => void this.loadPast());
    });
  }

  protected loadPast(before?: string): Promise<void> {
    const known = before === undefined ? [] : (this.past.value() ?? []);
    return this.past.load(async () => {
      const pages = await Promise.all(
        this.studios().map(({ id }) =>
          this.api.call<typeof alertRoutes.list>('GET', '/api/studios/:studioId/alerts', {
            params: { studioId: id },
            query: { view: 'past', limit: A_PAGE, ...(before === undefined ? {} : { before }) },
          }),
        ),
      );
      this.more.set(pages.some((page) => page.length === A_PAGE));
      const found = pages.flat().sort((a, b) => b.raisedAt.localeCompare(a.raisedAt));
      return [...known, ...found];
    });
  }

  protected older(): Promise<void> {
    return this.loadPast(this.past.value()?.at(-1)?.raisedAt);
  }
}
