import { ChangeDetectionStrategy, Component, inject, input, output, signal } from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import type { materialRoutes, Wax } from '#shared/contract/materials';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Saving } from '../../core/api/saving';
import { DataTable } from '../../ui/data-table';
import { FormField } from '../../ui/form-field';
import { FAMILY_WORDS } from '../../ui/family-words';

const needed = (value = 0) =>
  new FormControl(value, { nonNullable: true, validators: [Validators.required] });

const FROSTING_WORDS: Readonly<Record<Wax['kinetics']['frosting'], string>> = {
  yes: 'frosts',
  slight: 'frosts slightly',
  no: 'does not frost',
};

/** Waxes and their cure numbers, each with where it comes from. */
@Component({
  selector: 'sr-waxes',
  imports: [
    DataTable,
    FormField,
    MatButton,
    MatFormField,
    MatLabel,
    MatOption,
    MatSelect,
    ReactiveFormsModule,
  ],
  templateUrl: './waxes.html',
  styleUrl: './sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Waxes {
  readonly waxes = input.required<readonly Wax[]>();
  readonly mayWrite = input.required<boolean>();
  readonly changed = output();

  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  protected readonly families = Object.entries(FAMILY_WORDS);
  protected readonly editing = signal<Wax | 'new' | null>(null);
  protected readonly saving = new Saving();
  protected readonly fresh = new FormGroup({
    name: new FormControl('', {
      nonNullable: true,
      validators: [Validators.required, Validators.maxLength(80)],
    }),
    family: new FormControl<Wax['family']>('soy-container', { nonNullable: true }),
  });
  protected readonly form = new FormGroup({
    name: new FormControl('', {
      nonNullable: true,
      validators: [Validators.required, Validators.maxLength(80)],
    }),
    provenance: new FormControl('', {
      nonNullable: true,
      validators: [Validators.required, Validators.minLength(3), Validators.maxLength(500)],
    }),
    kinetics: new FormGroup({
      setLagHours: needed(),
      testDays: needed(),
      shipDays: needed(),
      scentDays: needed(),
      hardeningAtTest: needed(),
      exponent: needed(),
      hardeningEnergy: needed(),
      scentEnergy: needed(),
      frosting: new FormControl<Wax['kinetics']['frosting']>('no', { nonNullable: true }),
      frostingFrom: new FormControl<number | null>(null),
      capC: needed(),
      softC: needed(),
      loadReference: needed(),
      loadSensitivity: needed(),
      maxLoad: needed(),
    }),
  });

  protected family(wax: Wax): string {
    return FAMILY_WORDS[wax.family];
  }

  protected frosting({ kinetics }: Wax): string {
    const from = kinetics.frostingFrom === null ? '' : ` above ${kinetics.frostingFrom} °C`;
    return `${FROSTING_WORDS[kinetics.frosting]}${kinetics.frosting === 'no' ? '' : from}`;
  }

  protected edit(wax: Wax | 'new'): void {
    this.saving.clear();
    this.editing.set(wax);
    if (wax === 'new') this.fresh.reset();
    else this.form.reset({ name: wax.name, provenance: wax.provenance, kinetics: wax.kinetics });
  }

  protected async add(): Promise<void> {
    await this.#save(this.fresh, () =>
      this.api.call<typeof materialRoutes.createWax>('POST', '/api/waxes', {
        body: this.fresh.getRawValue(),
      }),
    );
  }

  protected async save(wax: Wax): Promise<void> {
    const { kinetics, ...rest } = this.form.getRawValue();
    await this.#save(this.form, () =>
      this.api.call<typeof materialRoutes.changeWax>('PUT', '/api/waxes/:waxId', {
        params: { waxId: wax.id },
        body: {
          ...rest,
          kinetics: { ...kinetics, calibration: wax.kinetics.calibration },
          version: wax.version,
        },
      }),
    );
  }

  async #save(form: FormGroup, send: () => Promise<Wax>): Promise<void> {
    await this.saving.form(form, async () => {
      const { name } = await send();
      this.editing.set(null);
      this.announcer.say(`${name} was saved. Every estimate on it is made anew.`);
      this.changed.emit();
    });
  }
}
