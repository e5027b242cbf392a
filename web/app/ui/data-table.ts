import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/**
 * Scaffold of a data table: it scrolls inside itself, can be reached by keyboard and has a name. The table goes into
 * its content with class `sr-table`; figures get class `num`.
 */
@Component({
  selector: 'sr-data-table',
  template: `<div class="sr-scroll" role="region" tabindex="0" [attr.aria-label]="label()">
    <ng-content />
  </div>`,
  styles: `
    :host {
      display: block;
      min-inline-size: 0;
    }
    .sr-scroll {
      position: relative;
      inline-size: 0;
      min-inline-size: 100%;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class DataTable {
  /** Names the table for screen readers. */
  readonly label = input.required<string>();
}
