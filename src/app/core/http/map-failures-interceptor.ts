import { type HttpInterceptorFn } from '@angular/common/http';
import { catchError, throwError } from 'rxjs';
import { toApiFailure } from './api-failure';

/** Callers only ever see an ApiFailure. */
export const mapFailures: HttpInterceptorFn = (request, next) =>
  next(request).pipe(catchError((error: unknown) => throwError(() => toApiFailure(error))));
