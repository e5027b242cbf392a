import {
  HttpClient,
  HttpContext,
  HttpContextToken,
  HttpErrorResponse,
  HttpParams,
} from '@angular/common/http';
import { inject, Injectable } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import type { BodyInputOf, ParamsOf, QueryInputOf, ReplyOf, RouteDefinition } from '#shared/contract/route';
import { ApiError, problemOf } from './api-error';

/** Requests that carry no access token and never ask for one. */
export const ANONYMOUS = new HttpContextToken<boolean>(() => false);

type Nothing = Record<never, never>;
type Part<Key extends string, T> = Nothing extends T ? Partial<Record<Key, T>> : Record<Key, T>;
type PathPart<T> = string extends keyof T ? { params?: undefined } : { params: T };

/** What a call of one route takes: its path parameters, query and body, each only if the route has them. */
export type CallInput<R extends RouteDefinition> = PathPart<ParamsOf<R>> &
  Part<'query', QueryInputOf<R>> &
  Part<'body', BodyInputOf<R>> & { anonymous?: boolean };

interface LooseInput {
  params?: Record<string, string>;
  query?: Record<string, string | number | boolean | null | undefined>;
  body?: unknown;
  anonymous?: boolean;
}

/**
 * Calls routes of the contract. Only their types are used, so that no schema is shipped to the browser:
 * `api.call<typeof roomRoutes.list>('GET', '/api/studios/:studioId/rooms', { params: { studioId } })`.
 */
@Injectable({ providedIn: 'root' })
export class Api {
  private readonly http = inject(HttpClient);

  /**
   * Sends one request and answers its reply.
   * @throws ApiError with the sentence to show; see sentenceOf and showFieldErrors
   */
  async call<R extends RouteDefinition>(
    method: R['method'],
    path: R['path'],
    ...[input]: Nothing extends CallInput<R> ? [CallInput<R>?] : [CallInput<R>]
  ): Promise<ReplyOf<R>> {
    const { params, query, body, anonymous } = (input ?? {}) as LooseInput;
    try {
      const reply = await firstValueFrom(
        this.http.request<ReplyOf<R>>(method, filled(path, params ?? {}), {
          body: method === 'GET' ? undefined : body,
          params: queryOf(query ?? {}),
          context: new HttpContext().set(ANONYMOUS, anonymous ?? false),
        }),
      );
      return reply;
    } catch (error) {
      if (error instanceof HttpErrorResponse) throw new ApiError(error.status, problemOf(error.error));
      throw error;
    }
  }
}

/** Path with its parameters filled in. Worked value: ('/api/studios/:studioId', {studioId: 'a b'}) → '/api/studios/a%20b'. */
export function filled(path: string, params: Record<string, string>): string {
  return path.replace(/:([a-zA-Z]+)/g, (_, name: string) => {
    const value = params[name];
    if (value === undefined) throw new TypeError(`The path ${path} needs ${name}.`);
    return encodeURIComponent(value);
  });
}

function queryOf(query: Record<string, string | number | boolean | null | undefined>): HttpParams {
  let params = new HttpParams();
  for (const [name, value] of Object.entries(query)) {
    if (value === undefined || value === null) continue;
    params = params.set(name, String(value));
  }
  return params;
}
