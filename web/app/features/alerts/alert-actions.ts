import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect } from '@angular/material/select';
import type { Person, peopleRoutes } from '#shared/contract/people';
import { may, roleIn } from '#shared/contract/roles';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Saving } from '../../core/api/saving';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { Formats } from '../../core/time/studio-formats';
import { HOUR_MS } from '../../core/time/zoned-time';
import { AlertStore } from './alert-store';

const SHELVE_HOURS = [1, 2, 4, 8, 12, 24] as const;
const USUAL_HOURS = 8;
const SHORTEST_REASON = 3;

/** What can be done about an alert: acknowledge it at once, or shelve it or hand it over after a question. */
@Component({
  selector: 'sr-alert-actions',
  imports: [MatButton, MatFormField, MatInput, MatLabel, MatOption, MatSelect],
  templateUrl: './alert-actions.html',
  styles: `
    :host {
      display: grid;
      gap: 12px;
      margin-block-start: 12px;
    }
    .fault {
      color: var(--mat-sys-error);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AlertActions {
  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  private readonly clock = inject(StudioClock);
  private readonly formatsOf = inject(Formats);
  private readonly session = inject(Session);
  private readonly store = inject(AlertStore);
  protected readonly people = new Loadable<Person[]>();
  /** Which of the longer actions is open. */
  protected readonly asking = signal<'shelve' | 'hand-over' | null>(null);
  protected readonly note = signal('');
  protected readonly hours = signal<number>(USUAL_HOURS);
  protected readonly personId = signal('');
  protected readonly saving = new Saving();

  private readonly alert = computed(() => this.store.story.value()?.alert ?? null);
  protected readonly can = computed(() => {
    const [alert, studioId, me] = [this.alert(), this.store.studio()?.id ?? '', this.session.me()];
    const goesOn = alert !== null && alert.clearedAt === null;
    const may = (permission: 'alerts.acknowledge' | 'alerts.shelve') =>
      this.session.may(permission, studioId);
    return {
      acknowledge: (alert?.state === 'open' || alert?.state === 'returned') && may('alerts.acknowledge'),
      shelve: goesOn && alert.shelved === null && may('alerts.shelve'),
      unshelve: goesOn && alert.shelved !== null && may('alerts.shelve'),
      handOver: goesOn && may('alerts.acknowledge') && this.session.mayAnywhere('people.read'),
      take:
        goesOn && alert.state === 'acknowledged' && alert.holder?.id !== me?.id && may('alerts.acknowledge'),
    };
  });
  protected readonly lengths = computed(() => {
    const studio = this.store.studio()?.studio();
    const formats = studio ? this.formatsOf.of(studio) : null;
    const now = this.clock.minute();
    return SHELVE_HOURS.map((hours) => ({
      hours,
      words: `${hours} h, until ${formats?.timeSeenFrom(now + hours * HOUR_MS, now) ?? ''}`,
    }));
  });
  protected readonly reasonGiven = computed(() => this.note().trim().length >= SHORTEST_REASON);
  /** Who may see the alerts of this studio. */
  protected readonly candidates = computed(() => {
    const [studioId, holder] = [this.store.studio()?.id ?? '', this.alert()?.holder?.id];
    return (this.people.value() ?? []).filter(
      (person) =>
        person.state === 'active' && person.id !== holder && may(roleIn(person, studioId), 'alerts.read'),
    );
  });

  protected async askWho(): Promise<void> {
    this.ask('hand-over');
    await this.people.load(() => this.api.call<typeof peopleRoutes.list>('GET', '/api/people'));
  }

  protected ask(action: 'shelve' | 'hand-over' | null): void {
    this.saving.clear();
    this.personId.set('');
    this.asking.set(action);
  }

  protected acknowledge(): Promise<void> {
    return this.act('Acknowledged.', () => this.store.acknowledge(this.note().trim()));
  }

  protected shelve(): Promise<void> {
    return this.act('Shelved.', () => this.store.shelve(this.hours(), this.note().trim()));
  }

  protected unshelve(): Promise<void> {
    return this.act('Taken off the shelf.', () => this.store.unshelve());
  }

  protected handOver(): Promise<void> {
    return this.act('Handed over.', () => this.store.handOver(this.personId(), this.note().trim()));
  }

  protected take(): Promise<void> {
    return this.act('It is yours now.', () =>
      this.store.handOver(this.session.me()?.id ?? '', this.note().trim()),
    );
  }

  private async act(done: string, send: () => Promise<void>): Promise<void> {
    if (!(await this.saving.act(send))) return;
    this.asking.set(null);
    this.note.set('');
    this.announcer.say(done);
  }
}
