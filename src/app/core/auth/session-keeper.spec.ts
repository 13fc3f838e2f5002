import { signal } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { of, throwError } from 'rxjs';
import { RenewalClock } from './renewal-clock';
import { SessionKeeper, renewAfterMs } from './session-keeper';
import { SessionRefresher } from './session-refresher';
import { SessionStore } from './session-store';

function setUp(renewedAgoMs: number) {
  vi.useFakeTimers();
  const isSignedIn = signal(true);
  const clock = new RenewalClock();
  clock.mark(Date.now() - renewedAgoMs);
  const refresh = vi.fn(() => {
    clock.mark(Date.now());
    return of(true);
  });
  TestBed.configureTestingModule({
    providers: [
      { provide: SessionStore, useValue: { isSignedIn } },
      { provide: SessionRefresher, useValue: { refresh } },
      { provide: RenewalClock, useValue: clock },
    ],
  });
  TestBed.inject(SessionKeeper);
  TestBed.tick();
  return { isSignedIn, refresh };
}

describe('SessionKeeper', () => {
  beforeEach(() => localStorage.clear());
  afterEach(() => vi.useRealTimers());

  it('renews ahead of the end and then leaves the session alone for as long again', () => {
    const { refresh } = setUp(0);
    vi.advanceTimersByTime(renewAfterMs - 60_000);
    expect(refresh).not.toHaveBeenCalled();
    vi.advanceTimersByTime(120_000);
    expect(refresh).toHaveBeenCalledTimes(1);
    vi.advanceTimersByTime(renewAfterMs - 120_000);
    expect(refresh).toHaveBeenCalledTimes(1);
  });

  it('renews at once when the page wakes with an old token', () => {
    const { refresh } = setUp(renewAfterMs + 1);
    vi.advanceTimersByTime(1);
    expect(refresh).toHaveBeenCalledTimes(1);
  });

  it('rests while nobody is signed in', () => {
    const { isSignedIn, refresh } = setUp(0);
    isSignedIn.set(false);
    TestBed.tick();
    vi.advanceTimersByTime(3 * renewAfterMs);
    expect(refresh).not.toHaveBeenCalled();
  });

  it('tries again after network trouble', () => {
    const { refresh } = setUp(renewAfterMs + 1);
    refresh.mockImplementationOnce(() => throwError(() => new Error('offline')));
    vi.advanceTimersByTime(1);
    vi.advanceTimersByTime(30_000);
    expect(refresh).toHaveBeenCalledTimes(2);
  });
});
