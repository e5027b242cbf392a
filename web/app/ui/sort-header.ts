import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import { Icon } from './icon';

export interface Sorting<Key extends string = string> {
  readonly by: Key;
  readonly direction: 'ascending' | 'descending';
}

/** A column head that sorts: `<th srSortHeader="code" [sorting]="sorting()" (sorted)="sorting.set($event)">Code</th>`. */
@Component({
  // A table head must stay a th element.
  // eslint-disable-next-line @angular-eslint/component-selector
  selector: 'th[srSortHeader]',
  imports: [Icon],
  template: `<button type="button" (click)="turn()">
    <ng-content />
    @if (direction(); as way) {
      <sr-icon [name]="way === 'ascending' ? 'sort-up' : 'sort-down'" />
    }
  </button>`,
  styles: `
    button {
      all: unset;
      cursor: pointer;
      display: inline-flex;
      gap: 2px;
      align-items: center;
      min-block-size: 24px;
    }
    button:focus-visible {
      outline: 3px solid var(--sr-copper);
      outline-offset: 2px;
    }
  `,
  host: { scope: 'col', '[attr.aria-sort]': 'direction() ?? "none"' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SortHeader<Key extends string = string> {
  readonly srSortHeader = input.required<Key>();
  readonly sorting = input.required<Sorting<Key>>();
  readonly sorted = output<Sorting<Key>>();

  protected readonly direction = computed(() =>
    this.sorting().by === this.srSortHeader() ? this.sorting().direction : null,
  );

  protected turn(): void {
    const direction = this.direction() === 'ascending' ? 'descending' : 'ascending';
    this.sorted.emit({ by: this.srSortHeader(), direction });
  }
}
