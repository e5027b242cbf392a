import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { defineRoute } from '#shared/contract/route';

export const auditEntry = z.object({
  id: z.string(),
  at: f.instant,
  who: z.string(),
  studioId: f.id.nullable(),
  action: z.string(),
  thing: z.string(),
  thingId: z.string(),
  from: z.unknown(),
  to: z.unknown(),
  address: z.string(),
});
export type AuditEntry = z.infer<typeof auditEntry>;

export const auditRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/audit',
    scope: 'company',
    permission: 'audit.read',
    title: 'Who changed what, when, from where',
    params: f.none,
    query: z
      .object({
        thingId: z.string().max(64).optional(),
        before: z.string().max(30).optional(),
        limit: z.coerce.number().int().min(1).max(200).default(50),
      })
      .strict(),
    body: f.noBody,
    reply: z.array(auditEntry),
  }),
};
