import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import { type FormControl, ReactiveFormsModule } from '@angular/forms';
import { MatError, MatFormField, MatHint, MatLabel, MatSuffix } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { controlError } from './control-error';

/**
 * One line of a form: label, input, hint, and what is wrong beside it. The type of a number stands in the template: by it
 * the forms know that a value is a number.
 */
@Component({
  selector: 'sr-form-field',
  imports: [MatError, MatFormField, MatHint, MatInput, MatLabel, MatSuffix, ReactiveFormsModule],
  template: `<mat-form-field subscriptSizing="dynamic">
    <mat-label>{{ label() }}</mat-label>
    @if (type() === 'number') {
      <input matInput type="number" [formControl]="control()" [step]="step()" autocomplete="off" />
    } @else {
      <input
        matInput
        [type]="type()"
        [formControl]="control()"
        [attr.list]="list() || null"
        [attr.autocomplete]="autocomplete()"
      />
    }
    @if (unit()) {
      <span matTextSuffix>{{ unit() }}</span>
    }
    @if (hint()) {
      <mat-hint>{{ hint() }}</mat-hint>
    }
    <mat-error>{{ error() }}</mat-error>
  </mat-form-field>`,
  styles: `
    :host,
    mat-form-field {
      display: block;
      inline-size: 100%;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class FormField {
  readonly label = input.required<string>();
  readonly control = input.required<FormControl<string> | FormControl<number> | FormControl<number | null>>();
  readonly type = input('text');
  readonly step = input('any');
  readonly unit = input('');
  readonly hint = input('');
  readonly list = input('');
  readonly autocomplete = input('off');

  protected error(): string {
    return controlError(this.control());
  }
}
