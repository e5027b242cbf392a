import { FULL_FRAME_PERMISSIONS, LIVE_PERMISSIONS } from '#shared/contract/live';
import { type Holdings, may, roleIn } from '#shared/contract/roles';

/** Who gets a frame: staff see alerts and recipes, viewers do not. Each audience counts its frames by itself. */
export type Audience = 'staff' | 'viewers';

export const AUDIENCES: readonly Audience[] = ['staff', 'viewers'];

/** Which frames of a studio a person may see; null: none. */
export function audienceOf(person: Holdings, studioId: string): Audience | null {
  const role = roleIn(person, studioId);
  if (FULL_FRAME_PERMISSIONS.every((permission) => may(role, permission))) return 'staff';
  return may(role, LIVE_PERMISSIONS.frame) ? 'viewers' : null;
}

/** Name of the server's group of connections. */
export function ofStudio(studioId: string, audience: Audience): string {
  return `studio ${studioId} ${audience}`;
}

/** Name of the server's group of connections. */
export function ofPerson(personId: string): string {
  return `person ${personId}`;
}
