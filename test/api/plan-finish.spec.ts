import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { planResponse } from '../../shared/api/plans.contract.js';
import { jobSchemas } from '../../shared/jobs/job-map.js';
import { noJoints, usualJoints } from '../../shared/jobs/joint-plan.js';
import type { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';
import {
  boxEnvelope,
  finishJob,
  inputOf,
  inspectedModel,
  planResult,
} from './support/worker-results.js';

let product: TestProduct;
let designer: ApiClient;
let maker: ApiClient;
let modelId: string;
let envelopeId: string;
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
  designer = await product.signIn('designer');
  maker = await product.signIn('maker');
  const lead = await product.signIn('shopLead');
  envelopeId = (await lead.send('post', '/api/envelopes', boxEnvelope)).body.id as string;
  modelId = (await inspectedModel(product, designer)).id;
});
afterAll(() => product.stop());

/** A finished plan whose proof passed or failed. */
async function finishedPlan(passed: boolean): Promise<string> {
  const { body } = await designer.send('post', '/api/plans', { modelId, envelopeId });
  const output = await planResult(product, body.job.id);
  const proof = output.proof.map((row) => ({ ...row, passed }));
  await finishJob(product, body.job.id, { state: 'done', output: { ...output, proof } });
  await product.product.settler.settleAll();
  return body.id as string;
}

describe('a plan with a failed check', () => {
  it('is not downloaded before someone says that they want it, by name and with a reason', async () => {
    const id = await finishedPlan(false);
    const path = `/api/plans/${id}`;
    const refused = await maker.get(`${path}/download`);
    expect([
      refused.status,
      JSON.parse(refused.text ?? '{}').error?.code ?? refused.body.error.code,
    ]).toEqual([409, 'plan.proofFailed']);
    const empty = await designer.send('post', `${path}/release`, { reason: ' ' });
    expect(empty.status).toBe(400);
    expect((await maker.send('post', `${path}/release`, { reason: 'I say so' })).status).toBe(403);
    const released = await designer.send('post', `${path}/release`, { reason: 'Only a trial' });
    expect(planResponse.parse(released.body).release).toMatchObject({ reason: 'Only a trial' });
    expect(released.body.release.by).not.toBe('');
    expect((await maker.get(`${path}/download`)).status).toBe(200);
    // The first word stands.
    await designer.send('post', `${path}/release`, { reason: 'Another reason' });
    expect((await designer.get(path)).body.release.reason).toBe('Only a trial');
  });

  it('keeps no such word when every check passed', async () => {
    const id = await finishedPlan(true);
    const answer = await designer.send('post', `/api/plans/${id}/release`, {
      reason: 'To be sure',
    });
    expect(answer.body.release).toBeNull();
    expect((await maker.get(`/api/plans/${id}/download`)).status).toBe(200);
  });
});

describe('a plan made from a plan', () => {
  it('has its cuts, envelopes and material, with the joints and orientations asked for', async () => {
    const planId = await finishedPlan(true);
    const joints = { ...usualJoints, edgeBevelMm: 0 };
    const orientations = [{ piece: 'P01', down: [0, 0, 1] }];
    const made = await designer.send('post', '/api/plans', {
      modelId,
      fromPlan: { planId, joints, orientations },
    });
    expect(made.status).toBe(201);
    const input = jobSchemas['plan.make'].input.parse(await inputOf(product, made.body.job.id));
    const before = (await designer.get(`/api/plans/${planId}`)).body.result.recipe;
    expect(input).toMatchObject({ joints, orientations, tree: before.tree, seed: before.seed });
    expect(input.material).toEqual(before.material);
    expect(made.body.fromPlan).toBeGreaterThan(0);
  });

  it('keeps what it is not asked to change, and refuses directions that are none', async () => {
    const planId = await finishedPlan(true);
    const same = await designer.send('post', '/api/plans', { modelId, fromPlan: { planId } });
    const input = jobSchemas['plan.make'].input.parse(await inputOf(product, same.body.job.id));
    expect(input.joints).toEqual(usualJoints);
    const bent = { planId, orientations: [{ piece: 'P01', down: [0, 0, 2] }] };
    const refused = await designer.send('post', '/api/plans', { modelId, fromPlan: bent });
    expect([refused.status, refused.body.error.code]).toEqual([400, 'request.invalid']);
  });

  it('is without joints when that is asked for from the start', async () => {
    const plan = await designer.send('post', '/api/plans', {
      modelId,
      envelopeId,
      joints: noJoints,
    });
    const input = jobSchemas['plan.make'].input.parse(await inputOf(product, plan.body.job.id));
    expect(input.joints).toEqual(noJoints);
  });
});
