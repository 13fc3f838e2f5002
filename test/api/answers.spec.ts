import { mkdir, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import request from 'supertest';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { errorResponse } from '../../shared/api/error-codes.js';
import type { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';
import { boxEnvelope } from './support/worker-results.js';

let product: TestProduct;
let lead: ApiClient;
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
  lead = await product.signIn('shopLead');
  await mkdir(product.webFolder, { recursive: true });
  await writeFile(join(product.webFolder, 'index.html'), '<!doctype html><title>page</title>');
  await writeFile(join(product.webFolder, 'main-ABCD1234.js'), 'export {};');
});
afterAll(() => product.stop());

describe('refusals', () => {
  const post = () => lead.request('post', '/api/envelopes');
  it.each([
    ['an unknown address', () => lead.request('get', '/api/nothing'), 404, 'request.notFound'],
    [
      'a method the address lacks',
      () => lead.request('put', '/api/plans').send({}),
      404,
      'request.notFound',
    ],
    ['broken JSON', () => post().type('json').send('{"name": '), 400, 'request.invalid'],
    ['JSON that is no object', () => post().type('json').send('[1]'), 400, 'request.invalid'],
    ['no body', () => post(), 400, 'request.invalid'],
    [
      'another kind of body',
      () => post().type('text/plain').send('name=x'),
      415,
      'request.invalid',
    ],
    [
      'an unknown charset',
      () => post().set('Content-Type', 'application/json; charset=x').send('{}'),
      415,
      'request.invalid',
    ],
    ['a huge body', () => post().send({ name: 'x'.repeat(300_000) }), 413, 'request.tooLarge'],
    ['a broken address', () => lead.request('get', '/api/models/%E0%A4%A'), 400, 'request.invalid'],
    [
      'a query that is no identifier',
      () => lead.request('get', '/api/plans?modelId=x'),
      400,
      'request.invalid',
    ],
    [
      'a query given twice',
      () => lead.request('get', '/api/plans?modelId=a&modelId=b'),
      400,
      'request.invalid',
    ],
  ] as const)('%s', async (_case, ask, status, code) => {
    const response = await ask();
    expect(response.status).toBe(status);
    const { error } = errorResponse.parse(response.body);
    expect(error.code).toBe(code);
    expect(error.message).toMatch(/^\S.*/);
    expect(response.text).not.toMatch(/node_modules|\.ts:|\.js:| {4}at /);
  });

  it('of unknown fields and prototypes change nothing', async () => {
    const body = '{"__proto__": {"isAdmin": true}, "workshopId": "x", "id": "y", ';
    const response = await post()
      .type('json')
      .send(body + JSON.stringify({ ...boxEnvelope, name: 'Plain' }).slice(1));
    expect(response.status).toBe(201);
    expect(response.body.id).toMatch(/^[a-z0-9]{20}$/);
    expect(({} as { isAdmin?: boolean }).isAdmin).toBeUndefined();
  });

  it('of a database that fails say so without its words', async () => {
    const broken = await startTestProduct(inject('mariadbUrl'));
    const client = await broken.signIn('owner');
    await broken.database.pool.query('RENAME TABLE envelopes TO elsewhere');
    const response = await client.get('/api/envelopes');
    expect(response.status).toBe(500);
    expect(errorResponse.parse(response.body).error.code).toBe('server.failed');
    expect(response.text).not.toMatch(/table|mysql|select|envelopes/i);
    await broken.stop();
  });
});

describe('the client', () => {
  it('is served from every address of its own, anew each time', async () => {
    for (const path of ['/', '/models', '/plans/abc?x=1']) {
      const response = await request(product.app).get(path);
      expect([response.status, response.text]).toEqual([200, '<!doctype html><title>page</title>']);
      expect(response.headers['cache-control']).toBe('no-cache');
    }
  });

  it('keeps files whose name carries a hash for a year', async () => {
    const response = await request(product.app).get('/main-ABCD1234.js');
    expect(response.headers['cache-control']).toBe('public, max-age=31536000, immutable');
  });

  it('gets no page in place of a missing file, nor a file from outside', async () => {
    for (const path of ['/main-ZZZZ9999.js', '/favicon.ico', '/..%2f..%2fpackage.json'])
      expect((await request(product.app).get(path)).status).toBe(404);
  });

  it('may load nothing from elsewhere and is not asked to use TLS that is not there', async () => {
    const { headers } = await request(product.app).get('/');
    const policy = String(headers['content-security-policy']);
    expect(policy).toContain("default-src 'self'");
    expect(policy).toContain("script-src 'self' 'wasm-unsafe-eval'");
    expect(policy).not.toMatch(/https?:|\*|upgrade-insecure-requests/);
    expect(headers['strict-transport-security']).toBeUndefined();
    expect(headers['x-content-type-options']).toBe('nosniff');
    expect(headers['x-powered-by']).toBeUndefined();
  });
});

describe('answers of the API', () => {
  it('stay out of every cache', async () => {
    expect((await lead.get('/api/envelopes')).headers['cache-control']).toBe('no-store');
    expect((await lead.get('/api/health')).body).toEqual({ ok: true });
  });
});
