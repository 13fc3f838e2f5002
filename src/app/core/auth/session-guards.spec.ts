import { signal } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import {
  Router,
  provideRouter,
  type ActivatedRouteSnapshot,
  type CanActivateFn,
  type RouterStateSnapshot,
} from '@angular/router';
import { requireNoSession, requireSession } from './session-guards';
import { SessionStore } from './session-store';

function ask(guard: CanActivateFn, url: string, store: Partial<SessionStore>) {
  TestBed.configureTestingModule({
    providers: [provideRouter([]), { provide: SessionStore, useValue: store }],
  });
  const state = { url } as RouterStateSnapshot;
  return TestBed.runInInjectionContext(() => guard({} as ActivatedRouteSnapshot, state));
}

const signedIn = { isSignedIn: signal(true), restore: () => Promise.resolve() };
const signedOut = { isSignedIn: signal(false), restore: () => Promise.resolve() };

describe('requireSession', () => {
  it('lets people in who are signed in', async () => {
    expect(await ask(requireSession, '/models', signedIn)).toBe(true);
  });

  it('sends others to the door and remembers where they wanted to go', async () => {
    const answer = await ask(requireSession, '/plans/abc?piece=2', signedOut);
    const expected = TestBed.inject(Router).createUrlTree(['/sign-in'], {
      queryParams: { next: '/plans/abc?piece=2' },
    });
    expect(String(answer)).toBe(String(expected));
  });

  it('shows that the server is away without losing the address', async () => {
    const restore = () => Promise.reject(new Error('away'));
    const answer = await ask(requireSession, '/models', { ...signedOut, restore });
    expect(answer).toMatchObject({ navigationBehaviorOptions: { skipLocationChange: true } });
  });
});

describe('requireNoSession', () => {
  it('sends people who are signed in away from the door', async () => {
    expect(String(await ask(requireNoSession, '/sign-in', signedIn))).toBe('/');
  });

  it('leaves others at the door', async () => {
    expect(await ask(requireNoSession, '/sign-in', signedOut)).toBe(true);
  });
});
