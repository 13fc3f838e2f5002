import type { Express, NextFunction, Request, RequestHandler, Response } from 'express';
import { type Action, may, roleNames } from '../../../shared/api/roles.js';
import { createForbidden, createSessionRequired } from './api-error.js';
import { type Session, runAs } from './session-context.js';
import { checkXsrf, isSafeMethod } from './xsrf.js';

/**
 * Who may use a route: an action of shared/api/roles.ts, anyone who is signed in, or anyone. A
 * public route that changes something checks the forgery token itself, as it knows the session.
 */
export type Access = Action | 'signedIn' | 'public';

/** A route as data. There is no way to add one without saying who may use it. */
export interface Route {
  readonly method: 'get' | 'post' | 'put' | 'patch' | 'delete';
  readonly path: string;
  readonly access: Access;
  /** Runs after the guard and before the handler: receiving a file, counting attempts. */
  readonly before?: readonly RequestHandler[];
  readonly handle: (req: Request, res: Response) => Promise<void> | void;
}

export interface Guard {
  /** The session of the access cookie, or null. */
  readonly authenticate: (req: Request) => Promise<Session | null>;
  readonly secret: string;
}

/** Mounts every route behind its guard: the one place where roles are checked. */
export function mountRoutes(app: Express, routes: readonly Route[], guard: Guard): void {
  for (const route of routes)
    app[route.method](
      route.path,
      allow(route.access, guard),
      ...(route.before ?? []),
      route.handle,
    );
}

/** Lets through who may: 401 when signed out, 403 for a wrong role or a forged request. */
export function allow(access: Access, guard: Guard): RequestHandler {
  if (access === 'public') return (_req, _res, next) => next();
  return async (req: Request, _res: Response, next: NextFunction) => {
    const session = await guard.authenticate(req);
    if (!session) throw createSessionRequired();
    if (access !== 'signedIn' && !may(session.role, access))
      throw createForbidden(`As ${roleNames[session.role].toLowerCase()} you may not do this.`);
    if (!isSafeMethod(req.method)) checkXsrf(req, session.id, guard.secret);
    runAs(session, next);
  };
}
