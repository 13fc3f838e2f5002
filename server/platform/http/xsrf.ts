import { createHmac, timingSafeEqual } from 'node:crypto';
import type { Request } from 'express';
import { createForgedRequest } from './api-error.js';

export const XSRF_COOKIE = 'XSRF-TOKEN';
export const XSRF_HEADER = 'x-xsrf-token';

/**
 * The token that our own page copies from a cookie into a header. It belongs to one session, so a
 * cookie planted from elsewhere does not serve (OWASP Cross-Site Request Forgery Prevention Cheat
 * Sheet, signed double-submit cookie; from memory).
 */
export function xsrfTokenOf(sessionId: string, secret: string): string {
  return createHmac('sha256', secret).update(`xsrf:${sessionId}`).digest('base64url');
}

/** Whether a method changes nothing and so needs no token. */
export function isSafeMethod(method: string): boolean {
  return method === 'GET' || method === 'HEAD' || method === 'OPTIONS';
}

/** @throws request.forged unless header and cookie both hold the session's token */
export function checkXsrf(req: Request, sessionId: string, secret: string): void {
  const expected = xsrfTokenOf(sessionId, secret);
  const cookie = (req.cookies as Record<string, unknown>)[XSRF_COOKIE];
  if (!isSame(req.get(XSRF_HEADER), expected) || !isSame(cookie, expected))
    throw createForgedRequest();
}

function isSame(given: unknown, expected: string): boolean {
  if (typeof given !== 'string' || given.length !== expected.length) return false;
  const [a, b] = [Buffer.from(given), Buffer.from(expected)];
  return a.length === b.length && timingSafeEqual(a, b);
}
