import {
  HttpErrorResponse,
  type HttpHandlerFn,
  type HttpInterceptorFn,
  type HttpRequest,
} from '@angular/common/http';
import { inject } from '@angular/core';
import { catchError, from, switchMap, throwError } from 'rxjs';
import { ANONYMOUS } from '../api/api';
import { Session } from './session';

/** Adds the access token; after a 401 exchanges it once and repeats the request. */
export const authInterceptor: HttpInterceptorFn = (request, next) => {
  if (request.context.get(ANONYMOUS) || !request.url.startsWith('/api/')) return next(request);
  const session = inject(Session);
  return from(session.freshToken()).pipe(
    switchMap((token) => next(withToken(request, token))),
    catchError((error: unknown) => {
      if (!(error instanceof HttpErrorResponse) || error.status !== 401) return throwError(() => error);
      return from(session.refresh()).pipe(
        switchMap((signedIn) => (signedIn ? again(request, next, session) : throwError(() => error))),
      );
    }),
  );
};

function again(request: HttpRequest<unknown>, next: HttpHandlerFn, session: Session) {
  return next(withToken(request, session.accessToken()));
}

function withToken(request: HttpRequest<unknown>, token: string | null): HttpRequest<unknown> {
  return token === null ? request : request.clone({ setHeaders: { Authorization: `Bearer ${token}` } });
}
