import { HttpXsrfTokenExtractor } from '@angular/common/http';
import { Injectable, computed, inject, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { Router } from '@angular/router';
import { may, roleNames, type Action } from '../../../../shared/api/roles.js';
import {
  type SessionResponse,
  type SignInRequest,
} from '../../../../shared/api/session.contract.js';
import { ApiFailure } from '../http/api-failure';
import { RenewalClock } from './renewal-clock';
import { SessionApi } from './session-api';
import { SessionRefresher } from './session-refresher';

/** Who is signed in. What a role may do is only hinted at here; the server decides. */
@Injectable({ providedIn: 'root' })
export class SessionStore {
  private readonly api = inject(SessionApi);
  private readonly router = inject(Router);
  private readonly clock = inject(RenewalClock);
  private readonly tokens = inject(HttpXsrfTokenExtractor);
  private readonly _session = signal<SessionResponse | null>(null);
  private restoring: Promise<void> | null = null;

  readonly session = this._session.asReadonly();
  readonly isSignedIn = computed(() => this.session() !== null);
  readonly roleName = computed(() => {
    const session = this.session();
    return session ? roleNames[session.role] : '';
  });

  constructor() {
    inject(SessionRefresher)
      .ended$.pipe(takeUntilDestroyed())
      .subscribe(() => void this.expire());
  }

  /** Whether the signed-in role may do an action, for showing and hiding buttons. */
  can(action: Action): boolean {
    const session = this.session();
    return session !== null && may(session.role, action);
  }

  /** Asks the server once who is signed in; later calls wait for the same answer. */
  restore(): Promise<void> {
    this.restoring ??= this.askServer();
    return this.restoring;
  }

  async signIn(request: SignInRequest): Promise<void> {
    this._session.set(await this.api.signIn(request));
    this.clock.mark();
    this.restoring = Promise.resolve();
  }

  async signOut(): Promise<void> {
    await this.api.signOut();
    this._session.set(null);
    await this.router.navigateByUrl('/sign-in');
  }

  /** The session ended on its own: back to the door, remembering where the person was. */
  private async expire(): Promise<void> {
    if (!this.isSignedIn()) return;
    this._session.set(null);
    const next = this.router.url;
    await this.router.navigate(['/sign-in'], { queryParams: { next, ended: true } });
  }

  private async askServer(): Promise<void> {
    // The readable cookie lives as long as the session; without it there is nothing to ask for.
    if (this.tokens.getToken() === null) return;
    try {
      this._session.set(await this.api.current());
    } catch (failure) {
      // Expected: nobody is signed in. Without the server the answer is open, so ask again next time.
      const isSignedOut = failure instanceof ApiFailure && failure.status === 401;
      if (!isSignedOut) this.restoring = null;
      if (!isSignedOut) throw failure;
    }
  }
}
