import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatCheckbox } from '@angular/material/checkbox';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import type { Person, peopleRoutes } from '#shared/contract/people';
import type { Studio, studioRoutes } from '#shared/contract/studios';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Saving } from '../../core/api/saving';
import { Session } from '../../core/session/session';
import { DataTable } from '../../ui/data-table';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { FormField } from '../../ui/form-field';
import { clockOfMinutes, minutesOfClock } from './plain-time';

const text = (value = '') => new FormControl(value, { nonNullable: true });
const number = (value: number) =>
  new FormControl(value, { nonNullable: true, validators: [Validators.required] });

/** Studios: zone, unit, pressure, quiet hours, who is told of alerts. */
@Component({
  selector: 'sr-studios-page',
  imports: [
    DataTable,
    ErrorNote,
    FormField,
    LoadingNote,
    MatButton,
    MatCheckbox,
    MatFormField,
    MatLabel,
    MatOption,
    MatSelect,
    ReactiveFormsModule,
  ],
  templateUrl: './studios-page.html',
  styleUrl: './settings-sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class StudiosPage {
  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  private readonly session = inject(Session);
  protected readonly studios = new Loadable<Studio[]>();
  protected readonly people = new Loadable<Person[]>();
  /** The studio being changed; 'new' for one to be created. */
  protected readonly editing = signal<Studio | 'new' | null>(null);
  protected readonly recipients = signal<readonly string[]>([]);
  protected readonly saving = new Saving();
  protected readonly mayCreate = computed(() => this.session.mayAnywhere('studios.create'));
  protected readonly zones = Intl.supportedValuesOf('timeZone');
  protected readonly clock = clockOfMinutes;
  protected readonly form = new FormGroup({
    name: new FormControl('', {
      nonNullable: true,
      validators: [Validators.required, Validators.maxLength(80)],
    }),
    timeZone: new FormControl('', { nonNullable: true, validators: [Validators.required] }),
    unit: new FormControl<'C' | 'F'>('C', { nonNullable: true }),
    address: text(),
    pressureHpa: number(1013.25),
    quietFrom: text(),
    quietTo: text(),
    escalateAfterMinutes: number(30),
  });
  /** Who may be told: members of the studio and owners, not viewers. */
  protected readonly candidates = computed(() => {
    const editing = this.editing();
    return (this.people.value() ?? []).filter(
      ({ owner, memberships, state }) =>
        state === 'active' &&
        (owner ||
          (editing !== 'new' &&
            memberships.some(({ studioId, role }) => studioId === editing?.id && role !== 'viewer'))),
    );
  });

  constructor() {
    void this.load();
  }

  protected async load(): Promise<void> {
    await Promise.all([
      this.studios.load(() => this.api.call<typeof studioRoutes.list>('GET', '/api/studios')),
      this.people.load(() => this.api.call<typeof peopleRoutes.list>('GET', '/api/people')),
    ]);
  }

  protected mayChange(studio: Studio): boolean {
    return this.session.may('studios.write', studio.id);
  }

  protected namesOf(ids: readonly string[]): string {
    const people = this.people.value() ?? [];
    const names = ids.map((id) => people.find((person) => person.id === id)?.name ?? 'somebody');
    return names.length === 0 ? 'the leads' : names.join(', then ');
  }

  protected edit(studio: Studio | 'new'): void {
    this.saving.clear();
    this.editing.set(studio);
    this.recipients.set(studio === 'new' ? [] : studio.recipients);
    if (studio === 'new') return this.form.reset();
    this.form.reset({
      ...{ name: studio.name, timeZone: studio.timeZone, unit: studio.unit, address: studio.address },
      ...{ pressureHpa: studio.pressureHpa, escalateAfterMinutes: studio.escalateAfterMinutes },
      quietFrom: clockOfMinutes(studio.quietFrom),
      quietTo: clockOfMinutes(studio.quietTo),
    });
  }

  protected toggle(personId: string, on: boolean): void {
    this.recipients.update((ids) => (on ? [...ids, personId] : ids.filter((id) => id !== personId)));
  }

  protected async save(): Promise<void> {
    const editing = this.editing();
    if (editing === null) return;
    const { quietFrom, quietTo, ...rest } = this.form.getRawValue();
    const body = {
      ...rest,
      quietFrom: minutesOfClock(quietFrom),
      quietTo: minutesOfClock(quietTo),
      recipients: [...this.recipients()],
    };
    await this.saving.form(this.form, async () => {
      if (editing === 'new')
        await this.api.call<typeof studioRoutes.create>('POST', '/api/studios', { body });
      else {
        await this.api.call<typeof studioRoutes.change>('PUT', '/api/studios/:studioId', {
          params: { studioId: editing.id },
          body: { ...body, version: editing.version },
        });
      }
      this.editing.set(null);
      this.announcer.say(`${body.name} was saved.`);
      await this.load();
    });
  }
}
