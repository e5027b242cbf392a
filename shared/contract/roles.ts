/** Roles and the permission table. One table serves routes, sockets, files and the web's guards alike. */

export const ROLES = ['owner', 'lead', 'maker', 'viewer'] as const;

/** Owner holds for every studio; the other three are held per studio. */
export type Role = (typeof ROLES)[number];

/** Roles that are held in one studio. */
export const STUDIO_ROLES = ['lead', 'maker', 'viewer'] as const;
export type StudioRole = (typeof STUDIO_ROLES)[number];

/**
 * What each permission allows and which roles have it. A route or socket event names exactly one permission;
 * studio permissions are checked against the role held in the studio named by the path.
 */
export const PERMISSIONS = {
  'readiness.read': ['owner', 'lead', 'maker', 'viewer'],
  'rooms.read': ['owner', 'lead', 'maker', 'viewer'],
  'rooms.write': ['owner', 'lead'],
  'racks.write': ['owner', 'lead'],
  'sensors.read': ['owner', 'lead', 'maker'],
  'sensors.write': ['owner', 'lead'],
  'quarantine.read': ['owner', 'lead'],
  'batches.read': ['owner', 'lead', 'maker', 'viewer'],
  'batches.recipe': ['owner', 'lead', 'maker'],
  'batches.pour': ['owner', 'lead', 'maker'],
  'batches.move': ['owner', 'lead', 'maker'],
  'batches.release': ['owner', 'lead'],
  'tests.sign': ['owner', 'lead'],
  'materials.read': ['owner', 'lead', 'maker'],
  'materials.write': ['owner', 'lead'],
  'alerts.read': ['owner', 'lead', 'maker'],
  'alerts.acknowledge': ['owner', 'lead', 'maker'],
  'alerts.shelve': ['owner', 'lead'],
  'rules.read': ['owner', 'lead', 'maker'],
  'rules.write': ['owner', 'lead'],
  'compare.read': ['owner', 'lead'],
  'people.read': ['owner', 'lead'],
  'people.write': ['owner'],
  'people.invite': ['owner', 'lead'],
  'studios.create': ['owner'],
  'studios.write': ['owner', 'lead'],
  'audit.read': ['owner'],
} as const satisfies Record<string, readonly Role[]>;

export type Permission = keyof typeof PERMISSIONS;

/** Whether a role has a permission. No role (a person without membership) has none. */
export function may(role: Role | null, permission: Permission): boolean {
  return role !== null && (PERMISSIONS[permission] as readonly Role[]).includes(role);
}

/** What a signed-in person holds: owner of everything, or roles studio by studio. */
export interface Holdings {
  readonly owner: boolean;
  readonly memberships: readonly { readonly studioId: string; readonly role: StudioRole }[];
}

/** The role a person holds in one studio, or null if none. */
export function roleIn(holdings: Holdings, studioId: string): Role | null {
  if (holdings.owner) return 'owner';
  return holdings.memberships.find((membership) => membership.studioId === studioId)?.role ?? null;
}

/** Whether a person has a permission in at least one studio (for company-wide pages). */
export function mayAnywhere(holdings: Holdings, permission: Permission): boolean {
  if (holdings.owner) return may('owner', permission);
  return holdings.memberships.some((membership) => may(membership.role, permission));
}
