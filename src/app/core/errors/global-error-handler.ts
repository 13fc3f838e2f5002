import { type ErrorHandler, Injectable, inject } from '@angular/core';
import { ApiFailure } from '../http/api-failure';
import { FailureNotes } from './failure-notes';

/** The last stop of errors nobody expected: one plain sentence for the person, the rest for us. */
@Injectable()
export class GlobalErrorHandler implements ErrorHandler {
  private readonly notes = inject(FailureNotes);

  handleError(error: unknown): void {
    const cause = rejectionOf(error);
    this.notes.show(cause);
    // A failure the server put into words is no defect of the page.
    // eslint-disable-next-line no-console -- the browser's console is where a developer looks
    if (!(cause instanceof ApiFailure)) console.error(error);
  }
}

/** A rejected promise arrives wrapped. */
function rejectionOf(error: unknown): unknown {
  return error && typeof error === 'object' && 'rejection' in error ? error.rejection : error;
}
