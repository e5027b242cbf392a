import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/** Says that there is nothing, and what to do next; links go into its content. */
@Component({
  selector: 'sr-empty-note',
  template: `<p>
      <b>{{ title() }}</b> {{ text() }}
    </p>
    <ng-content />`,
  styles: `
    :host {
      display: grid;
      gap: 10px;
      padding: 18px 0;
      color: var(--mat-sys-on-surface-variant);
    }
    b {
      color: var(--mat-sys-on-surface);
      font-weight: 600;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class EmptyNote {
  readonly title = input.required<string>();
  readonly text = input('');
}
