import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatMenu, MatMenuItem, MatMenuTrigger } from '@angular/material/menu';
import { RouterLink } from '@angular/router';
import { Face, type FaceChoice } from '../core/face/face';
import { LiveStore } from '../core/live/live-store';
import { Session } from '../core/session/session';
import { type UnitChoice, Units } from '../core/units/units';
import { Icon } from '../ui/icon';

/** Who is signed in; unit, face, account and sign-out. */
@Component({
  selector: 'sr-account-menu',
  imports: [Icon, MatButton, MatMenu, MatMenuItem, MatMenuTrigger, RouterLink],
  templateUrl: './account-menu.html',
  styleUrl: './account-menu.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AccountMenu {
  protected readonly session = inject(Session);
  protected readonly units = inject(Units);
  protected readonly face = inject(Face);
  private readonly live = inject(LiveStore);

  protected readonly unitChoices: readonly { readonly choice: UnitChoice; readonly label: string }[] = [
    { choice: null, label: "Each studio's own unit" },
    { choice: 'C', label: 'Degrees Celsius' },
    { choice: 'F', label: 'Degrees Fahrenheit' },
  ];
  protected readonly faceChoices: readonly { readonly choice: FaceChoice; readonly label: string }[] = [
    { choice: 'system', label: 'As this device' },
    { choice: 'day', label: 'Day' },
    { choice: 'night', label: 'Night' },
  ];

  /** "owner", "lead", or the role studio by studio when they differ. */
  protected readonly roles = computed(() => {
    const me = this.session.me();
    if (!me) return '';
    if (me.owner) return 'owner';
    const held = [...new Set(me.memberships.map((membership) => membership.role))];
    if (held.length === 1) return held[0] ?? '';
    const names = new Map(this.live.studios().map((studio) => [studio.id, studio.studio().name]));
    return me.memberships
      .map(({ studioId, role }) => `${role} in ${names.get(studioId) ?? 'a studio'}`)
      .join(', ');
  });

  protected async signOut(): Promise<void> {
    // The session is forgotten here even when the gateway cannot be told.
    await this.session.signOut().catch(() => undefined);
  }
}
