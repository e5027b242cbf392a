import type { CookieOptions, Express, NextFunction, Request, Response } from 'express';
import type { z } from 'zod';
import { may, mayAnywhere, roleIn, type Role } from '#shared/contract/roles';
import type { BodyOf, ParamsOf, QueryOf, ReplyOf, RouteDefinition } from '#shared/contract/route';
import type { Actor, SignedInPerson } from './actor.js';
import { ProblemError } from './problem-error.js';

/** What a handler gets: parsed input and who asks; permission has been checked. */
export interface Call<R extends RouteDefinition> {
  readonly params: ParamsOf<R>;
  readonly query: QueryOf<R>;
  readonly body: BodyOf<R>;
  /** The signed-in person. @throws ProblemError sign-in-needed on public routes, which look at no token */
  readonly person: () => SignedInPerson;
  /** The person as actor, with the role in the path's studio. */
  readonly actor: () => Actor;
  readonly address: string;
  readonly userAgent: string;
  readonly cookies: {
    read(name: string): string | null;
    set(name: string, value: string, options: CookieOptions): void;
    clear(name: string, options: CookieOptions): void;
  };
}

export type Handler<R extends RouteDefinition> = (call: Call<R>) => Promise<ReplyOf<R>>;

/** A route of the contract together with what answers it. */
export interface Mounted {
  readonly route: RouteDefinition;
  readonly handler: Handler<RouteDefinition>;
}

/** Joins a route with its handler, keeping the types of both. */
export function mount<R extends RouteDefinition>(route: R, handler: Handler<R>): Mounted {
  return { route, handler };
}

/** Finds out who sends a request from its bearer token; null without a token. @throws ProblemError for a bad one */
export type Authenticate = (bearer: string | null) => Promise<SignedInPerson | null>;

/** What the door asks before a route is answered. */
export interface Door {
  readonly authenticate: Authenticate;
  /** An owner has a role in every studio there is, but not in one that was made up. */
  readonly studioExists: (studioId: string) => Promise<boolean>;
}

/** Puts every mounted route on the app: sign-in, role and input are checked here and nowhere else. */
export function mountAll(app: Express, mounted: readonly Mounted[], door: Door): void {
  for (const { route, handler } of mounted) {
    const method = route.method.toLowerCase() as 'get' | 'post' | 'put' | 'patch' | 'delete';
    app[method](route.path, async (request: Request, response: Response, _next: NextFunction) => {
      // A token that has run out must not stand in the way of signing in again.
      const person = route.scope === 'public' ? null : await door.authenticate(bearerOf(request));
      if (person) response.locals['personId'] = person.id;
      const role = await checkAccess(route, person, request.params['studioId'] as string | undefined, door);
      const call: Call<RouteDefinition> = {
        params: parse(route.params, request.params, 'path'),
        query: parse(route.query, request.query, 'query'),
        body: parse(route.body, request.body as unknown, 'body'),
        person: () => signedIn(person),
        actor: () => {
          const { id, name } = signedIn(person);
          return { personId: id, name, role, address: addressOf(request) };
        },
        address: addressOf(request),
        userAgent: (request.get('user-agent') ?? '').slice(0, 300),
        cookies: {
          read: (name) => readCookie(request.get('cookie') ?? '', name),
          set: (name, value, options) => response.cookie(name, value, options),
          clear: (name, options) => response.clearCookie(name, options),
        },
      };
      const reply = await handler(call);
      response.set('Cache-Control', 'no-store');
      if (reply === null || reply === undefined) response.status(204).end();
      else response.json(reply);
    });
  }
}

/** Role in the path's studio, after checking that the person may call the route. */
async function checkAccess(
  route: RouteDefinition,
  person: SignedInPerson | null,
  studioId: string | undefined,
  door: Door,
): Promise<Role | null> {
  if (route.scope === 'public') return null;
  const known = signedIn(person);
  if (route.scope === 'self') return null;
  if (route.permission === null) throw new Error(`${route.method} ${route.path} names no permission`);
  if (route.scope === 'company') {
    if (!mayAnywhere(known, route.permission)) throw forbidden();
    return known.owner ? 'owner' : null;
  }
  const role = studioId === undefined ? null : roleIn(known, studioId);
  if (role === null || studioId === undefined || (known.owner && !(await door.studioExists(studioId))))
    throw new ProblemError('not-found', 'This studio does not exist, or you have no role in it.');
  if (!may(role, route.permission)) throw forbidden();
  return role;
}

function signedIn(person: SignedInPerson | null): SignedInPerson {
  if (person === null) throw new ProblemError('sign-in-needed', 'Sign in first.');
  return person;
}

function forbidden(): ProblemError {
  return new ProblemError('forbidden', 'Your role does not allow this. Ask a lead or the owner.');
}

function parse(schema: z.ZodType, value: unknown, where: string): unknown {
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const fields = parsed.error.issues.map((issue) => ({
    path: issue.path.join('.') || where,
    message: issue.message,
  }));
  throw new ProblemError(
    'bad-input',
    fields.map((field) => `${field.path}: ${field.message}`).join(' '),
    fields,
  );
}

/** The bearer token of a request. */
export function bearerOf(request: Request): string | null {
  const [scheme, token] = (request.get('authorization') ?? '').split(' ');
  return scheme?.toLowerCase() === 'bearer' && token ? token : null;
}

function addressOf(request: Request): string {
  return (request.ip ?? '').slice(0, 60);
}

function readCookie(header: string, name: string): string | null {
  for (const pair of header.split(';')) {
    const [key, ...value] = pair.trim().split('=');
    if (key === name) return decodeURIComponent(value.join('='));
  }
  return null;
}
