import request from 'supertest';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { sessionResponse } from '../../shared/api/session.contract.js';
import { PARALLEL_TABS_MS } from '../../server/modules/session/session.service.js';
import { ApiClient } from './support/api-client.js';
import { emailOf, PASSWORD, startTestProduct, type TestProduct } from './support/test-product.js';

let product: TestProduct;
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
});
afterAll(() => product.stop());

describe('signing in', () => {
  it('answers who, where and as what, and sets cookies no script can read', async () => {
    const response = await request(product.app)
      .post('/api/session')
      .send({ email: ' Designer@A.example ', password: PASSWORD });
    expect(response.status).toBe(200);
    const session = sessionResponse.parse(response.body);
    expect(session).toMatchObject({ role: 'designer', workshop: { name: 'a', isDemo: false } });
    const cookies = response.headers['set-cookie'] as unknown as string[];
    const named = (name: string) => cookies.find((cookie) => cookie.startsWith(`${name}=`));
    expect(named('sw_access')).toMatch(/Max-Age=600; Path=\/api; .*HttpOnly; SameSite=Strict/);
    expect(named('sw_refresh')).toMatch(/Path=\/api\/session; .*HttpOnly; SameSite=Strict/);
    expect(named('XSRF-TOKEN')).toMatch(/Path=\/; .*SameSite=Strict/);
    expect(named('XSRF-TOKEN')).not.toContain('HttpOnly');
  });

  it.each([
    ['an unknown address', { email: 'nobody@a.example', password: PASSWORD }],
    ['a wrong password', { email: emailOf('owner', 'a'), password: 'wrong' }],
    // The collation of the column calls these two equal.
    ['an address that differs by an accent', { email: 'ówner@a.example', password: PASSWORD }],
  ])('refuses %s with the same words', async (_case, credentials) => {
    const response = await request(product.app).post('/api/session').send(credentials);
    expect(response.status).toBe(401);
    expect(response.body).toEqual({
      error: {
        code: 'session.wrongCredentials',
        message: 'The e-mail address or the password is not right.',
      },
    });
    expect(response.headers['set-cookie']).toBeUndefined();
  });

  it('stores passwords and refresh tokens as hashes only', async () => {
    const client = await product.signIn('owner');
    const [users] = await product.database.pool.query('SELECT * FROM users');
    const [tokens] = await product.database.pool.query('SELECT * FROM refresh_tokens');
    const stored = JSON.stringify([users, tokens]);
    expect(stored).not.toContain(PASSWORD);
    expect(stored).not.toContain(client.cookies.get('sw_refresh'));
  });

  it('takes a role away at once, although the access token lives on', async () => {
    const client = await product.signIn('maker', 'b');
    expect((await client.get('/api/models')).status).toBe(200);
    await product.database.pool.query(
      `DELETE FROM memberships WHERE role = 'maker' AND workshop_id = ?`,
      [product.workshopIds.b],
    );
    expect((await client.get('/api/models')).status).toBe(401);
  });
});

describe('the session over time', () => {
  it('ends access after ten minutes and renews it with a rotated token', async () => {
    const client = await product.signIn('designer');
    const first = client.cookies.get('sw_refresh');
    product.clock.advance(10 * 60_000);
    const expired = await client.get('/api/session');
    expect([expired.status, expired.body.error.code]).toEqual([401, 'session.required']);
    const renewed = await client.send('post', '/api/session/refresh', {});
    expect(renewed.status).toBe(200);
    expect(sessionResponse.parse(renewed.body).role).toBe('designer');
    expect(client.cookies.get('sw_refresh')).not.toBe(first);
    expect((await client.get('/api/session')).status).toBe(200);
  });

  it('lets a second tab that sends the same token live on, without a second token', async () => {
    const tab = await product.signIn('designer');
    const other = tab.clone();
    await tab.send('post', '/api/session/refresh', {});
    product.clock.advance(PARALLEL_TABS_MS);
    const late = await other.send('post', '/api/session/refresh', {});
    expect(late.status).toBe(200);
    expect(late.headers['set-cookie']).toHaveLength(1);
    expect((await other.get('/api/session')).status).toBe(200);
    expect((await tab.send('post', '/api/session/refresh', {})).status).toBe(200);
  });

  it('gives one new token when two tabs ask in the same moment', async () => {
    const tab = await product.signIn('designer');
    const answers = await Promise.all(
      [1, 2, 3, 4].map(() => tab.clone().send('post', '/api/session/refresh', {})),
    );
    expect(answers.map((answer) => answer.status)).toEqual([200, 200, 200, 200]);
    const withToken = answers.filter((answer) =>
      String(answer.headers['set-cookie']).includes('sw_refresh'),
    );
    expect(withToken).toHaveLength(1);
  });

  it('ends the whole session when a spent token comes back', async () => {
    const client = await product.signIn('designer');
    const thief = client.clone();
    await client.send('post', '/api/session/refresh', {});
    product.clock.advance(PARALLEL_TABS_MS + 1);
    const stolen = await thief.send('post', '/api/session/refresh', {});
    expect([stolen.status, stolen.body.error.code]).toEqual([401, 'session.required']);
    expect((await client.get('/api/session')).status).toBe(401);
    expect((await client.send('post', '/api/session/refresh', {})).status).toBe(401);
  });

  it('is over after thirty days, and its tokens are forgotten at the next sign-in', async () => {
    const client = await product.signIn('designer');
    product.clock.advance(30 * 24 * 60 * 60_000 + 1);
    expect((await client.send('post', '/api/session/refresh', {})).status).toBe(401);
    await product.signIn('designer');
    const [rows] = await product.database.pool.query('SELECT COUNT(*) AS n FROM refresh_tokens');
    expect(rows).toEqual([{ n: 1 }]);
  });
});

