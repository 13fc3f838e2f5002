import type { CookieOptions, Request, Response } from 'express';
import { XSRF_COOKIE, xsrfTokenOf } from '../../platform/http/xsrf.js';
import { ACCESS_LIFETIME_S } from './session-tokens.js';
import { type IssuedTokens, SESSION_LIFETIME_MS } from './session.service.js';

const ACCESS_COOKIE = 'sw_access';
const REFRESH_COOKIE = 'sw_refresh';
const PATHS = { [ACCESS_COOKIE]: '/api', [REFRESH_COOKIE]: '/api/session', [XSRF_COOKIE]: '/' };

/** Secure wherever the request came over TLS; a workshop's own network has plain HTTP. */
function options(req: Request, name: keyof typeof PATHS, maxAge?: number): CookieOptions {
  return {
    httpOnly: name !== XSRF_COOKIE,
    sameSite: 'strict',
    secure: req.secure,
    path: PATHS[name],
    ...(maxAge === undefined ? {} : { maxAge }),
  };
}

export function setSessionCookies(
  req: Request,
  res: Response,
  issued: IssuedTokens,
  secret: string,
): void {
  const access = options(req, ACCESS_COOKIE, ACCESS_LIFETIME_S * 1000);
  res.cookie(ACCESS_COOKIE, issued.accessToken, access);
  if (!issued.refreshToken) return;
  res.cookie(
    REFRESH_COOKIE,
    issued.refreshToken,
    options(req, REFRESH_COOKIE, SESSION_LIFETIME_MS),
  );
  // Readable by our page alone; Angular copies it into a header.
  const token = xsrfTokenOf(issued.session.id, secret);
  res.cookie(XSRF_COOKIE, token, options(req, XSRF_COOKIE, SESSION_LIFETIME_MS));
}

export function clearSessionCookies(req: Request, res: Response): void {
  for (const name of [ACCESS_COOKIE, REFRESH_COOKIE, XSRF_COOKIE] as const)
    res.clearCookie(name, options(req, name));
}

export function accessTokenOf(req: Request): string | null {
  return cookie(req, ACCESS_COOKIE);
}

export function refreshTokenOf(req: Request): string | null {
  return cookie(req, REFRESH_COOKIE);
}

function cookie(req: Request, name: string): string | null {
  const value = (req.cookies as Record<string, unknown>)[name];
  return typeof value === 'string' && value.length < 4_000 ? value : null;
}
