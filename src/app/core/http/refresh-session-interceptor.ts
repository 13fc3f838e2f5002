import { HttpXsrfTokenExtractor, type HttpInterceptorFn } from '@angular/common/http';
import { inject } from '@angular/core';
import { catchError, switchMap, throwError } from 'rxjs';
import { SessionRefresher } from '../auth/session-refresher';
import { ApiFailure } from './api-failure';

/** The session's own end points must not try to mend themselves. */
const doors = [
  { method: 'POST', url: '/api/session' },
  { method: 'DELETE', url: '/api/session' },
  { method: 'POST', url: '/api/session/refresh' },
];

/**
 * When the short access token has run out: renews the session once and repeats the request once.
 * When it cannot be renewed, the first failure stands and the refresher ends the session.
 */
export const refreshSession: HttpInterceptorFn = (request, next) => {
  const refresher = inject(SessionRefresher);
  const tokens = inject(HttpXsrfTokenExtractor);
  if (doors.some((door) => door.method === request.method && door.url === request.url)) {
    return next(request);
  }
  return next(request).pipe(
    catchError((failure: unknown) => {
      if (!(failure instanceof ApiFailure) || failure.code !== 'session.required') {
        return throwError(() => failure);
      }
      return refresher.refresh().pipe(
        switchMap((renewed) => {
          if (!renewed) return throwError(() => failure);
          // The renewal may have changed the forgery token that the first try carried.
          const token = request.headers.has('X-XSRF-TOKEN') ? tokens.getToken() : null;
          return next(token ? request.clone({ setHeaders: { 'X-XSRF-TOKEN': token } }) : request);
        }),
      );
    }),
  );
};
