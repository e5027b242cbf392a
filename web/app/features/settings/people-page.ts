import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatCheckbox } from '@angular/material/checkbox';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import type { Person, peopleRoutes } from '#shared/contract/people';
import type { StudioRole } from '#shared/contract/roles';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Saving } from '../../core/api/saving';
import { Session } from '../../core/session/session';
import { Confirm } from '../../ui/confirm-dialog';
import { DataTable } from '../../ui/data-table';
import { ErrorNote } from '../../ui/error-note';
import { LoadingNote } from '../../ui/loading-note';
import { FormField } from '../../ui/form-field';
import { plainTime } from './plain-time';
import { StudioChoice } from './studio-choice';

type Held = StudioRole | 'none';

const ROLE_WORDS: Readonly<Record<Held, string>> = {
  none: 'no role',
  lead: 'lead: runs rooms and racks, releases, signs tests',
  maker: 'maker: pours, places, acknowledges',
  viewer: 'viewer: sees what is ready when',
};
const STATE_WORDS: Readonly<Record<Person['state'], string>> = {
  active: 'active',
  invited: 'invited, has not accepted',
  disabled: 'disabled',
};

/** People, their roles studio by studio, invitations. */
@Component({
  selector: 'sr-people-page',
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
  templateUrl: './people-page.html',
  styleUrl: './settings-sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PeoplePage {
  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  private readonly confirm = inject(Confirm);
  private readonly choice = inject(StudioChoice);
  protected readonly session = inject(Session);
  protected readonly people = new Loadable<Person[]>();
  protected readonly editing = signal<Person | 'new' | null>(null);
  protected readonly roles = signal<ReadonlyMap<string, Held>>(new Map());
  protected readonly saving = new Saving();
  protected readonly time = plainTime;
  protected readonly studios = computed(() => this.choice.studiosWith('people.invite'));
  protected readonly isOwner = computed(() => this.session.me()?.owner === true);
  /** A lead invites makers and viewers only. */
  protected readonly choosable = computed<readonly Held[]>(() =>
    this.isOwner() ? ['none', 'lead', 'maker', 'viewer'] : ['none', 'maker', 'viewer'],
  );
  protected readonly form = new FormGroup({
    email: new FormControl('', { nonNullable: true, validators: [Validators.required, Validators.email] }),
    owner: new FormControl(false, { nonNullable: true }),
  });

  constructor() {
    void this.load();
  }

  protected load(): Promise<void> {
    return this.people.load(() => this.api.call<typeof peopleRoutes.list>('GET', '/api/people'));
  }

  protected words(role: Held): string {
    return ROLE_WORDS[role];
  }

  protected stateOf(person: Person): string {
    return STATE_WORDS[person.state];
  }

  protected rolesOf(person: Person): string {
    if (person.owner) return 'owner of every studio';
    const known = this.choice.studiosWith('readiness.read');
    const words = person.memberships.map(
      ({ studioId, role }) =>
        `${role} in ${known.find(({ id }) => id === studioId)?.name ?? 'another studio'}`,
    );
    return words.length === 0 ? 'no role' : words.join(', ');
  }

  protected edit(person: Person | 'new'): void {
    this.saving.clear();
    this.editing.set(person);
    this.form.reset(person === 'new' ? {} : { email: person.email, owner: person.owner });
    const held = person === 'new' ? [] : person.memberships;
    this.roles.set(new Map(held.map(({ studioId, role }) => [studioId, role])));
  }

  protected setRole(studioId: string, role: Held): void {
    this.roles.update((roles) => new Map(roles).set(studioId, role));
  }

  protected async save(): Promise<void> {
    const editing = this.editing();
    if (editing === null) return;
    const { email, owner } = this.form.getRawValue();
    const memberships = [...this.roles()].flatMap(([studioId, role]) =>
      role === 'none' ? [] : [{ studioId, role }],
    );
    await this.saving.form(this.form, async () => {
      if (editing === 'new') {
        await this.api.call<typeof peopleRoutes.invite>('POST', '/api/people/invitations', {
          body: { email, owner, memberships },
        });
        this.announcer.say(`An invitation goes to ${email}.`);
      } else {
        await this.#change(editing, { owner, memberships });
        this.announcer.say(`${editing.name || editing.email} was changed and has to sign in again.`);
      }
      this.editing.set(null);
      await this.load();
    });
  }

  protected async setDisabled(person: Person, disabled: boolean): Promise<void> {
    const answer = await this.confirm.ask({
      title: disabled
        ? `Disable ${person.name || person.email}?`
        : `Enable ${person.name || person.email} again?`,
      text: disabled
        ? 'Every session ends at once. What they did stays in the audit trail.'
        : 'They can sign in again with their roles.',
      action: disabled ? 'Disable' : 'Enable',
    });
    if (answer === null) return;
    await this.saving.act(async () => {
      await this.#change(person, { disabled });
      await this.load();
    });
  }

  #change(
    person: Person,
    change: { owner?: boolean; memberships?: { studioId: string; role: StudioRole }[]; disabled?: boolean },
  ): Promise<unknown> {
    return this.api.call<typeof peopleRoutes.change>('PATCH', '/api/people/:personId', {
      params: { personId: person.id },
      body: { version: person.version, ...change },
    });
  }
}
