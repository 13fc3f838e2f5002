import type { Request, RequestHandler, Response } from 'express';
import {
  type DemoAccountsResponse,
  type SessionResponse,
  signInRequest,
} from '../../../shared/api/session.contract.js';
import { createSessionRequired } from '../../platform/http/api-error.js';
import { parseBody } from '../../platform/http/parse.js';
import type { Route } from '../../platform/http/routes.js';
import { currentSession, type Session } from '../../platform/http/session-context.js';
import { checkXsrf } from '../../platform/http/xsrf.js';
import {
  accessTokenOf,
  clearSessionCookies,
  refreshTokenOf,
  setSessionCookies,
} from './session-cookies.js';
import type { SessionService } from './session.service.js';

export function createSessionRoutes(deps: {
  sessions: SessionService;
  secret: string;
  signInLimits: readonly RequestHandler[];
  /** Empty unless the demo workshop is there. */
  demoAccounts: () => Promise<DemoAccountsResponse['accounts']>;
}): Route[] {
  const { sessions, secret } = deps;

  async function describe(session: Session): Promise<SessionResponse> {
    const view = await sessions.describe(session);
    if (!view) throw createSessionRequired();
    const { user, workshop, role } = view;
    return {
      user: { id: user.id, name: user.name, email: user.email, isDemo: user.isDemo },
      workshop: { id: workshop.id, name: workshop.name, isDemo: workshop.isDemo },
      role,
    };
  }

  async function signIn(req: Request, res: Response): Promise<void> {
    const issued = await sessions.signIn(parseBody(signInRequest, req));
    const answer = await describe(issued.session);
    setSessionCookies(req, res, issued, secret);
    res.json(answer);
  }

  async function refresh(req: Request, res: Response): Promise<void> {
    const token = refreshTokenOf(req);
    const session = token ? await sessions.findByRefreshToken(token) : null;
    // Checked before the exchange: a forged request must not spend the person's token.
    if (session) checkXsrf(req, session.id, secret);
    const issued = token ? await sessions.refresh(token) : null;
    if (!issued) {
      clearSessionCookies(req, res);
      throw createSessionRequired();
    }
    const answer = await describe(issued.session);
    setSessionCookies(req, res, issued, secret);
    res.json(answer);
  }

  async function signOut(req: Request, res: Response): Promise<void> {
    const [access, token] = [accessTokenOf(req), refreshTokenOf(req)];
    const session =
      (access ? await sessions.authenticate(access) : null) ??
      (token ? await sessions.findByRefreshToken(token) : null);
    if (session) {
      checkXsrf(req, session.id, secret);
      await sessions.signOut(session);
    }
    clearSessionCookies(req, res);
    res.status(204).end();
  }

  return [
    {
      method: 'post',
      path: '/api/session',
      access: 'public',
      before: deps.signInLimits,
      handle: signIn,
    },
    { method: 'delete', path: '/api/session', access: 'public', handle: signOut },
    { method: 'post', path: '/api/session/refresh', access: 'public', handle: refresh },
    {
      method: 'get',
      path: '/api/session',
      access: 'signedIn',
      handle: async (_req, res) => {
        res.json(await describe(currentSession()));
      },
    },
    {
      method: 'get',
      path: '/api/session/demo-accounts',
      access: 'public',
      handle: async (_req, res) => {
        const answer: DemoAccountsResponse = { accounts: await deps.demoAccounts() };
        res.json(answer);
      },
    },
  ];
}