describe('signing out', () => {
  it('revokes access and refresh and clears the cookies', async () => {
    const client = await product.signIn('owner');
    const copy = client.clone();
    const response = await client.send('delete', '/api/session');
    expect(response.status).toBe(204);
    expect(client.cookies.size).toBe(0);
    expect((await copy.get('/api/session')).status).toBe(401);
    expect((await copy.send('post', '/api/session/refresh', {})).status).toBe(401);
  });

  it('works after the access token ran out, and when nobody is signed in', async () => {
    const client = await product.signIn('owner');
    const copy = client.clone();
    product.clock.advance(10 * 60_000);
    expect((await client.send('delete', '/api/session')).status).toBe(204);
    expect((await copy.send('post', '/api/session/refresh', {})).status).toBe(401);
    expect((await new ApiClient(product.app).send('delete', '/api/session')).status).toBe(204);
  });
});

describe('forged requests', () => {
  it('are refused without the token, with a wrong one, and with that of another session', async () => {
    const client = await product.signIn('shopLead');
    const other = await product.signIn('shopLead');
    const planted = other.cookies.get('XSRF-TOKEN') ?? '';
    const own = client.cookies.get('XSRF-TOKEN') ?? '';
    const cases: [string, string | null][] = [
      [own, null],
      [own, 'x'.repeat(own.length)],
      [planted, planted],
      [planted, own],
      ['', own],
    ];
    for (const [cookie, header] of cases) {
      client.cookies.set('XSRF-TOKEN', cookie);
      const test = request(product.app)
        .delete('/api/envelopes/aaaaaaaaaaaaaaaaaaaa')
        .set('Cookie', client.cookieHeader());
      const response = await (header === null ? test : test.set('X-XSRF-TOKEN', header));
      expect([response.status, response.body.error.code]).toEqual([403, 'request.forged']);
    }
  });

  it('can neither renew nor end a session', async () => {
    const client = await product.signIn('owner');
    for (const [method, path] of [
      ['post', '/api/session/refresh'],
      ['delete', '/api/session'],
    ] as const) {
      const agent = request(product.app);
      const response = await agent[method](path).set('Cookie', client.cookieHeader());
      expect([response.status, response.body.error.code]).toEqual([403, 'request.forged']);
    }
    expect((await client.send('post', '/api/session/refresh', {})).status).toBe(200);
  });
});

describe('many failed sign-ins', () => {
  it('are stopped for that address and e-mail, not for others, and success does not count', async () => {
    const limited = await startTestProduct(inject('mariadbUrl'), {
      signInLimits: { windowMs: 60_000, perAccount: 3, perAddress: 8 },
    });
    const attempt = (email: string, password: string) =>
      request(limited.app).post('/api/session').send({ email, password });
    for (let round = 0; round < 5; round++)
      expect((await attempt(emailOf('owner', 'a'), PASSWORD)).status).toBe(200);
    for (let round = 0; round < 3; round++)
      expect((await attempt(emailOf('owner', 'a'), 'wrong')).status).toBe(401);
    const refused = await attempt(emailOf('owner', 'a').toUpperCase(), PASSWORD);
    expect([refused.status, refused.body.error.code]).toEqual([429, 'request.tooMany']);
    expect(Number(refused.headers['retry-after'])).toBeGreaterThan(0);
    expect((await attempt(emailOf('maker', 'a'), PASSWORD)).status).toBe(200);
    for (let round = 0; round < 6; round++) await attempt(`spray${round}@a.example`, 'wrong');
    expect((await attempt(emailOf('maker', 'a'), PASSWORD)).status).toBe(429);
    await limited.stop();
  });
});

describe('the demo accounts', () => {
  it('are shown only where the demo workshop is', async () => {
    const without = await request(product.app).get('/api/session/demo-accounts');
    expect(without.body).toEqual({ accounts: [] });
    await product.database.pool.query(`UPDATE workshops SET is_demo = TRUE WHERE name = 'b'`);
    const shown = await request(product.app).get('/api/session/demo-accounts');
    expect(shown.body.accounts.map((account: { role: string }) => account.role)).toEqual([
      'owner',
      'shopLead',
      'designer',
      'maker',
    ]);
  });
});
