import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import { RouterLink, RouterLinkActive, RouterOutlet } from '@angular/router';
import type { Permission } from '#shared/contract/roles';
import { Session } from '../../core/session/session';
import { PageHeader } from '../../ui/page-header';

const PAGES: readonly {
  readonly path: string;
  readonly label: string;
  readonly permission: Permission | null;
}[] = [
  { path: 'account', label: 'Account', permission: null },
  { path: 'studios', label: 'Studios', permission: 'studios.write' },
  { path: 'rooms', label: 'Rooms', permission: 'rooms.write' },
  { path: 'racks', label: 'Racks', permission: 'racks.write' },
  { path: 'sensors', label: 'Sensors', permission: 'sensors.read' },
  { path: 'people', label: 'People', permission: 'people.read' },
  { path: 'audit', label: 'Audit trail', permission: 'audit.read' },
];

/** Frame of the settings: one page for each kind of thing, as far as the role reaches. */
@Component({
  selector: 'sr-settings-page',
  imports: [PageHeader, RouterLink, RouterLinkActive, RouterOutlet],
  template: `<sr-page-header heading="Settings" />
    <nav aria-label="Settings">
      @for (page of pages(); track page.path) {
        <a
          [routerLink]="page.path"
          routerLinkActive="here"
          #active="routerLinkActive"
          [attr.aria-current]="active.isActive ? 'page' : null"
          >{{ page.label }}</a
        >
      }
    </nav>
    <router-outlet />`,
  styles: `
    nav {
      display: flex;
      flex-wrap: wrap;
      gap: 8px;
      margin-block-end: 18px;
    }
    a {
      display: inline-flex;
      align-items: center;
      min-block-size: 40px;
      padding: 0 14px;
      border: 1px solid var(--mat-sys-outline-variant);
      background: var(--mat-sys-surface);
      color: var(--mat-sys-on-surface);
      text-decoration: none;
    }
    .here {
      border-color: var(--mat-sys-on-surface);
      font-weight: 600;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SettingsPage {
  private readonly session = inject(Session);
  protected readonly pages = computed(() =>
    PAGES.filter(({ permission }) => permission === null || this.session.mayAnywhere(permission)),
  );
}
