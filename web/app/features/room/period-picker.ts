import {
  ChangeDetectionStrategy,
  Component,
  effect,
  inject,
  input,
  output,
  signal,
  untracked,
} from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { instantOfLocal, localInput } from '../../core/time/zoned-time';
import { type Period, type PeriodName, PERIODS } from './period';

/** Chooses 6 h to a year up to now, or a range of one's own in the studio's time. */
@Component({
  selector: 'sr-period-picker',
  imports: [
    MatButton,
    MatButtonToggle,
    MatButtonToggleGroup,
    MatFormField,
    MatInput,
    MatLabel,
    ReactiveFormsModule,
  ],
  template: `<mat-button-toggle-group
      hideSingleSelectionIndicator
      [value]="period().kind"
      (change)="choose($event.value)"
      aria-label="Period"
    >
      @for (one of periods; track one.name) {
        <mat-button-toggle [value]="one.name">{{ one.label }}</mat-button-toggle>
      }
      <mat-button-toggle value="own">Own</mat-button-toggle>
    </mat-button-toggle-group>
    @if (asking()) {
      <form [formGroup]="form" (ngSubmit)="submit()">
        <mat-form-field subscriptSizing="dynamic">
          <mat-label>From ({{ city() }} time)</mat-label>
          <input matInput type="datetime-local" formControlName="from" required />
        </mat-form-field>
        <mat-form-field subscriptSizing="dynamic">
          <mat-label>To</mat-label>
          <input matInput type="datetime-local" formControlName="to" required />
        </mat-form-field>
        <button mat-stroked-button type="submit">Show</button>
        @if (fault()) {
          <p role="alert">{{ fault() }}</p>
        }
      </form>
    }`,
  styles: `
    :host {
      display: grid;
      gap: 12px;
      justify-items: start;
    }
    form {
      display: flex;
      flex-wrap: wrap;
      gap: 12px;
      align-items: center;
    }
    p {
      color: var(--mat-sys-error);
    }
    @media (max-width: 400px) {
      mat-button-toggle {
        font-size: 14px;
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PeriodPicker {
  readonly period = input.required<Period>();
  /** The stretch shown now; an own range starts from it. */
  readonly shown = input.required<{ readonly from: number; readonly to: number }>();
  readonly timeZone = input.required<string>();
  readonly city = input.required<string>();
  readonly chosen = output<Period>();

  protected readonly periods = PERIODS;
  protected readonly asking = signal(false);
  protected readonly fault = signal('');
  protected readonly form = inject(NonNullableFormBuilder).group({
    from: ['', Validators.required],
    to: ['', Validators.required],
  });

  constructor() {
    effect(() => this.asking.set(this.period().kind === 'own' || untracked(this.asking)));
  }

  protected choose(kind: PeriodName | 'own'): void {
    this.asking.set(kind === 'own');
    if (kind !== 'own') {
      this.chosen.emit({ kind });
      return;
    }
    const { from, to } = this.shown();
    this.form.setValue({ from: localInput(from, this.timeZone()), to: localInput(to, this.timeZone()) });
  }

  protected submit(): void {
    const { from, to } = this.form.getRawValue();
    if (!from || !to) {
      this.fault.set('Give both ends of the range.');
      return;
    }
    const range = { from: instantOfLocal(from, this.timeZone()), to: instantOfLocal(to, this.timeZone()) };
    this.fault.set(range.from < range.to ? '' : 'The range must end after it begins.');
    if (range.from < range.to) this.chosen.emit({ kind: 'own', ...range });
  }
}
