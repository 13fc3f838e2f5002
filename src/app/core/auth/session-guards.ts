import { inject } from '@angular/core';
import { RedirectCommand, Router, type CanActivateFn } from '@angular/router';
import { SessionStore } from './session-store';

/** Only for people who are signed in; others come back here after signing in. */
export const requireSession: CanActivateFn = async (_route, state) => {
  const store = inject(SessionStore);
  const router = inject(Router);
  if (!(await restored(store))) return toNoServer(router);
  if (store.isSignedIn()) return true;
  const queryParams = state.url === '/' ? {} : { next: state.url };
  return router.createUrlTree(['/sign-in'], { queryParams });
};

/** The door is only for people outside. */
export const requireNoSession: CanActivateFn = async () => {
  const store = inject(SessionStore);
  const router = inject(Router);
  if (!(await restored(store))) return toNoServer(router);
  return store.isSignedIn() ? router.createUrlTree(['/']) : true;
};

async function restored(store: SessionStore): Promise<boolean> {
  try {
    await store.restore();
    return true;
  } catch {
    // Expected: the server is away or starting; the page that follows offers another try.
    return false;
  }
}

/** Keeps the address, so that trying again leads to where the person wanted to go. */
function toNoServer(router: Router): RedirectCommand {
  return new RedirectCommand(router.parseUrl('/no-server'), { skipLocationChange: true });
}
