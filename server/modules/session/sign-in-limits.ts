import type { Request, RequestHandler } from 'express';
import { ipKeyGenerator, rateLimit } from 'express-rate-limit';
import { createTooManyRequests } from '../../platform/http/api-error.js';
import { normalEmail } from '../accounts/accounts.repository.js';

export interface SignInLimits {
  readonly windowMs: number;
  /** Failures for one e-mail address from one network address. */
  readonly perAccount: number;
  /** Failures from one network address, whatever the e-mail address. */
  readonly perAddress: number;
}

export const signInLimits: SignInLimits = {
  windowMs: 15 * 60_000,
  perAccount: 10,
  perAddress: 100,
};

/** Counts failed sign-ins and refuses after too many. A successful one is not counted. */
export function createSignInLimits(limits: SignInLimits): RequestHandler[] {
  const common = {
    windowMs: limits.windowMs,
    skipSuccessfulRequests: true,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    handler: () => {
      const minutes = Math.ceil(limits.windowMs / 60_000);
      throw createTooManyRequests(
        `Too many failed sign-ins. Wait up to ${minutes} minutes and try again.`,
      );
    },
  } as const;
  return [
    rateLimit({ ...common, limit: limits.perAddress, keyGenerator: addressOf }),
    rateLimit({
      ...common,
      limit: limits.perAccount,
      keyGenerator: (req) => `${addressOf(req)} ${emailOf(req)}`,
    }),
  ];
}

function addressOf(req: Request): string {
  return ipKeyGenerator(req.ip ?? '');
}

function emailOf(req: Request): string {
  const email: unknown = (req.body as { email?: unknown } | undefined)?.email;
  return typeof email === 'string' ? normalEmail(email).slice(0, 254) : '';
}
