import { HttpXsrfTokenExtractor } from '@angular/common/http';
import { TestBed } from '@angular/core/testing';
import { Router, provideRouter } from '@angular/router';
import { Subject } from 'rxjs';
import { type SessionResponse } from '../../../../shared/api/session.contract.js';
import { ApiFailure } from '../http/api-failure';
import { SessionApi } from './session-api';
import { SessionRefresher } from './session-refresher';
import { SessionStore } from './session-store';

const designer: SessionResponse = {
  user: { id: 'u'.repeat(20), name: 'Ada Larch', email: 'ada@demo.invalid', isDemo: true },
  workshop: { id: 'w'.repeat(20), name: 'Lantern Lane Props', isDemo: true },
  role: 'designer',
};

function setUp(api: Partial<SessionApi>, token: string | null = 'token') {
  const ended$ = new Subject<void>();
  TestBed.configureTestingModule({
    providers: [
      provideRouter([{ path: '**', children: [] }]),
      { provide: SessionApi, useValue: api },
      { provide: SessionRefresher, useValue: { ended$ } },
      { provide: HttpXsrfTokenExtractor, useValue: { getToken: () => token } },
    ],
  });
  return { store: TestBed.inject(SessionStore), router: TestBed.inject(Router), ended$ };
}

describe('SessionStore', () => {
  it('restores the session and hints at what the role may do', async () => {
    const { store } = setUp({ current: () => Promise.resolve(designer) });
    expect(store.can('model.read')).toBe(false);
    await store.restore();
    expect(store.isSignedIn()).toBe(true);
    expect(store.roleName()).toBe('Designer');
    expect(store.can('plan.write')).toBe(true);
    expect(store.can('envelope.write')).toBe(false);
  });

  it('asks the server once however often it is restored', async () => {
    const current = vi.fn(() => Promise.resolve(designer));
    const { store } = setUp({ current });
    await Promise.all([store.restore(), store.restore()]);
    await store.restore();
    expect(current).toHaveBeenCalledTimes(1);
  });

  it('does not ask the server when no session was ever begun here', async () => {
    const current = vi.fn(() => Promise.resolve(designer));
    const { store } = setUp({ current }, null);
    await store.restore();
    expect(current).not.toHaveBeenCalled();
    expect(store.isSignedIn()).toBe(false);
  });

  it('takes a refusal for signed out, and silence of the server for no answer', async () => {
    const refusal = new ApiFailure('session.required', 'Please sign in.', 401);
    const silence = new ApiFailure('network.unreachable', 'Unreachable.', 0);
    const answers = [Promise.reject(silence), Promise.reject(refusal)];
    const { store } = setUp({ current: () => answers.shift() as Promise<never> });
    await expect(store.restore()).rejects.toBe(silence);
    await store.restore();
    expect(store.isSignedIn()).toBe(false);
  });

  it('remembers the page when the session ends on its own', async () => {
    const { store, router, ended$ } = setUp({ signIn: () => Promise.resolve(designer) });
    await store.signIn({ email: 'ada@demo.invalid', password: 'x' });
    await router.navigateByUrl('/plans/abc');
    ended$.next();
    await vi.waitFor(() => expect(router.url).toContain('/sign-in'));
    expect(router.parseUrl(router.url).queryParams).toEqual({ next: '/plans/abc', ended: 'true' });
    expect(store.isSignedIn()).toBe(false);
  });

  it('goes to the door after signing out', async () => {
    const signOut = vi.fn(() => Promise.resolve());
    const { store, router } = setUp({ signIn: () => Promise.resolve(designer), signOut });
    await store.signIn({ email: 'ada@demo.invalid', password: 'x' });
    await store.signOut();
    expect(signOut).toHaveBeenCalled();
    expect(store.session()).toBeNull();
    expect(router.url).toBe('/sign-in');
  });
});
