import { AsyncLocalStorage } from 'node:async_hooks';
import type { Role } from '../../../shared/api/roles.js';

/** Who asks, in which workshop, as what. Read from the database at every request. */
export interface Session {
  readonly id: string;
  readonly userId: string;
  readonly workshopId: string;
  readonly role: Role;
}

const context = new AsyncLocalStorage<Session>();

/** Everything called from `work`, however deep and late, sees this session. */
export function runAs<T>(session: Session, work: () => T): T {
  return context.run(session, work);
}

/** The session of the request being answered. Throws outside a guarded route: a mistake of ours. */
export function currentSession(): Session {
  const session = context.getStore();
  if (!session) throw new Error('No session: the route is not guarded');
  return session;
}
