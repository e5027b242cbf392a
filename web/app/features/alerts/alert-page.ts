import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  untracked,
} from '@angular/core';
import { RouterLink } from '@angular/router';
import type { Alert } from '#shared/contract/alerts';
import { alertPlace, alertWords, clearedSentence } from '#shared/words/alert-words';
import { tradeName } from '#shared/words/room-state';
import { LiveStore } from '../../core/live/live-store';
import { PageTitles } from '../../core/page-titles';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats, type StudioFormats } from '../../core/time/studio-formats';
import { ALERT_STATUS } from '../../ui/alert-status';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { StatusMark } from '../../ui/status-mark';
import { AlertActions } from './alert-actions';
import { whose } from './alert-line';
import { AlertStore } from './alert-store';
import { stepWords } from './step-words';

const SEVERITY_WORDS: Readonly<Record<Alert['facts']['severity'], string>> = {
  notice: 'Notice',
  warning: 'Warning',
  critical: 'Critical',
};

/** One alert as one story: what, how bad, which batches, what to do, who has it, every step. */
@Component({
  selector: 'sr-alert-page',
  imports: [AlertActions, ErrorNote, LoadingNote, PageHeader, RouterLink, StatusMark],
  providers: [AlertStore],
  templateUrl: './alert-page.html',
  styleUrl: './alert-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AlertPage {
  /** From the address. */
  readonly alertId = input.required<string>();
  /** Studio of the alert, from the query. */
  readonly studio = input<string>();

  private readonly session = inject(Session);
  private readonly formatsOf = inject(Formats);
  private readonly clock = inject(StudioClock);
  private readonly titles = inject(PageTitles);
  protected readonly live = inject(LiveStore);
  protected readonly store = inject(AlertStore);

  private readonly formats = computed(() => {
    const studio = this.store.studio()?.studio();
    return studio ? this.formatsOf.of(studio) : null;
  });
  protected readonly mayRules = computed(() => this.session.may('rules.read', this.store.studio()?.id ?? ''));
  protected readonly told = computed(() => {
    const [story, formats] = [this.store.story.value(), this.formats()];
    if (story === null || formats === null) return null;
    const { alert, steps } = story;
    const { facts } = alert;
    const now = this.clock.minute();
    const words = alertWords(facts, formats, now);
    const over = alert.clearedAt === null ? '' : clearedSentence(facts, formats, Date.parse(alert.clearedAt));
    return {
      place: alertPlace(facts),
      roomId: alert.roomId,
      status: ALERT_STATUS[facts.kind],
      critical: facts.severity === 'critical',
      headline: words.headline,
      figures: words.figures,
      act: words.act,
      over,
      lasting: over === '' ? lasting(alert, formats, now) : SEVERITY_WORDS[facts.severity],
      who: whose(alert, formats, now),
      batches: facts.batches.map((batch) => ({ ...batch, wax: tradeName(batch.waxFamily) })),
      steps: steps.map((step) => ({
        at: formats.dayAndTime(step.at),
        what: stepWords(step, facts, formats),
        who: step.who ?? '',
        note: step.note,
      })),
    };
  });
  /** Changes when the alert does, or when it leaves the live ones. */
  private readonly liveVersion = computed(() => {
    const found = this.live
      .studios()
      .flatMap((studio) => studio.alerts())
      .find(({ id }) => id === this.alertId());
    return found?.version ?? null;
  });

  constructor() {
    effect(() => {
      const id = this.alertId();
      if (!this.live.loaded()) return;
      const version = this.liveVersion();
      const known = untracked(() => this.store.story.value()?.alert);
      if (known?.id !== id || version !== known.version) untracked(() => void this.load());
    });
    effect(() => {
      const headline = this.told()?.headline;
      if (headline) this.titles.name(headline);
    });
  }

  protected load(): Promise<void> {
    return this.store.load(this.alertId(), this.studio());
  }
}

/** "Warning, for 2 h, at its worst now." */
function lasting(alert: Alert, formats: StudioFormats, now: number): string {
  const { severity, since, value, worst } = alert.facts;
  const worstNow = value !== null && value === worst ? ', at its worst now' : '';
  return `${SEVERITY_WORDS[severity]}, for ${formats.duration(now - Date.parse(since))}${worstNow}.`;
}
