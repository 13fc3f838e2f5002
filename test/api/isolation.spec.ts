import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { usualMaterial } from '../../shared/jobs/material-profile.js';
import { boxEnvelope, finishJob, inspectedModel, planResult } from './support/worker-results.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';
import type { ApiClient } from './support/api-client.js';

let product: TestProduct;
let mine: ApiClient;
let foreign: ApiClient;
/** Identifiers of workshop a's records by the collection in the address. */
let ids: Record<string, string>;

beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
  mine = await product.signIn('owner', 'a');
  foreign = await product.signIn('owner', 'b');
  const model = await inspectedModel(product, mine);
  const envelope = await mine.send('post', '/api/envelopes', boxEnvelope);
  const plan = await mine.send('post', '/api/plans', {
    modelId: model.id,
    envelopeId: envelope.body.id,
  });
  const jobId = plan.body.job.id as string;
  await finishJob(product, jobId, { state: 'done', output: await planResult(product, jobId) });
  await product.product.settler.settleAll();
  const material = await mine.send('post', '/api/materials', { profile: usualMaterial });
  ids = {
    models: model.id,
    envelopes: envelope.body.id,
    materials: material.body.id,
    plans: plan.body.id,
    jobs: jobId,
  };
});
afterAll(() => product.stop());

const bodies: Record<string, object> = {
  'put /api/envelopes/:id': { ...boxEnvelope, name: 'Taken over' },
  'put /api/materials/:id': { profile: { ...usualMaterial, name: 'Taken over' } },
  'post /api/plans/:id/release': { reason: 'Taken over' },
  'patch /api/models/:id': { name: 'Taken over' },
  'post /api/models/:id/mending': { choices: { remeshCells: 100 } },
};

function addressOf(path: string): string {
  const collection = path.split('/')[2] ?? '';
  const id = ids[collection];
  if (!id) throw new Error(`No record for ${path}: add one to this test`);
  return path.replace(':id', id);
}

describe('records of another workshop', () => {
  it('are not found on any route that names one, and stay as they were', async () => {
    const routes = product.product.routes.filter((route) => route.path.includes(':id'));
    expect(routes.length).toBeGreaterThan(12);
    for (const route of routes) {
      const body = bodies[`${route.method} ${route.path}`] ?? {};
      const response = await foreign.send(route.method, addressOf(route.path), body);
      expect(`${route.method} ${route.path}: ${response.status}`).toBe(
        `${route.method} ${route.path}: 404`,
      );
      expect(response.body.error.code).toMatch(/\.notFound$/);
    }
    expect((await mine.get(addressOf('/api/models/:id'))).body.name).toBe('heron');
    expect((await mine.get(addressOf('/api/envelopes/:id'))).body.name).toBe(boxEnvelope.name);
    expect((await mine.get(addressOf('/api/plans/:id'))).body.result.pieces).toHaveLength(2);
  });

  it('do not appear in lists', async () => {
    expect((await foreign.get('/api/models')).body).toEqual({ models: [] });
    expect((await foreign.get('/api/envelopes')).body).toEqual({ envelopes: [] });
    expect((await foreign.get('/api/plans')).body).toEqual({ plans: [] });
    const filtered = await foreign.get(`/api/plans?modelId=${ids['models']}`);
    expect(filtered.body).toEqual({ plans: [] });
  });

  it('cannot be planned with', async () => {
    const envelope = await foreign.send('post', '/api/envelopes', boxEnvelope);
    const theirModel = { modelId: ids['models'], envelopeId: envelope.body.id };
    const first = await foreign.send('post', '/api/plans', theirModel);
    expect([first.status, first.body.error.code]).toEqual([404, 'model.notFound']);
    const ownModel = await inspectedModel(product, foreign);
    const theirEnvelope = { modelId: ownModel.id, envelopeId: ids['envelopes'] };
    const second = await foreign.send('post', '/api/plans', theirEnvelope);
    expect([second.status, second.body.error.code]).toEqual([404, 'envelope.notFound']);
  });

  it('read the same as records that do not exist and texts that are no identifier', async () => {
    for (const id of [ids['models'], 'z'.repeat(20), 'x', '1%27%20OR%201=1', '..%2F..%2Fsecret']) {
      const response = await foreign.get(`/api/models/${id}`);
      expect([response.status, response.body.error.code]).toEqual([404, 'model.notFound']);
    }
  });
});
