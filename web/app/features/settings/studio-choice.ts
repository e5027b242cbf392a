import { computed, inject, Injectable, signal } from '@angular/core';
import type { Permission } from '#shared/contract/roles';
import { LiveStore } from '../../core/live/live-store';
import { Session } from '../../core/session/session';

/** Which studio the settings are about; kept while one goes from page to page. */
@Injectable({ providedIn: 'root' })
export class StudioChoice {
  private readonly live = inject(LiveStore);
  private readonly session = inject(Session);
  private readonly chosen = signal<string | null>(null);

  /** Own studios in which the person has a permission. */
  studiosWith(permission: Permission) {
    return this.live
      .studios()
      .map((studio) => studio.studio())
      .filter(({ id }) => this.session.may(permission, id));
  }

  /** The chosen studio, or the first with the permission; null while none is known. */
  with(permission: Permission) {
    return computed(() => {
      const studios = this.studiosWith(permission);
      return studios.find(({ id }) => id === this.chosen()) ?? studios[0] ?? null;
    });
  }

  choose(studioId: string): void {
    this.chosen.set(studioId);
  }
}
