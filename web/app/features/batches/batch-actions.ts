import {
  ChangeDetectionStrategy,
  Component,
  computed,
  type ElementRef,
  inject,
  input,
  signal,
  viewChild,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatCheckbox } from '@angular/material/checkbox';
import { MatFormField, MatHint, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect } from '@angular/material/select';
import type { BatchPage } from '#shared/contract/batches';
import { WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';
import { Announcer } from '../../core/announcer/announcer';
import { ApiError, sentenceOf } from '../../core/api/api-error';
import { shelfDoubts, shelfGroups } from '../../core/live/shelf-groups';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { instantOfLocal, localInput } from '../../core/time/zoned-time';
import { ShelfChoice } from '../../ui/shelf-choice';
import { changesInWords } from './batch-changes';
import { BatchStore } from './batch-store';

type Action = 'move' | 'dispatch' | 'scrap' | 'test';

const DONE: Readonly<Record<Action, string>> = {
  move: 'Moved.',
  dispatch: 'Dispatched.',
  scrap: 'Scrapped.',
  test: 'Signed.',
};
const SHORTEST_REASON = 3;

/** What can be done with a batch: move, dispatch, scrap, sign a wick test. */
@Component({
  selector: 'sr-batch-actions',
  imports: [
    MatButton,
    MatCheckbox,
    MatFormField,
    MatHint,
    MatInput,
    MatLabel,
    MatOption,
    MatSelect,
    ShelfChoice,
  ],
  templateUrl: './batch-actions.html',
  styleUrl: './batch-actions.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class BatchActions {
  readonly batch = input.required<BatchPage>();

  private readonly store = inject(BatchStore);
  private readonly session = inject(Session);
  private readonly announcer = inject(Announcer);
  private readonly clock = inject(StudioClock);
  private readonly formatsOf = inject(Formats);
  private readonly section = viewChild<ElementRef<HTMLElement>>('section');
  protected readonly asking = signal<Action | null>(null);
  /** The batch as it was when the question was opened, or when somebody else's change was shown. */
  private readonly seen = signal<BatchPage | null>(null);
  protected readonly shelfId = signal('');
  protected readonly overfill = signal(false);
  protected readonly reason = signal('');
  protected readonly passed = signal<boolean | null>(null);
  /** Local time in the studio; '' for now. */
  protected readonly at = signal('');
  protected readonly fault = signal<string | null>(null);
  /** What somebody else did meanwhile: the person chooses whether to go on. */
  protected readonly overtaken = signal<string | null>(null);
  protected readonly busy = signal(false);

  protected readonly may = computed(() => {
    const id = this.store.studio()?.id ?? '';
    const curing = this.batch().card.status === 'curing';
    return {
      move: curing && this.session.may('batches.move', id),
      end: curing && this.session.may('batches.release', id),
      test: this.session.may('tests.sign', id),
    };
  });
  protected readonly any = computed(() => Object.values(this.may()).some((one) => one));
  private readonly formats = computed(() => {
    const studio = this.store.studio();
    return studio ? this.formatsOf.of(studio.studio()) : null;
  });
  private readonly zone = computed(() => this.formats()?.timeZone ?? 'UTC');
  protected readonly city = computed(() => this.formats()?.city ?? '');
  /** The other shelves of the studio, and the one that suits best. */
  protected readonly shelves = computed(() => {
    const [studio, formats] = [this.store.studio(), this.formats()];
    const { card } = this.batch();
    if (studio === null || formats === null) return { groups: [], suggestion: null };
    const wax = card.waxFamily === null ? null : WAX_FAMILY_DEFAULTS[card.waxFamily].kinetics;
    const limit = wax === null || wax.frosting === 'no' ? null : wax.frostingFrom;
    const { groups, suggestion } = shelfGroups(studio, card.vessels, limit, formats);
    return {
      groups: groups.map((group) => ({
        ...group,
        shelves: group.shelves.filter(({ id }) => id !== card.shelfId),
      })),
      suggestion: suggestion?.id === card.shelfId ? null : suggestion,
    };
  });
  protected readonly doubts = computed(() =>
    shelfDoubts(this.shelves().groups, this.shelfId(), this.batch().card.vessels),
  );
  /** Whether what is asked for has been filled in. */
  protected readonly complete = computed(() => {
    const reason = this.reason().trim().length >= SHORTEST_REASON;
    switch (this.asking()) {
      case 'move':
        return this.shelfId() !== '';
      case 'test':
        return this.passed() !== null && this.at() !== '';
      case 'dispatch':
        return this.batch().card.ship.state === 'reached' || reason;
      case 'scrap':
        return reason;
      case null:
        return false;
    }
  });

  protected ask(action: Action): void {
    this.fault.set(null);
    this.overtaken.set(null);
    this.reason.set('');
    this.overfill.set(false);
    this.passed.set(null);
    this.shelfId.set('');
    this.at.set(action === 'test' ? localInput(this.clock.minute(), this.zone()) : '');
    this.seen.set(this.batch());
    this.asking.set(action);
  }

  protected leave(): void {
    this.asking.set(null);
    this.section()?.nativeElement.focus();
  }

  /** Sends what is asked for, against the batch as the person saw it. */
  protected async send(): Promise<void> {
    const [action, seen] = [this.asking(), this.seen()];
    if (action === null || seen === null || this.busy()) return;
    this.busy.set(true);
    this.fault.set(null);
    this.overtaken.set(null);
    try {
      await this.sent(action, seen.card.version);
      this.announcer.say(DONE[action]);
      this.leave();
    } catch (error) {
      if (error instanceof ApiError && error.code === 'changed-meanwhile') await this.showTheirs(seen);
      else this.fault.set(sentenceOf(error));
    } finally {
      this.busy.set(false);
    }
  }

  private sent(action: Action, version: number): Promise<void> {
    const reason = this.reason().trim();
    const at = this.at() === '' ? {} : { at: new Date(instantOfLocal(this.at(), this.zone())).toISOString() };
    switch (action) {
      case 'move':
        return this.store.move({ version, shelfId: this.shelfId(), overfill: this.overfill(), ...at });
      case 'test':
        return this.store.recordTest({ at: at.at ?? '', passed: this.passed() === true, note: reason });
      case 'dispatch':
      case 'scrap':
        return this.store.end({
          version,
          as: action === 'dispatch' ? 'dispatched' : 'scrapped',
          ...at,
          ...(reason === '' ? {} : { reason }),
        });
    }
  }

  /** Loads what the other person made of it and says so; what was filled in here stays, nothing is overwritten. */
  private async showTheirs(seen: BatchPage): Promise<void> {
    await this.store.load(seen.card.id, seen.card.studioId);
    const theirs = this.store.page.value() ?? seen;
    this.overtaken.set(changesInWords(seen, theirs));
    this.seen.set(theirs);
  }
}
