import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { type Role, roles } from '../../shared/api/roles.js';
import { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';

const everyone: readonly Role[] = roles;
const makers: readonly Role[] = ['owner', 'shopLead', 'designer'];
const leads: readonly Role[] = ['owner', 'shopLead'];

/** Who may use which route. Written by hand, so that it does not follow a slip in the code. */
const expected: Record<string, 'public' | readonly Role[]> = {
  'get /api/health': 'public',
  'post /api/session': 'public',
  'get /api/session': everyone,
  'delete /api/session': 'public',
  'post /api/session/refresh': 'public',
  'get /api/session/demo-accounts': 'public',
  'get /api/models': everyone,
  'post /api/models': makers,
  'get /api/models/:id': everyone,
  'patch /api/models/:id': makers,
  'delete /api/models/:id': makers,
  'get /api/models/:id/revisions': everyone,
  'post /api/models/:id/revisions': makers,
  'post /api/models/:id/mending': makers,
  'get /api/models/:id/thumbnail': everyone,
  'get /api/models/:id/view': everyone,
  'get /api/envelopes': everyone,
  'post /api/envelopes': leads,
  'get /api/envelopes/:id': everyone,
  'put /api/envelopes/:id': leads,
  'delete /api/envelopes/:id': leads,
  'get /api/materials': everyone,
  'post /api/materials': leads,
  'get /api/materials/:id': everyone,
  'put /api/materials/:id': leads,
  'delete /api/materials/:id': leads,
  'post /api/plans/:id/release': makers,
  'get /api/plans': everyone,
  'post /api/plans': makers,
  'get /api/plans/:id': everyone,
  'delete /api/plans/:id': makers,
  'get /api/plans/:id/view': everyone,
  'get /api/plans/:id/download': everyone,
  'get /api/jobs/:id': everyone,
  'post /api/jobs/:id/cancel': makers,
  'post /api/jobs/:id/enough': makers,
  'get /api/jobs/:id/events': everyone,
};

let product: TestProduct;
const clients = new Map<Role, ApiClient>();
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
  for (const role of roles) clients.set(role, await product.signIn(role));
});
afterAll(() => product.stop());

const routes = () => product.product.routes;
const nameOf = (route: { method: string; path: string }) => `${route.method} ${route.path}`;
const somewhere = (path: string) => path.replace(':id', 'a'.repeat(20));
const outcome = (response: { status: number; body: { error?: { code: string } } }) =>
  `${response.status} ${response.body.error?.code ?? ''}`;

describe('the routes', () => {
  it('are all in the table, and the table holds nothing else', () => {
    expect(routes().map(nameOf).sort()).toEqual(Object.keys(expected).sort());
  });

  it('ask everyone who is signed out to sign in, unless they are public', async () => {
    const nobody = new ApiClient(product.app);
    for (const route of routes()) {
      if (expected[nameOf(route)] === 'public') continue;
      const response = await nobody.send(route.method, somewhere(route.path), {});
      expect(`${nameOf(route)}: ${outcome(response)}`).toBe(
        `${nameOf(route)}: 401 session.required`,
      );
    }
  });

  it.each(roles)(
    'let a person in the role %s do what the table says and nothing else',
    async (role) => {
      const client = clients.get(role) as ApiClient;
      for (const route of routes()) {
        const allowed = expected[nameOf(route)];
        if (allowed === 'public' || allowed === undefined) continue;
        const response = await client.send(route.method, somewhere(route.path), {});
        const text = `${nameOf(route)} as ${role}: ${outcome(response)}`;
        if (allowed.includes(role)) expect(text).not.toMatch(/ (401|403) /);
        else expect(text).toMatch(/: 403 session\.forbidden$/);
      }
    },
  );

  it('refuse every change that does not carry the forgery token', async () => {
    const client = (clients.get('owner') as ApiClient).clone();
    client.cookies.delete('XSRF-TOKEN');
    for (const route of routes()) {
      if (route.method === 'get' || expected[nameOf(route)] === 'public') continue;
      const response = await client.send(route.method, somewhere(route.path), {});
      expect(`${nameOf(route)}: ${outcome(response)}`).toBe(`${nameOf(route)}: 403 request.forged`);
    }
  });
});
