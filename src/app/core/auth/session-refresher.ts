import { HttpClient } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { type Observable, Subject, catchError, defer, finalize, from, map, of, share } from 'rxjs';
import { ApiFailure } from '../http/api-failure';
import { RenewalClock } from './renewal-clock';

/** Renews the access token. Everyone who asks while a renewal runs shares that one renewal. */
@Injectable({ providedIn: 'root' })
export class SessionRefresher {
  private readonly http = inject(HttpClient);
  private readonly clock = inject(RenewalClock);
  private readonly _ended = new Subject<void>();
  private running: Observable<boolean> | null = null;

  /** Fires when the session is over and signing in again is the only way on. */
  readonly ended$ = this._ended.asObservable();

  /** Emits once: whether the session lives on. Network trouble is passed on as the failure it is. */
  refresh(): Observable<boolean> {
    this.running ??= defer(() => from(this.oneTabAtATime(() => this.renew()))).pipe(
      finalize(() => (this.running = null)),
      share(),
    );
    return this.running;
  }

  private renew(): Promise<boolean> {
    return new Promise((resolve, reject) => {
      this.http
        .post('/api/session/refresh', {})
        .pipe(
          map(() => {
            this.clock.mark();
            return true;
          }),
          catchError((failure: unknown) => {
            // A refused renewal ends the session; anything else says nothing about it.
            if (!(failure instanceof ApiFailure) || ![401, 403].includes(failure.status)) {
              throw failure;
            }
            this._ended.next();
            return of(false);
          }),
        )
        .subscribe({ next: resolve, error: reject });
    });
  }

  /**
   * The refresh token may be used once only. Two tabs that wake together would both send it and the
   * server would take that for theft, so tabs queue behind one lock (absent on plain http).
   */
  private async oneTabAtATime(work: () => Promise<boolean>): Promise<boolean> {
    const locks = (navigator as Partial<Navigator>).locks;
    return await (locks ? locks.request('seamwright-session', work) : work());
  }
}
