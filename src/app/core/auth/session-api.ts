import { HttpClient } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import {
  demoAccountsResponse,
  sessionResponse,
  type DemoAccountsResponse,
  type SessionResponse,
  type SignInRequest,
} from '../../../../shared/api/session.contract.js';
import { parseAnswer } from '../http/parse-answer';

/** The session's end points. */
@Injectable({ providedIn: 'root' })
export class SessionApi {
  private readonly http = inject(HttpClient);

  current(): Promise<SessionResponse> {
    return firstValueFrom(this.http.get('/api/session').pipe(parseAnswer(sessionResponse)));
  }

  signIn(request: SignInRequest): Promise<SessionResponse> {
    return firstValueFrom(
      this.http.post('/api/session', request).pipe(parseAnswer(sessionResponse)),
    );
  }

  async signOut(): Promise<void> {
    await firstValueFrom(this.http.delete('/api/session'));
  }

  demoAccounts(): Promise<DemoAccountsResponse> {
    return firstValueFrom(
      this.http.get('/api/session/demo-accounts').pipe(parseAnswer(demoAccountsResponse)),
    );
  }
}
