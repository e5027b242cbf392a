import { ChangeDetectionStrategy, Component, computed, inject, input, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatCheckbox } from '@angular/material/checkbox';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect } from '@angular/material/select';
import type { BatchPage } from '#shared/contract/batches';
import { WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';
import { Announcer } from '../../core/announcer/announcer';
import { ApiError, sentenceOf } from '../../core/api/api-error';
import { shelfGroups } from '../../core/live/shelf-groups';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { instantOfLocal, localInput } from '../../core/time/zoned-time';
import { ShelfChoice } from '../../ui/shelf-choice';
import { BatchStore } from './batch-store';

type Action = 'move' | 'dispatch' | 'scrap' | 'test';

/** What can be done with a batch: move, dispatch, scrap, sign a wick test. */
@Component({
  selector: 'sr-batch-actions',
  imports: [MatButton, MatCheckbox, MatFormField, MatInput, MatLabel, MatOption, MatSelect, ShelfChoice],
  templateUrl: './batch-actions.html',
  styles: `
    .fault {
      color: var(--mat-sys-error);
    }
    .sr-form {
      margin-block-start: 14px;
    }
    :host:empty {
      display: none;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class BatchActions {
  readonly batch = input.required<BatchPage>();

  private readonly store = inject(BatchStore);
  private readonly session = inject(Session);
  private readonly announcer = inject(Announcer);
  private readonly clock = inject(StudioClock);
  private readonly formatsOf = inject(Formats);
  protected readonly asking = signal<Action | null>(null);
  protected readonly shelfId = signal('');
  protected readonly overfill = signal(false);
  protected readonly reason = signal('');
  protected readonly passed = signal<boolean | null>(null);
  protected readonly testedAt = signal('');
  protected readonly fault = signal<string | null>(null);
  /** Somebody else changed the batch meanwhile: load theirs, or try again on top of it. */
  protected readonly overtaken = signal(false);
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
  protected readonly shelves = computed(() => {
    const studio = this.store.studio();
    const { card } = this.batch();
    if (studio === null) return { groups: [], suggestion: null };
    const wax = card.waxFamily === null ? null : WAX_FAMILY_DEFAULTS[card.waxFamily].kinetics;
    const limit = wax === null || wax.frosting === 'no' ? null : wax.frostingFrom;
    return shelfGroups(studio, card.vessels, limit, this.formatsOf.of(studio.studio()));
  });

  protected ask(action: Action): void {
    this.fault.set(null);
    this.reason.set('');
    this.overfill.set(false);
    this.passed.set(null);
    this.shelfId.set('');
    const zone = this.store.studio()?.studio().timeZone ?? 'UTC';
    this.testedAt.set(localInput(this.clock.minute(), zone));
    this.asking.set(action);
  }

  protected move(): Promise<void> {
    return this.act('Moved.', () =>
      this.store.move({
        version: this.batch().card.version,
        shelfId: this.shelfId(),
        overfill: this.overfill(),
      }),
    );
  }

  protected end(as: 'dispatched' | 'scrapped'): Promise<void> {
    const reason = this.reason().trim();
    return this.act(as === 'dispatched' ? 'Dispatched.' : 'Scrapped.', () =>
      this.store.end({ version: this.batch().card.version, as, ...(reason === '' ? {} : { reason }) }),
    );
  }

  protected sign(): Promise<void> {
    const zone = this.store.studio()?.studio().timeZone ?? 'UTC';
    const at = new Date(instantOfLocal(this.testedAt(), zone)).toISOString();
    return this.act('Signed.', () =>
      this.store.recordTest({ at, passed: this.passed() === true, note: this.reason().trim() }),
    );
  }

  /** Loads what the other person made of it; what was typed here stays. */
  protected async loadTheirs(): Promise<void> {
    const { id, studioId } = this.batch().card;
    await this.store.load(id, studioId);
    this.overtaken.set(false);
    this.fault.set(null);
  }

  private async act(done: string, send: () => Promise<void>): Promise<void> {
    if (this.busy()) return;
    this.busy.set(true);
    this.fault.set(null);
    this.overtaken.set(false);
    try {
      await send();
      this.asking.set(null);
      this.announcer.say(done);
    } catch (error) {
      this.fault.set(sentenceOf(error));
      this.overtaken.set(error instanceof ApiError && error.code === 'changed-meanwhile');
      if (error instanceof ApiError && error.code === 'shelf-full') this.overfill.set(false);
    } finally {
      this.busy.set(false);
    }
  }
}
