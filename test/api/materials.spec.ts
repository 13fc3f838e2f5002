import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { materialListResponse, materialResponse } from '../../shared/api/materials.contract.js';
import { jobSchemas } from '../../shared/jobs/job-map.js';
import { usualMaterial } from '../../shared/jobs/material-profile.js';
import type { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';
import { boxEnvelope, inputOf, inspectedModel } from './support/worker-results.js';

let product: TestProduct;
let lead: ApiClient;
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
  lead = await product.signIn('shopLead');
});
afterAll(() => product.stop());

const blue = { ...usualMaterial, name: 'PLA, blue', densityGPerCm3: 1.25, overhangDegrees: 50 };

describe('materials', () => {
  it('are made, read, changed, listed by name and removed', async () => {
    const made = await lead.send('post', '/api/materials', { profile: blue });
    expect(made.status).toBe(201);
    const material = materialResponse.parse(made.body);
    expect(material).toMatchObject({ profile: blue, version: 1 });
    const path = `/api/materials/${material.id}`;
    expect((await lead.get(path)).body).toEqual(made.body);
    const changed = await lead.send('put', path, {
      profile: { ...blue, pricePerKg: 19 },
      version: 1,
    });
    expect(changed.body).toMatchObject({ version: 2, profile: { pricePerKg: 19 } });
    const list = materialListResponse.parse((await lead.get('/api/materials')).body);
    expect(list.materials.map(({ profile }) => profile.name)).toEqual(['PLA, blue']);
    expect((await lead.send('delete', path)).status).toBe(204);
    expect((await lead.get(path)).status).toBe(404);
    expect((await lead.send('put', path, { profile: blue })).status).toBe(404);
  });

  it('do not write over a change that was made meanwhile', async () => {
    const { body } = await lead.send('post', '/api/materials', {
      profile: { ...blue, name: 'Shared' },
    });
    const path = `/api/materials/${body.id}`;
    const profile = { ...blue, name: 'Shared', pricePerKg: 20 };
    const both = await Promise.all(
      [20, 21].map((pricePerKg) =>
        lead.send('put', path, { profile: { ...profile, pricePerKg }, version: 1 }),
      ),
    );
    expect(both.map(({ status }) => status).sort()).toEqual([200, 409]);
    expect(both.find(({ status }) => status === 409)?.body.error.code).toBe('material.changed');
  });

  it('have names of their own and numbers within limits', async () => {
    await lead.send('post', '/api/materials', { profile: { ...blue, name: 'Twin' } });
    const twin = await lead.send('post', '/api/materials', {
      profile: { ...blue, name: ' twin ' },
    });
    expect([twin.status, twin.body.error.code]).toEqual([409, 'material.nameTaken']);
    const heavy = await lead.send('post', '/api/materials', {
      profile: { ...blue, name: 'Lead', densityGPerCm3: 11.3 },
    });
    expect([heavy.status, heavy.body.error.code]).toEqual([400, 'request.invalid']);
    const crossed = await lead.send('post', '/api/materials', {
      profile: { ...blue, name: 'Crossed', flowMm3PerS: [9, 3] },
    });
    expect(crossed.body.error.details[0].path).toBe('profile.flowMm3PerS');
  });

  it('go into a plan as they are, with their overhang', async () => {
    const { body } = await lead.send('post', '/api/materials', {
      profile: { ...blue, name: 'For a plan' },
    });
    const model = await inspectedModel(product, lead);
    const envelope = await lead.send('post', '/api/envelopes', boxEnvelope);
    const order = { modelId: model.id, envelopeId: envelope.body.id, materialId: body.id };
    const plan = await lead.send('post', '/api/plans', order);
    expect(plan.status).toBe(201);
    const input = jobSchemas['plan.make'].input.parse(await inputOf(product, plan.body.job.id));
    expect(input.material).toEqual({ ...blue, name: 'For a plan' });
    expect(input.wishes.overhangDegrees).toBe(50);
    const gone = await lead.send('post', '/api/plans', { ...order, materialId: 'a'.repeat(20) });
    expect([gone.status, gone.body.error.code]).toEqual([404, 'material.notFound']);
  });
});
