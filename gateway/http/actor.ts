import type { Holdings, Role } from '#shared/contract/roles';

/** A signed-in person with what they hold now, read from the database for every request. */
export interface SignedInPerson extends Holdings {
  readonly id: string;
  readonly name: string;
  readonly email: string;
  readonly sessionId: string;
}

/** Who does something and from where; goes into the audit line. */
export interface Actor {
  readonly personId: string;
  readonly name: string;
  /** Role in the studio concerned; null for company-wide or own matters. */
  readonly role: Role | null;
  readonly address: string;
}
