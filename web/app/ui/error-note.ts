import { ChangeDetectionStrategy, Component, input, output } from '@angular/core';
import { StatusMark } from './status-mark';

/** Says what went wrong and offers to try again. */
@Component({
  selector: 'sr-error-note',
  imports: [StatusMark],
  template: `<p role="alert"><sr-status-mark status="heat" /> {{ text() }}</p>
    @if (retryable()) {
      <button class="sr-text-button" type="button" (click)="retry.emit()">Try again</button>
    }`,
  styles: `
    :host {
      display: flex;
      flex-wrap: wrap;
      gap: 12px;
      align-items: center;
      padding: 12px 14px;
      background: var(--mat-sys-error-container);
      color: var(--mat-sys-on-error-container);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ErrorNote {
  readonly text = input.required<string>();
  readonly retryable = input(true);
  readonly retry = output();
}
