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
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect } from '@angular/material/select';
import { RouterLink } from '@angular/router';
import type { alertRoutes } from '#shared/contract/alerts';
import type { Person, peopleRoutes } from '#shared/contract/people';
import { may, roleIn } from '#shared/contract/roles';
import type { ReplyOf } from '#shared/contract/route';
import { alertPlace, alertWords, clearedSentence } from '#shared/words/alert-words';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { sentenceOf } from '../../core/api/api-error';
import { Loadable } from '../../core/api/loadable';
import { LiveStore } from '../../core/live/live-store';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { ALERT_STATUS } from '../../ui/alert-status';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { StatusMark } from '../../ui/status-mark';
import { whose } from './alert-line';
import { STEP_WORDS } from './step-words';

type Story = ReplyOf<typeof alertRoutes.get>;

/** One alert as one story: what, how bad, which batches, what to do, who has it, every step. */
@Component({
  selector: 'sr-alert-page',
  imports: [
    ErrorNote,
    LoadingNote,
    MatButton,
    MatFormField,
    MatInput,
    MatLabel,
    MatOption,
    MatSelect,
    PageHeader,
    RouterLink,
    StatusMark,
  ],
  templateUrl: './alert-page.html',
  styleUrl: './alert-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AlertPage {
  /** From the address. */
  readonly alertId = input.required<string>();
  /** Studio of the alert, from the query. */
  readonly studio = input<string>();

  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  private readonly session = inject(Session);
  private readonly formatsOf = inject(Formats);
  private readonly clock = inject(StudioClock);
  private readonly live = inject(LiveStore);
  protected readonly story = new Loadable<Story>();
  protected readonly people = new Loadable<Person[]>();
  /** Which of the longer actions is open. */
  protected readonly asking = signal<'shelve' | 'hand-over' | null>(null);
  protected readonly note = signal('');
  protected readonly hours = signal(8);
  protected readonly personId = signal('');
  protected readonly fault = signal<string | null>(null);
  protected readonly busy = signal(false);

  /** The studio it belongs to: named by the link, or the one whose live alerts hold it. */
  protected readonly place = computed(() => {
    const studios = this.live.studios();
    const named = this.studio();
    return (
      studios.find(({ id }) => id === named) ??
      studios.find((studio) => studio.alerts().some(({ id }) => id === this.alertId())) ??
      null
    );
  });
  private readonly formats = computed(() => {
    const studio = this.place()?.studio();
    return studio ? this.formatsOf.of(studio) : null;
  });
  protected readonly may = computed(() => {
    const id = this.place()?.id ?? '';
    return {
      acknowledge: this.session.may('alerts.acknowledge', id),
      shelve: this.session.may('alerts.shelve', id),
      handOver: this.session.may('alerts.acknowledge', id) && this.session.mayAnywhere('people.read'),
      rules: this.session.may('rules.read', id),
    };
  });
  protected readonly told = computed(() => {
    const [story, formats] = [this.story.value(), this.formats()];
    if (story === null || formats === null) return null;
    const { alert, steps } = story;
    const now = this.clock.minute();
    const words = alertWords(alert.facts, formats, now);
    return {
      place: alertPlace(alert.facts),
      status: ALERT_STATUS[alert.facts.kind],
      critical: alert.facts.severity === 'critical',
      headline: words.headline,
      figures: words.figures,
      act: words.act,
      over:
        alert.clearedAt === null ? '' : clearedSentence(alert.facts, formats, Date.parse(alert.clearedAt)),
      who: whose(alert, formats, now),
      batches: alert.facts.batches,
      steps: steps.map((step) => ({
        at: formats.dayAndTime(step.at),
        what: STEP_WORDS[step.what],
        who: step.who ?? '',
        note: step.note,
      })),
    };
  });
  protected readonly open = computed(() => {
    const state = this.story.value()?.alert.state;
    return state === 'open' || state === 'returned';
  });
  protected readonly candidates = computed(() => {
    const studioId = this.place()?.id ?? '';
    return (this.people.value() ?? []).filter(
      (person) => person.state === 'active' && may(roleIn(person, studioId), 'alerts.read'),
    );
  });

  constructor() {
    effect(() => {
      const place = this.place();
      // Whatever changes live is told anew, with its steps.
      const version = place?.alerts().find(({ id }) => id === this.alertId())?.version;
      if (place && version !== untracked(() => this.story.value()?.alert.version)) {
        untracked(() => void this.load());
      } else if (place && untracked(() => this.story.value()) === null) untracked(() => void this.load());
    });
  }

  protected load(): Promise<void> {
    const params = { studioId: this.place()?.id ?? '', alertId: this.alertId() };
    return this.story.load(() =>
      this.api.call<typeof alertRoutes.get>('GET', '/api/studios/:studioId/alerts/:alertId', { params }),
    );
  }

  protected async askWho(): Promise<void> {
    this.asking.set('hand-over');
    await this.people.load(() => this.api.call<typeof peopleRoutes.list>('GET', '/api/people'));
  }

  protected acknowledge(): Promise<void> {
    return this.act('Acknowledged.', (params) =>
      this.api.call<typeof alertRoutes.acknowledge>(
        'POST',
        '/api/studios/:studioId/alerts/:alertId/acknowledge',
        {
          params,
          body: { note: this.note() },
        },
      ),
    );
  }

  protected shelve(): Promise<void> {
    return this.act('Shelved.', (params) =>
      this.api.call<typeof alertRoutes.shelve>('POST', '/api/studios/:studioId/alerts/:alertId/shelve', {
        params,
        body: { hours: this.hours(), reason: this.note() },
      }),
    );
  }

  protected unshelve(): Promise<void> {
    return this.act('Taken off the shelf.', (params) =>
      this.api.call<typeof alertRoutes.unshelve>('POST', '/api/studios/:studioId/alerts/:alertId/unshelve', {
        params,
      }),
    );
  }

  protected handOver(): Promise<void> {
    return this.act('Handed over.', (params) =>
      this.api.call<typeof alertRoutes.handOver>('POST', '/api/studios/:studioId/alerts/:alertId/hand-over', {
        params,
        body: { personId: this.personId(), note: this.note() },
      }),
    );
  }

  private async act(
    done: string,
    send: (params: { studioId: string; alertId: string }) => Promise<unknown>,
  ): Promise<void> {
    const studioId = this.place()?.id;
    if (studioId === undefined || this.busy()) return;
    this.busy.set(true);
    this.fault.set(null);
    try {
      await send({ studioId, alertId: this.alertId() });
      this.asking.set(null);
      this.note.set('');
      this.announcer.say(done);
      await this.load();
    } catch (error) {
      this.fault.set(sentenceOf(error));
    } finally {
      this.busy.set(false);
    }
  }
}
