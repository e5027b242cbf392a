import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { MatMenu, MatMenuItem, MatMenuTrigger } from '@angular/material/menu';
import { RouterLink } from '@angular/router';
import { Icon } from '../ui/icon';
import type { NavigationItem } from './navigation';

/** On the phone's bar: the pages that have no room of their own there. */
@Component({
  selector: 'sr-more-menu',
  imports: [Icon, MatMenu, MatMenuItem, MatMenuTrigger, RouterLink],
  template: `<button type="button" [matMenuTriggerFor]="more" [class.on]="current()">
      <sr-icon name="more" />
      <span>More</span>
    </button>
    <mat-menu #more="matMenu" yPosition="above" xPosition="before">
      @for (item of items(); track item.path) {
        <a mat-menu-item [routerLink]="item.path" [attr.aria-current]="item.current ? 'page' : null">{{
          item.label
        }}</a>
      }
    </mat-menu>`,
  styleUrl: './bar-button.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MoreMenu {
  readonly items = input.required<readonly (NavigationItem & { readonly current: boolean })[]>();
  protected readonly current = computed(() => this.items().some((item) => item.current));
}
