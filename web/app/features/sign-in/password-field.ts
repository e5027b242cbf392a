import { ChangeDetectionStrategy, Component, input, signal } from '@angular/core';
import { type FormControl, ReactiveFormsModule } from '@angular/forms';
import { MatIconButton } from '@angular/material/button';
import { MatError, MatFormField, MatHint, MatLabel, MatSuffix } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { controlError } from '../../ui/control-error';
import { Icon } from '../../ui/icon';

/** A password, shown on request. */
@Component({
  selector: 'sr-password-field',
  imports: [
    Icon,
    MatError,
    MatFormField,
    MatHint,
    MatIconButton,
    MatInput,
    MatLabel,
    MatSuffix,
    ReactiveFormsModule,
  ],
  template: `<mat-form-field subscriptSizing="dynamic">
    <mat-label>{{ label() }}</mat-label>
    <input
      matInput
      [type]="shown() ? 'text' : 'password'"
      [formControl]="control()"
      [autocomplete]="autocomplete()"
      required
      maxlength="200"
    />
    <button
      matIconButton
      matSuffix
      type="button"
      (click)="shown.set(!shown())"
      [attr.aria-pressed]="shown()"
      aria-label="Show the password"
    >
      <sr-icon [name]="shown() ? 'eye-off' : 'eye'" />
    </button>
    @if (hint()) {
      <mat-hint>{{ hint() }}</mat-hint>
    }
    <mat-error>{{ error() }}</mat-error>
  </mat-form-field>`,
  styles: `
    mat-form-field {
      inline-size: 100%;
    }
    button {
      margin-inline-end: 4px;
    }
    sr-icon {
      font-size: 18px;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PasswordField {
  readonly control = input.required<FormControl<string>>();
  readonly label = input('Password');
  readonly hint = input('');
  readonly autocomplete = input<'current-password' | 'new-password'>('current-password');
  protected readonly shown = signal(false);

  protected error(): string {
    return controlError(this.control());
  }
}
