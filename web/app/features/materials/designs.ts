import { ChangeDetectionStrategy, Component, computed, inject, input, output, signal } from '@angular/core';
import { toSignal } from '@angular/core/rxjs-interop';
import { FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import type { Design, Fragrance, materialRoutes, Wax } from '#shared/contract/materials';
import { loadOfMix } from '#shared/cure/load';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Saving } from '../../core/api/saving';
import { figure } from '../../core/units/measure-words';
import { DataTable } from '../../ui/data-table';
import { EmptyNote } from '../../ui/empty-note';
import { FormField } from '../../ui/form-field';

const words = () =>
  new FormControl('', { nonNullable: true, validators: [Validators.required, Validators.maxLength(80)] });
const needed = (value: number) =>
  new FormControl(value, { nonNullable: true, validators: [Validators.required] });
const DATE = new Intl.DateTimeFormat('en-GB', { dateStyle: 'medium' });

/** Designs: wax, fragrance, load, wick and vessel; what a burn test passes or fails. */
@Component({
  selector: 'sr-designs',
  imports: [
    DataTable,
    EmptyNote,
    FormField,
    MatButton,
    MatFormField,
    MatLabel,
    MatOption,
    MatSelect,
    ReactiveFormsModule,
  ],
  templateUrl: './designs.html',
  styleUrl: './sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Designs {
  readonly designs = input.required<readonly Design[]>();
  readonly waxes = input.required<readonly Wax[]>();
  readonly fragrances = input.required<readonly Fragrance[]>();
  readonly mayWrite = input.required<boolean>();
  readonly changed = output();

  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  protected readonly adding = signal(false);
  protected readonly saving = new Saving();
  protected readonly form = new FormGroup({
    name: words(),
    waxId: new FormControl('', { nonNullable: true, validators: [Validators.required] }),
    fragranceId: new FormControl<string | null>(null),
    loadPercentOfWax: needed(6),
    wick: words(),
    vessel: words(),
    vesselDiameterMm: needed(75),
    fillGrams: needed(220),
  });
  private readonly values = toSignal(this.form.valueChanges);
  /** What is unusual about the load, in sentences. */
  protected readonly warnings = computed(() => {
    this.values();
    const { waxId, fragranceId, loadPercentOfWax } = this.form.getRawValue();
    const wax = this.waxes().find(({ id }) => id === waxId);
    const oil = this.fragrances().find(({ id }) => id === fragranceId);
    const ofMix = loadOfMix(Math.min(100, Math.max(0, loadPercentOfWax)));
    const found: string[] = [];
    if (wax && loadPercentOfWax > wax.kinetics.maxLoad) {
      found.push(`${wax.name} takes ${wax.kinetics.maxLoad} % of the wax at most; more may sweat out.`);
    }
    if (oil && oil.certificateMaxLoad !== null && ofMix > oil.certificateMaxLoad) {
      found.push(
        `The certificate of ${oil.name} allows ${oil.certificateMaxLoad} % of the mix; this is ${figure(ofMix, 1)} %.`,
      );
    }
    return found;
  });
  protected readonly ofMix = computed(() => {
    this.values();
    return figure(loadOfMix(Math.min(100, Math.max(0, this.form.getRawValue().loadPercentOfWax))), 1);
  });

  protected waxOf(design: Design): string {
    return this.waxes().find(({ id }) => id === design.waxId)?.name ?? '';
  }

  protected fragranceOf(design: Design): string {
    if (design.fragranceId === null) return 'unscented';
    const name = this.fragrances().find(({ id }) => id === design.fragranceId)?.name ?? '';
    return `${name}, ${figure(design.loadPercentOfWax, 1)} % of wax (${figure(loadOfMix(design.loadPercentOfWax), 1)} % of mix)`;
  }

  protected testOf({ lastTest }: Design): string {
    if (lastTest === null) return 'not tested yet';
    return `${lastTest.passed ? 'passed' : 'failed'} ${DATE.format(new Date(lastTest.at))}`;
  }

  protected async add(): Promise<void> {
    await this.saving.form(this.form, async () => {
      const { name } = await this.api.call<typeof materialRoutes.createDesign>('POST', '/api/designs', {
        body: this.form.getRawValue(),
      });
      this.form.reset();
      this.adding.set(false);
      this.announcer.say(`${name} was added.`);
      this.changed.emit();
    });
  }
}
