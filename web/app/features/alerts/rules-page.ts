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
import { FormArray, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatCheckbox } from '@angular/material/checkbox';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import { RouterLink } from '@angular/router';
import type { alertRoutes, Rule } from '#shared/contract/alerts';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Saving } from '../../core/api/saving';
import { LiveStore } from '../../core/live/live-store';
import { Session } from '../../core/session/session';
import { Formats } from '../../core/time/studio-formats';
import { EmptyNote } from '../../ui/empty-note';
import { ErrorNote } from '../../ui/error-note';
import { FormField } from '../../ui/form-field';
import { LoadingNote } from '../../ui/loading-note';
import { PageHeader } from '../../ui/page-header';
import { type RuleForm, ruleForm, ruleOf } from './rule-form';
import { clearByUnit, limitInWords, RULE_WORDS } from './rule-words';

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
  protected readonly form = new FormGroup({ rules: new FormArray<RuleForm>([]) });
  protected readonly saving = new Saving();
  /** Whether a number was refused before anything was sent. */
  protected readonly refused = signal(false);
  protected readonly saved = signal(false);
  protected readonly place = computed(() => this.live.room(this.roomId()) ?? null);
  private readonly studioId = computed(() => this.place()?.studio.id ?? null);
  private readonly formats = computed(() => {
    const place = this.place();
    return place ? this.formatsOf.of(place.studio.studio()) : null;
  });
  private readonly unit = computed(() => this.formats()?.unit ?? 'C');
  protected readonly note = computed(() => {
    const place = this.place();
    return place ? `${place.studio.studio().name}, ${place.room.info().name}` : '';
  });
  protected readonly mayWrite = computed(() => this.session.may('rules.write', this.studioId() ?? ''));
  protected readonly mayLimits = computed(() => this.session.may('rooms.write', this.studioId() ?? ''));
  /** Each rule with its name, its limit as it is now, and its way back. */
  protected readonly lines = computed(() => {
    const [place, formats] = [this.place(), this.formats()];
    if (!place || !formats) return [];
    return (this.rules.value() ?? []).map(({ kind }, index) => {
      const unit = clearByUnit(kind);
      return {
        ...{ kind, index, ...RULE_WORDS[kind] },
        limit: limitInWords(kind, place.room.info().limits, place.room.now(), formats),
        backUnit: unit === null ? '' : unit === 'percent' ? '%' : formats.unitSign,
      };
    });
  });

  constructor() {
    effect(() => {
      if (this.studioId() !== null) untracked(() => void this.load());
    });
    effect(() => {
      const [rules, unit, may] = [this.rules.value(), this.unit(), this.mayWrite()];
      untracked(() => {
        this.form.controls.rules.clear();
        for (const rule of rules ?? []) this.form.controls.rules.push(ruleForm(rule, unit));
        if (may) this.form.enable();
        else this.form.disable();
      });
    });
  }

  protected load(): Promise<void> {
    const params = { studioId: this.studioId() ?? '', roomId: this.roomId() };
    return this.rules.load(() =>
      this.api.call<typeof alertRoutes.rules>('GET', '/api/studios/:studioId/rooms/:roomId/rules', {
        params,
      }),
    );
  }

  protected async save(): Promise<void> {
    const studioId = this.studioId();
    if (studioId === null) return;
    const { rules } = this.form.controls;
    this.refused.set(rules.invalid);
    const saved = await this.saving.form(rules, async () => {
      this.rules.set(
        await this.api.call<typeof alertRoutes.setRules>(
          'PUT',
          '/api/studios/:studioId/rooms/:roomId/rules',
          {
            params: { studioId, roomId: this.roomId() },
            body: rules.controls.map((form) => ruleOf(form, this.unit())),
          },
        ),
      );
    });
    this.saved.set(saved);
    if (saved) this.announcer.say('The rules were saved.');
  }
}
