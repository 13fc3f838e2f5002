import { createHash, randomBytes } from 'node:crypto';
import jwt from 'jsonwebtoken';
import { z } from 'zod';

export const ACCESS_LIFETIME_S = 10 * 60;
const ALGORITHM = 'HS256';

const accessClaims = z.object({ sid: z.string(), exp: z.number() });

/** A short-lived token that names the session; what the session may do is read at every request. */
export function makeAccessToken({
  sessionId,
  secret,
  now,
}: {
  sessionId: string;
  secret: string;
  now: Date;
}): string {
  const issuedAt = Math.floor(now.getTime() / 1000);
  return jwt.sign({ sid: sessionId, iat: issuedAt, exp: issuedAt + ACCESS_LIFETIME_S }, secret, {
    algorithm: ALGORITHM,
  });
}

/** The session a token names, or null when it is forged, broken or too old. */
export function readAccessToken({
  token,
  secret,
  now,
}: {
  token: string;
  secret: string;
  now: Date;
}): string | null {
  try {
    const claims = accessClaims.parse(
      jwt.verify(token, secret, {
        algorithms: [ALGORITHM],
        clockTimestamp: Math.floor(now.getTime() / 1000),
      }),
    );
    return claims.sid;
  } catch {
    // JsonWebTokenError, TokenExpiredError, ZodError: whatever is wrong, it opens nothing.
    return null;
  }
}

/** 256 random bits: a refresh token. It is only ever stored as its hash. */
export function makeRefreshToken(): string {
  return randomBytes(32).toString('base64url');
}

/** How a refresh token is stored. It is random, so a plain hash cannot be guessed back. */
export function hashOfToken(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}
