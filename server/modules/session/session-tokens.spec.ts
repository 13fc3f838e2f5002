import jwt from 'jsonwebtoken';
import { describe, expect, it } from 'vitest';
import { ACCESS_LIFETIME_S, makeAccessToken, readAccessToken } from './session-tokens.js';

const secret = 'a secret that is long enough for a test';
const now = new Date('2030-01-01T00:00:00Z');
const later = (seconds: number) => new Date(now.getTime() + seconds * 1000);

describe('access tokens', () => {
  const token = makeAccessToken({ sessionId: 's1', secret, now });

  it('name their session for ten minutes and not a second longer', () => {
    expect(readAccessToken({ token, secret, now: later(ACCESS_LIFETIME_S - 1) })).toBe('s1');
    expect(readAccessToken({ token, secret, now: later(ACCESS_LIFETIME_S) })).toBeNull();
  });

  it('open nothing when signed with another secret, without a signature or changed', () => {
    expect(readAccessToken({ token, secret: `${secret}!`, now })).toBeNull();
    const unsigned = jwt.sign({ sid: 's1', exp: now.getTime() }, '', { algorithm: 'none' });
    expect(readAccessToken({ token: unsigned, secret, now })).toBeNull();
    const [head, , signature] = token.split('.');
    const claims = Buffer.from(JSON.stringify({ sid: 's2', exp: 4e9 })).toString('base64url');
    expect(readAccessToken({ token: `${head}.${claims}.${signature}`, secret, now })).toBeNull();
    expect(readAccessToken({ token: 'nonsense', secret, now })).toBeNull();
  });
});
