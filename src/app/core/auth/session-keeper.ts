import { DOCUMENT, Injectable, inject } from '@angular/core';
import { takeUntilDestroyed, toObservable } from '@angular/core/rxjs-interop';
import { EMPTY, catchError, exhaustMap, filter, fromEvent, merge, switchMap, timer } from 'rxjs';
import { RenewalClock } from './renewal-clock';
import { SessionRefresher } from './session-refresher';
import { SessionStore } from './session-store';

/** Access tokens live ten minutes. */
export const renewAfterMs = 8 * 60_000;
const lookEveryMs = 30_000;

/**
 * Renews the session ahead of time while the page is being looked at. Pictures, downloads and event
 * streams are fetched by the browser itself, past our interceptor, so their token must be alive.
 */
@Injectable({ providedIn: 'root' })
export class SessionKeeper {
  private readonly document = inject(DOCUMENT);
  private readonly clock = inject(RenewalClock);
  private readonly refresher = inject(SessionRefresher);

  constructor() {
    toObservable(inject(SessionStore).isSignedIn)
      .pipe(
        switchMap((isSignedIn) => (isSignedIn ? this.dueMoments() : EMPTY)),
        // Network trouble: the next look tries again; a refused renewal reports itself.
        exhaustMap(() => this.refresher.refresh().pipe(catchError(() => EMPTY))),
        takeUntilDestroyed(),
      )
      .subscribe();
  }

  private dueMoments() {
    return merge(timer(0, lookEveryMs), fromEvent(this.document, 'visibilitychange')).pipe(
      filter(() => !this.document.hidden && Date.now() - this.clock.renewedAtMs() >= renewAfterMs),
    );
  }
}
