import type { HttpHandlerFn, HttpInterceptorFn, HttpRequest } from '@angular/common/http';
import { HttpErrorResponse } from '@angular/common/http';
import { inject } from '@angular/core';
import { catchError, switchMap, throwError } from 'rxjs';
import { Session } from '../account/session';

/** Addresses that make or end a session: they carry no token and a 401 of theirs means what it says. */
const SESSION = /^\/api\/(session(\/refresh)?|workspace|password-reset(\/check)?)$/;

/**
 * Adds the access token. When the server calls it too old, all requests that were refused share one refresh and are sent again
 * once.
 */
export const sessionInterceptor: HttpInterceptorFn = (request, next) => {
  if (!request.url.startsWith('/api/') || SESSION.test(request.url)) return next(request);
  const session = inject(Session);
  const used = session.token();
  return sendWith(used, request, next).pipe(
    catchError((error: unknown) => {
      if (!(error instanceof HttpErrorResponse) || error.status !== 401) return throwError(() => error);
      // Another request may have refreshed meanwhile.
      const newer = session.token();
      if (newer !== null && newer !== used) return sendWith(newer, request, next);
      return session.refresh().pipe(
        catchError(() => {
          session.expire();
          return throwError(() => error);
        }),
        switchMap((token) => sendWith(token, request, next)),
      );
    }),
  );
};

function sendWith(token: string | null, request: HttpRequest<unknown>, next: HttpHandlerFn) {
  return next(token === null ? request : request.clone({ setHeaders: { Authorization: `Bearer ${token}` } }));
}
