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
import { FormArray, FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatCheckbox } from '@angular/material/checkbox';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import { RouterLink } from '@angular/router';
import type { alertRoutes, Rule, Severity } from '#shared/contract/alerts';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { showFieldErrors } from '../../core/api/api-error';
import { Loadable } from '../../core/api/loadable';
import { LiveStore } from '../../core/live/live-store';
import { Session } from '../../core/session/session';
import { Formats } from '../../core/time/studio-formats';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { FormField } from '../../ui/form-field';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { clearByInWords, RULE_WORDS } from './rule-words';

const needed = (value: number, max: number) =>
  new FormControl(value, {
    nonNullable: true,
    validators: [Validators.required, Validators.min(0), Validators.max(max)],
  });

const ruleForm = (rule: Rule) =>
  new FormGroup({
    kind: new FormControl(rule.kind, { nonNullable: true }),
    enabled: new FormControl(rule.enabled, { nonNullable: true }),
    severity: new FormControl<Severity>(rule.severity, { nonNullable: true }),
    onDelayMinutes: needed(rule.onDelayMinutes, 720),
    offDelayMinutes: needed(rule.offDelayMinutes, 720),
    clearBy: needed(rule.clearBy, 20),
  });

/** The alert rules of one room. */
@Component({
  selector: 'sr-rules-page',
  imports: [
    EmptyNote,
    ErrorNote,
    FormField,
    LoadingNote,
    MatButton,
    MatCheckbox,
    MatFormField,
    MatLabel,
    MatOption,
    MatSelect,
    PageHeader,
    ReactiveFormsModule,
    RouterLink,
  ],
  templateUrl: './rules-page.html',
  styleUrl: './rules-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RulesPage {
  /** From the address. */
  readonly roomId = input.required<string>();

  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  private readonly session = inject(Session);
  private readonly formatsOf = inject(Formats);
  protected readonly live = inject(LiveStore);
  protected readonly rules = new Loadable<Rule[]>();
  protected readonly form = new FormGroup({ rules: new FormArray<ReturnType<typeof ruleForm>>([]) });
  protected readonly fault = signal<string | null>(null);
  protected readonly busy = signal(false);
  protected readonly place = computed(() => this.live.room(this.roomId()) ?? null);
  protected readonly note = computed(() => {
    const place = this.place();
    return place ? `${place.studio.studio().name}, ${place.room.info().name}` : '';
  });
  protected readonly mayWrite = computed(() =>
    this.session.may('rules.write', this.place()?.studio.id ?? ''),
  );

  constructor() {
    effect(() => {
      if (this.place() !== null && untracked(() => this.rules.value()) === null)
        untracked(() => void this.load());
    });
  }

  protected words(rule: Rule['kind']) {
    return RULE_WORDS[rule];
  }

  protected clearBy(kind: Rule['kind'], value: number): string {
    const studio = this.place()?.studio.studio();
    return studio ? clearByInWords(kind, value, this.formatsOf.of(studio)) : '';
  }

  protected async load(): Promise<void> {
    const params = { studioId: this.place()?.studio.id ?? '', roomId: this.roomId() };
    await this.rules.load(() =>
      this.api.call<typeof alertRoutes.rules>('GET', '/api/studios/:studioId/rooms/:roomId/rules', {
        params,
      }),
    );
    this.show(this.rules.value() ?? []);
  }

  protected async save(): Promise<void> {
    const studioId = this.place()?.studio.id;
    this.form.markAllAsTouched();
    if (studioId === undefined || this.form.invalid || this.busy()) return;
    this.busy.set(true);
    this.fault.set(null);
    try {
      this.rules.set(
        await this.api.call<typeof alertRoutes.setRules>(
          'PUT',
          '/api/studios/:studioId/rooms/:roomId/rules',
          {
            params: { studioId, roomId: this.roomId() },
            body: this.form.controls.rules.getRawValue(),
          },
        ),
      );
      this.announcer.say('The rules were saved.');
    } catch (error) {
      this.fault.set(showFieldErrors(error, this.form));
    } finally {
      this.busy.set(false);
    }
  }

  private show(rules: readonly Rule[]): void {
    this.form.controls.rules.clear();
    for (const rule of rules) this.form.controls.rules.push(ruleForm(rule));
    if (!this.mayWrite()) this.form.disable();
  }
}
