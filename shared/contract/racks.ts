import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { roomParams } from '#shared/contract/rooms';
import { defineRoute } from '#shared/contract/route';

export const shelf = z.object({
  id: f.id,
  /** 1 is the top shelf. */
  position: z.number().int(),
  /** Vessels of 75 mm that fit. */
  capacity: z.number().int(),
});
export const rack = z.object({
  id: f.id,
  roomId: f.id,
  name: z.string(),
  position: z.number().int(),
  shelves: z.array(shelf),
  version: f.version,
});
export type Rack = z.infer<typeof rack>;

const rackFields = z
  .object({
    name: f.name,
    position: z.number().int().min(0).max(999).default(0),
    /** Capacity of each shelf from the top; a shelf that holds a batch cannot be taken away. */
    shelves: z
      .array(
        z
          .object({
            id: f.id.optional(),
            capacity: z.number().int().min(1, 'A shelf holds at least one vessel.').max(5000),
          })
          .strict(),
      )
      .min(1, 'A rack has at least one shelf.')
      .max(12),
  })
  .strict();
const rackParams = z.object({ studioId: f.id, rackId: f.id }).strict();

export const rackRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/studios/:studioId/racks',
    scope: 'studio',
    permission: 'rooms.read',
    title: 'Racks of a studio with their shelves',
    params: f.studioParams,
    query: f.none,
    body: f.noBody,
    reply: z.array(rack),
  }),
  create: defineRoute({
    method: 'POST',
    path: '/api/studios/:studioId/rooms/:roomId/racks',
    scope: 'studio',
    permission: 'racks.write',
    title: 'Add a rack',
    params: roomParams,
    query: f.none,
    body: rackFields,
    reply: rack,
  }),
  change: defineRoute({
    method: 'PUT',
    path: '/api/studios/:studioId/racks/:rackId',
    scope: 'studio',
    permission: 'racks.write',
    title: 'Change a rack and its shelves',
    params: rackParams,
    query: f.none,
    body: rackFields.extend({ version: f.version }),
    reply: rack,
  }),
  remove: defineRoute({
    method: 'DELETE',
    path: '/api/studios/:studioId/racks/:rackId',
    scope: 'studio',
    permission: 'racks.write',
    title: 'Remove a rack that never held a batch',
    params: rackParams,
    query: f.none,
    body: f.noBody,
    reply: f.nothing,
  }),
};
