import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import { Router, RouterLink } from '@angular/router';
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
import { type Past, PastAlerts } from './past-alerts';

type View = 'open' | 'shelved' | 'past';

const VIEWS: readonly { readonly view: View; readonly name: string }[] = [
  { view: 'open', name: 'Open' },
  { view: 'shelved', name: 'Shelved' },
  { view: 'past', name: 'Past' },
];
const A_PAGE = 50;
const EMPTY: Readonly<Record<View, { title: string; text: string }>> = {
  open: { title: 'Nothing is open.', text: 'Every room that is heard is within its limits.' },
  shelved: {
    title: 'Nothing is shelved.',
    text: 'A shelved alert comes back by itself when its time is up.',
  },
  past: { title: 'No past alerts.', text: 'What is over is kept here with its whole story.' },
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
    MatFormField,
    MatLabel,
    MatOption,
    MatSelect,
    PageHeader,
    RouterLink,
    StatusMark,
  ],
  templateUrl: './alerts-page.html',
  styleUrl: './alerts-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AlertsPage {
  // From the address.
  readonly view = input('open', {
    transform: (text?: string): View => (text === 'shelved' || text === 'past' ? text : 'open'),
  });
  readonly studio = input('', { transform: (text?: string) => text ?? '' });

  private readonly api = inject(Api);
  private readonly router = inject(Router);
  private readonly formatsOf = inject(Formats);
  private readonly clock = inject(StudioClock);
  private readonly session = inject(Session);
  protected readonly live = inject(LiveStore);
  protected readonly past = new Loadable<Past>();
  private readonly pages = signal<PastAlerts | null>(null);
  protected readonly empty = computed(() => EMPTY[this.view()]);

  /** Studios whose alerts the person may see. */
  protected readonly readable = computed(() =>
    this.live.studios().filter(({ id }) => this.session.may('alerts.read', id)),
  );
  private readonly studios = computed(() =>
    this.readable().filter(({ id }) => this.studio() === '' || id === this.studio()),
  );
  private readonly pastOf = computed(() =>
    this.view() === 'past'
      ? this.studios()
          .map(({ id }) => id)
          .join(' ')
      : '',
  );
  /** Open and shelved ones are live; past ones are loaded. */
  private readonly current = computed(() => this.studios().flatMap((studio) => studio.alerts()));
  private readonly alerts = computed<readonly Alert[]>(() => {
    if (this.view() === 'past') return this.past.value()?.alerts ?? [];
    return this.current()
      .filter((alert) => isShelved(alert) === (this.view() === 'shelved'))
      .sort(byUrgency);
  });
  protected readonly views = computed(() => {
    const shelved = this.current().filter(isShelved).length;
    const counts: Partial<Record<View, number>> = { open: this.current().length - shelved, shelved };
    return VIEWS.map(({ view, name }) => ({ view, name: counts[view] ? `${name} ${counts[view]}` : name }));
  });
  protected readonly lines = computed<readonly AlertLine[]>(() =>
    this.alerts().flatMap((alert) => {
      const studio = this.studios().find(({ id }) => id === alert.studioId);
      return studio ? [alertLine(alert, this.formatsOf.of(studio.studio()), this.clock.minute())] : [];
    }),
  );

  constructor() {
    effect(() => {
      const ids = this.pastOf();
      if (ids !== '') untracked(() => this.startPast(ids.split(' ')));
    });
  }

  protected choose(change: { view?: View; studio?: string }): void {
    const queryParams = Object.fromEntries(
      Object.entries(change).map(([key, value]) => [key, value === '' || value === 'open' ? null : value]),
    );
    void this.router.navigate([], { queryParams, queryParamsHandling: 'merge', replaceUrl: true });
  }

  protected older(): void {
    const pages = this.pages();
    if (pages) void this.past.load(() => pages.further());
  }

  private startPast(studioIds: readonly string[]): void {
    this.past.clear();
    this.pages.set(
      new PastAlerts(studioIds, A_PAGE, (studioId, before) =>
        this.api.call<typeof alertRoutes.list>('GET', '/api/studios/:studioId/alerts', {
          params: { studioId },
          query: { view: 'past', limit: A_PAGE, ...(before === undefined ? {} : { before }) },
        }),
      ),
    );
    this.older();
  }
}

function isShelved(alert: Alert): boolean {
  return alert.shelved !== null;
}
