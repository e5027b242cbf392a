import { ChangeDetectionStrategy, Component, inject, Injectable, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import {
  MAT_DIALOG_DATA,
  MatDialog,
  MatDialogActions,
  MatDialogClose,
  MatDialogContent,
  MatDialogRef,
  MatDialogTitle,
} from '@angular/material/dialog';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { firstValueFrom } from 'rxjs';

export interface Question {
  readonly title: string;
  readonly text: string;
  /** Label of the button that does it, e.g. "Scrap batch". */
  readonly action: string;
  /** Asks for a written reason of at least three characters under this label. */
  readonly reasonLabel?: string;
}

/** Answer of a confirmed question; `reason` is '' when none was asked for. */
export interface Confirmed {
  readonly reason: string;
}

@Component({
  selector: 'sr-confirm-dialog',
  imports: [
    MatButton,
    MatDialogActions,
    MatDialogClose,
    MatDialogContent,
    MatDialogTitle,
    MatFormField,
    MatInput,
    MatLabel,
  ],
  template: `<h2 mat-dialog-title>{{ question.title }}</h2>
    <mat-dialog-content>
      <p>{{ question.text }}</p>
      @if (question.reasonLabel; as label) {
        <mat-form-field>
          <mat-label>{{ label }}</mat-label>
          <textarea
            matInput
            rows="3"
            maxlength="500"
            [value]="reason()"
            (input)="reason.set($any($event.target).value)"
          ></textarea>
        </mat-form-field>
      }
    </mat-dialog-content>
    <mat-dialog-actions>
      <button mat-button type="button" mat-dialog-close>Leave it</button>
      <button mat-flat-button type="button" [disabled]="!complete()" (click)="confirm()">
        {{ question.action }}
      </button>
    </mat-dialog-actions>`,
  styles: `
    mat-form-field {
      inline-size: 100%;
      margin-block-start: 12px;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ConfirmDialog {
  protected readonly question = inject<Question>(MAT_DIALOG_DATA);
  protected readonly reason = signal('');
  private readonly dialog = inject<MatDialogRef<ConfirmDialog, Confirmed>>(MatDialogRef);

  protected complete(): boolean {
    return !this.question.reasonLabel || this.reason().trim().length >= 3;
  }

  protected confirm(): void {
    this.dialog.close({ reason: this.reason().trim() });
  }
}

/** Asks before something that cannot be taken back. */
@Injectable({ providedIn: 'root' })
export class Confirm {
  private readonly dialogs = inject(MatDialog);

  /** @returns the answer, or null when the person left it */
  async ask(question: Question): Promise<Confirmed | null> {
    const dialog = this.dialogs.open<ConfirmDialog, Question, Confirmed>(ConfirmDialog, {
      data: question,
      maxWidth: '480px',
      restoreFocus: true,
    });
    return (await firstValueFrom(dialog.afterClosed())) ?? null;
  }
}
