import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/** Top of a page: its heading, a quiet line beside it, and actions below on a phone. Leaves room for the shell's tools. */
@Component({
  selector: 'sr-page-header',
  template: `<header>
    <h1 tabindex="-1">{{ heading() }}</h1>
    @if (note()) {
      <p class="sr-muted">{{ note() }}</p>
    }
    <ng-content />
  </header>`,
  styles: `
    header {
      display: flex;
      flex-wrap: wrap;
      gap: 4px 18px;
      align-items: center;
      min-block-size: 46px;
      padding: 0 var(--sr-tools-room, 0) 10px 0;
      margin-block-end: 14px;
      border-block-end: 1px solid var(--mat-sys-outline-variant);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PageHeader {
  readonly heading = input.required<string>();
  readonly note = input('');
}
