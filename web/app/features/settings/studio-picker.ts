import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOption, MatSelect } from '@angular/material/select';
import type { Permission } from '#shared/contract/roles';
import { StudioChoice } from './studio-choice';

/** Chooses the studio a settings page is about; nothing where there is only one. */
@Component({
  selector: 'sr-studio-picker',
  imports: [MatFormField, MatLabel, MatOption, MatSelect],
  template: `@if (studios().length > 1) {
      <mat-form-field subscriptSizing="dynamic">
        <mat-label>Studio</mat-label>
        <mat-select [value]="chosen()?.id" (selectionChange)="choice.choose($event.value)">
          @for (studio of studios(); track studio.id) {
            <mat-option [value]="studio.id">{{ studio.name }}</mat-option>
          }
        </mat-select>
      </mat-form-field>
    } @else if (chosen()) {
      <p>
        <b>{{ chosen()?.name }}</b>
      </p>
    }`,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class StudioPicker {
  readonly permission = input.required<Permission>();

  protected readonly choice = inject(StudioChoice);
  protected readonly studios = computed(() => this.choice.studiosWith(this.permission()));
  protected readonly chosen = computed(() => this.choice.with(this.permission())());
}
