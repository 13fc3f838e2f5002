import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { envelopeListResponse, envelopeResponse } from '../../shared/api/envelopes.contract.js';
import type { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';
import { boxEnvelope } from './support/worker-results.js';

let product: TestProduct;
let lead: ApiClient;
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
  lead = await product.signIn('shopLead');
});
afterAll(() => product.stop());

const roundEnvelope = {
  name: 'Round ⌀ 300',
  shape: 'round',
  diameterMm: 300,
  heightMm: 400,
  marginMm: 5,
  nozzleMm: 0.4,
  layerHeightMm: 0.2,
};

describe('envelopes', () => {
  it('are made, read, replaced by another shape, listed by name and removed', async () => {
    const made = await lead.send('post', '/api/envelopes', boxEnvelope);
    expect(made.status).toBe(201);
    const envelope = envelopeResponse.parse(made.body);
    expect(envelope).toMatchObject(boxEnvelope);
    const path = `/api/envelopes/${envelope.id}`;
    expect((await lead.get(path)).body).toEqual(made.body);

    product.clock.advance(1_000);
    const replaced = await lead.send('put', path, roundEnvelope);
    expect(replaced.status).toBe(200);
    expect(envelopeResponse.parse(replaced.body)).toMatchObject(roundEnvelope);
    expect(replaced.body).not.toHaveProperty('widthMm');
    expect(replaced.body.updatedAt > made.body.updatedAt).toBe(true);

    await lead.send('post', '/api/envelopes', { ...boxEnvelope, name: 'A first one' });
    const list = envelopeListResponse.parse((await lead.get('/api/envelopes')).body);
    expect(list.envelopes.map(({ name }) => name)).toEqual(['A first one', 'Round ⌀ 300']);

    expect((await lead.send('delete', path)).status).toBe(204);
    expect((await lead.get(path)).status).toBe(404);
    expect((await lead.send('delete', path)).status).toBe(404);
    expect((await lead.send('put', path, roundEnvelope)).status).toBe(404);
  });

  it('have names of their own in a workshop', async () => {
    await lead.send('post', '/api/envelopes', { ...boxEnvelope, name: 'Twin' });
    const second = await lead.send('post', '/api/envelopes', { ...boxEnvelope, name: ' twin ' });
    expect([second.status, second.body.error.code]).toEqual([409, 'envelope.nameTaken']);
    expect(second.body.error.details[0].path).toBe('name');
    const third = await lead.send('post', '/api/envelopes', { ...boxEnvelope, name: 'Third' });
    const renamed = await lead.send('put', `/api/envelopes/${third.body.id}`, {
      ...boxEnvelope,
      name: 'Twin',
    });
    expect(renamed.status).toBe(409);
    const elsewhere = await product.signIn('shopLead', 'b');
    const same = await elsewhere.send('post', '/api/envelopes', { ...boxEnvelope, name: 'Twin' });
    expect(same.status).toBe(201);
  });

  it.each([
    ['width 0', { widthMm: 0 }, 'widthMm', /more than 0 mm/],
    ['a negative height', { heightMm: -1 }, 'heightMm', /more than 0 mm/],
    ['a depth over 10 m', { depthMm: 10_000.1 }, 'depthMm', /at most 10 000 mm/],
    ['a width as text', { widthMm: '220' }, 'widthMm', /must be a number of millimetres/],
    ['no height', { heightMm: undefined }, 'heightMm', /must be a number of millimetres/],
    ['no name', { name: '  ' }, 'name', /Give the envelope a name/],
    ['a margin that eats the bed', { marginMm: 160 }, 'marginMm', /leaves no room/],
    ['a negative margin', { marginMm: -1 }, 'marginMm', /cannot be negative/],
    ['layers above the nozzle', { layerHeightMm: 0.5 }, 'layerHeightMm', /cannot be higher/],
    ['an unknown shape', { shape: 'hexagon' }, 'shape', /./],
    ['a name of 81 letters', { name: 'x'.repeat(81) }, 'name', /80/],
  ])('are refused with %s, and nothing is stored', async (_case, change, path, words) => {
    const before = (await lead.get('/api/envelopes')).body;
    const response = await lead.send('post', '/api/envelopes', {
      ...boxEnvelope,
      name: 'Refused',
      ...change,
    });
    expect([response.status, response.body.error.code]).toEqual([400, 'request.invalid']);
    expect(response.body.error.details.map((detail: { path: string }) => detail.path)).toContain(
      path,
    );
    expect(response.body.error.message).toMatch(words);
    expect((await lead.get('/api/envelopes')).body).toEqual(before);
  });

  it('allow exactly 10 m', async () => {
    const response = await lead.send('post', '/api/envelopes', {
      ...boxEnvelope,
      name: 'Hall',
      widthMm: 10_000,
    });
    expect(response.status).toBe(201);
  });
});
