import { ChangeDetectionStrategy, Component, inject, input, output, signal } from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import type { Fragrance, materialRoutes } from '#shared/contract/materials';
import { Announcer } from '../../core/announcer/announcer';
import { Api } from '../../core/api/api';
import { Saving } from '../../core/api/saving';
import { DataTable } from '../../ui/data-table';
import { EmptyNote } from '../../ui/empty-note';
import { FormField } from '../../ui/form-field';

/** Fragrance oils with flash point and the certificate's maximum. */
@Component({
  selector: 'sr-fragrances',
  imports: [DataTable, EmptyNote, FormField, MatButton, ReactiveFormsModule],
  template: `<section class="sr-sheet" aria-labelledby="fragrances">
    <div class="head">
      <h2 id="fragrances">Fragrance oils</h2>
      @if (mayWrite()) {
        <button mat-stroked-button type="button" (click)="adding.set(true)">Add a fragrance oil</button>
      }
    </div>
    <p class="sr-muted">
      Keep the pour below the closed-cup flash point as a precaution at the pot; it says nothing about the
      finished candle. Classify and label from the supplier’s safety data sheet under your local law.
    </p>
    @if (fragrances().length === 0) {
      <sr-empty-note title="No fragrance oil yet." />
    } @else {
      <sr-data-table label="Fragrance oils">
        <table class="sr-table">
          <thead>
            <tr>
              <th scope="col">Fragrance oil</th>
              <th scope="col" class="num">Flash point, °C</th>
              <th scope="col" class="num">Certificate’s maximum, % of mix</th>
            </tr>
          </thead>
          <tbody>
            @for (oil of fragrances(); track oil.id) {
              <tr>
                <th scope="row">{{ oil.name }}</th>
                <td class="num">{{ oil.flashPoint ?? 'unknown' }}</td>
                <td class="num">{{ oil.certificateMaxLoad ?? 'unknown' }}</td>
              </tr>
            }
          </tbody>
        </table>
      </sr-data-table>
    }
    @if (adding()) {
      <form class="sr-form" [formGroup]="form" (ngSubmit)="add()" novalidate>
        <h3>New fragrance oil</h3>
        <sr-form-field label="Name" [control]="form.controls.name" />
        <div class="pair">
          <sr-form-field
            label="Flash point"
            type="number"
            unit="°C"
            hint="Closed cup, from the data sheet"
            [control]="form.controls.flashPoint"
          />
          <sr-form-field
            label="Certificate’s maximum"
            type="number"
            unit="% of mix"
            [control]="form.controls.certificateMaxLoad"
          />
        </div>
        @if (saving.fault()) {
          <p role="alert" class="fault">{{ saving.fault() }}</p>
        }
        <div class="sr-actions">
          <button mat-flat-button type="submit" [disabled]="saving.busy()">Add</button>
          <button mat-button type="button" (click)="adding.set(false)">Leave it</button>
        </div>
      </form>
    }
  </section>`,
  styleUrl: './sheet.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Fragrances {
  readonly fragrances = input.required<readonly Fragrance[]>();
  readonly mayWrite = input.required<boolean>();
  readonly changed = output();

  private readonly api = inject(Api);
  private readonly announcer = inject(Announcer);
  protected readonly adding = signal(false);
  protected readonly saving = new Saving();
  protected readonly form = new FormGroup({
    name: new FormControl('', {
      nonNullable: true,
      validators: [Validators.required, Validators.maxLength(80)],
    }),
    flashPoint: new FormControl<number | null>(null),
    certificateMaxLoad: new FormControl<number | null>(null),
  });

  protected async add(): Promise<void> {
    await this.saving.form(this.form, async () => {
      const { name } = await this.api.call<typeof materialRoutes.createFragrance>('POST', '/api/fragrances', {
        body: this.form.getRawValue(),
      });
      this.form.reset();
      this.adding.set(false);
      this.announcer.say(`${name} was added.`);
      this.changed.emit();
    });
  }
}
