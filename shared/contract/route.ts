import type { z } from 'zod';
import type { Permission } from '#shared/contract/roles';

/** Who may call a route, before its permission is looked at. */
export type RouteScope =
  /** anybody, signed in or not */
  | 'public'
  /** a signed-in person, about themselves or their own studios */
  | 'self'
  /** a signed-in person who has the permission in at least one studio; the answer holds only those studios */
  | 'company'
  /** the path starts with /api/studios/:studioId; a person without a role there gets 404, without the permission 403 */
  | 'studio';

export interface RouteDefinition<
  Params extends z.ZodType = z.ZodType,
  Query extends z.ZodType = z.ZodType,
  Body extends z.ZodType = z.ZodType,
  Reply extends z.ZodType = z.ZodType,
> {
  readonly method: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';
  /** Express path, e.g. /api/studios/:studioId/rooms/:roomId */
  readonly path: string;
  readonly scope: RouteScope;
  /** null only for public and self routes. */
  readonly permission: Permission | null;
  /** One sentence for the API description. */
  readonly title: string;
  readonly params: Params;
  readonly query: Query;
  readonly body: Body;
  readonly reply: Reply;
}

/** Declares a route; gives the literal types of its method, path and schemas to both ends. */
export function defineRoute<
  Params extends z.ZodType,
  Query extends z.ZodType,
  Body extends z.ZodType,
  Reply extends z.ZodType,
  Method extends RouteDefinition['method'],
  Path extends string,
>(
  route: RouteDefinition<Params, Query, Body, Reply> & { readonly method: Method; readonly path: Path },
): RouteDefinition<Params, Query, Body, Reply> & { readonly method: Method; readonly path: Path } {
  return route;
}

export type ParamsOf<R extends RouteDefinition> = z.output<R['params']>;
export type QueryOf<R extends RouteDefinition> = z.output<R['query']>;
export type BodyOf<R extends RouteDefinition> = z.output<R['body']>;
export type ReplyOf<R extends RouteDefinition> = z.output<R['reply']>;
/** What a client writes into query and body (before defaults and coercion). */
export type QueryInputOf<R extends RouteDefinition> = z.input<R['query']>;
export type BodyInputOf<R extends RouteDefinition> = z.input<R['body']>;
