import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { STUDIO_ROLES } from '#shared/contract/roles';
import { defineRoute } from '#shared/contract/route';

const membership = z.object({ studioId: f.id, role: z.enum(STUDIO_ROLES) }).strict();

export const person = z.object({
  id: f.id,
  name: z.string(),
  email: z.string(),
  owner: z.boolean(),
  memberships: z.array(membership),
  state: z.enum(['active', 'invited', 'disabled']),
  lastSeenAt: f.instant.nullable(),
  version: f.version,
});
export type Person = z.infer<typeof person>;

const personParams = z.object({ personId: f.id }).strict();

export const peopleRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/people',
    scope: 'company',
    permission: 'people.read',
    title: 'People of the own studios; an owner sees all',
    params: f.none,
    query: f.none,
    body: f.noBody,
    reply: z.array(person),
  }),
  invite: defineRoute({
    method: 'POST',
    path: '/api/people/invitations',
    scope: 'company',
    permission: 'people.invite',
    title: 'Invite somebody by e-mail; a lead may invite makers and viewers to their own studios only',
    params: f.none,
    query: f.none,
    body: z
      .object({ email: f.email, owner: z.boolean().default(false), memberships: z.array(membership).max(50) })
      .strict(),
    reply: person,
  }),
  change: defineRoute({
    method: 'PATCH',
    path: '/api/people/:personId',
    scope: 'company',
    permission: 'people.write',
    title: 'Change roles, or disable; ends the sessions of that person at once',
    params: personParams,
    query: f.none,
    body: z
      .object({
        version: f.version,
        owner: z.boolean().optional(),
        memberships: z.array(membership).max(50).optional(),
        disabled: z.boolean().optional(),
      })
      .strict(),
    reply: person,
  }),
};
