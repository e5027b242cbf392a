import { inject } from '@angular/core';
import { type CanActivateFn, RedirectCommand, Router } from '@angular/router';
import type { Permission } from '#shared/contract/roles';
import { Session } from './session';

/** Lets signed-in people pass; others sign in first and come back to where they wanted to go. */
export const signedInGuard: CanActivateFn = (_route, state) => {
  if (inject(Session).signedIn()) return true;
  const queryParams = state.url === '/' ? {} : { next: state.url };
  return new RedirectCommand(inject(Router).createUrlTree(['/sign-in'], { queryParams }));
};

/** Lets people pass who have a permission in at least one studio; others land on Rooms. */
export function mayAnywhereGuard(permission: Permission): CanActivateFn {
  return () =>
    inject(Session).mayAnywhere(permission) || new RedirectCommand(inject(Router).createUrlTree(['/']));
}
