import type { RowDataPacket } from 'mysql2/promise';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { modelResponse } from '../../shared/api/models.contract.js';
import { planListResponse, planResponse } from '../../shared/api/plans.contract.js';
import { jobSchemas } from '../../shared/jobs/job-map.js';
import { planWishes, usualWishes } from '../../shared/jobs/plan-wishes.js';
import type { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';
import {
  boxEnvelope,
  finishJob,
  inputOf,
  inspectedModel,
  inspectionResult,
  planResult,
  upload,
} from './support/worker-results.js';

let product: TestProduct;
let designer: ApiClient;
let lead: ApiClient;
let envelopeId: string;
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
  designer = await product.signIn('designer');
  lead = await product.signIn('shopLead');
  envelopeId = (await lead.send('post', '/api/envelopes', boxEnvelope)).body.id as string;
});
afterAll(() => product.stop());

const settle = () => product.product.settler.settleAll();
const makePlan = (modelId: string, seed = 1) =>
  designer.send('post', '/api/plans', { modelId, envelopeId, seed });

describe('an inspection', () => {
  it('is shown as running until its result is stored, then as done with the report', async () => {
    const model = await upload(designer);
    const jobId = model.revision.job.id;
    await finishJob(product, jobId, {
      state: 'done',
      output: await inspectionResult(product, jobId),
    });
    const between = modelResponse.parse((await designer.get(`/api/models/${model.id}`)).body);
    expect(between.revision.job).toMatchObject({ state: 'running', fraction: 1 });
    expect(between.revision.report).toBeNull();
    await settle();
    const after = modelResponse.parse((await designer.get(`/api/models/${model.id}`)).body);
    expect(after.revision).toMatchObject({
      job: { state: 'done', fraction: 1 },
      scale: { unit: 'mm' },
      scaleConfirmed: false,
      sizeMm: [300, 400, 500],
      hasThumbnail: true,
      hasView: true,
      viewTriangles: 12,
    });
    expect(after.revision.scaleReason).toMatch(/plausible as millimetres/);
    const picture = await designer.get(`/api/models/${model.id}/thumbnail`);
    expect(picture.headers['content-type']).toBe('image/png');
    expect(picture.body.toString()).toMatch(/^bytes of .*thumbnail\.png$/);
    expect(picture.headers['cache-control']).toBe('private, no-cache');
    expect(picture.headers['etag']).toBeTruthy();
  });

  it('guesses the unit, and scales lengths, area and volume by it', async () => {
    const model = await upload(designer);
    const jobId = model.revision.job.id;
    const small = { size: [3, 4, 5] as [number, number, number], volume: 60, area: 94 };
    const output = await inspectionResult(product, jobId, small);
    await finishJob(product, jobId, { state: 'done', output });
    await settle();
    const path = `/api/models/${model.id}`;
    const guessed = modelResponse.parse((await designer.get(path)).body).revision;
    expect(guessed.scale.unit).toBe('inch');
    expect(guessed.sizeMm).toEqual([3, 4, 5].map((side) => side * 25.4));
    expect(guessed.volumeMm3).toBeCloseTo(60 * 25.4 ** 3, 6);
    expect(guessed.areaMm2).toBeCloseTo(94 * 25.4 ** 2, 6);
    const scale = { unit: 'mm', factor: 1, target: { axis: 'z', lengthMm: 900 } };
    const stretched = await designer.send('patch', path, { scale });
    expect(modelResponse.parse(stretched.body).revision.sizeMm).toEqual([540, 720, 900]);
  });

  it('does not overrule a scale that a person chose meanwhile', async () => {
    const model = await upload(designer);
    const jobId = model.revision.job.id;
    const scale = { unit: 'other', factor: 2, target: null };
    await designer.send('patch', `/api/models/${model.id}`, { scale });
    const output = await inspectionResult(product, jobId);
    await finishJob(product, jobId, { state: 'done', output });
    await settle();
    const { revision } = modelResponse.parse((await designer.get(`/api/models/${model.id}`)).body);
    expect(revision).toMatchObject({ scale, scaleConfirmed: true, sizeMm: [600, 800, 1000] });
  });

  it('that refuses the file keeps the model with the reason', async () => {
    const model = await upload(designer);
    const error = { code: 'refused', message: '“heron.stl” ends in the middle.' } as const;
    await finishJob(product, model.revision.job.id, { state: 'failed', error });
    await settle();
    const { revision } = modelResponse.parse((await designer.get(`/api/models/${model.id}`)).body);
    expect(revision.job).toMatchObject({ state: 'failed', error });
    expect((await designer.get(`/api/models/${model.id}/view`)).status).toBe(404);
    const plan = await makePlan(model.id);
    expect(plan.status).toBe(409);
    expect(plan.body.error).toEqual({ code: 'model.notPlannable', message: error.message });
  });

  it('whose result breaks the contract fails in words, and later jobs still settle', async () => {
    const broken = await upload(designer);
    const good = await upload(designer);
    const output = { report: { surprise: true } };
    await finishJob(product, broken.revision.job.id, { state: 'done', output });
    const goodJob = good.revision.job.id;
    await finishJob(product, goodJob, {
      state: 'done',
      output: await inspectionResult(product, goodJob),
    });
    await settle();
    const first = modelResponse.parse((await designer.get(`/api/models/${broken.id}`)).body);
    expect(first.revision.job).toMatchObject({ state: 'failed', error: { code: 'failed' } });
    const second = modelResponse.parse((await designer.get(`/api/models/${good.id}`)).body);
    expect(second.revision.job.state).toBe('done');
  });
});

describe('ordering a plan', () => {
  it('queues a job with the scaled model and the envelope less its margin', async () => {
    const model = await inspectedModel(product, designer);
    const scale = { unit: 'inch', factor: 1, target: null };
    await designer.send('patch', `/api/models/${model.id}`, { name: 'Tall heron', scale });
    const response = await makePlan(model.id, 7);
    expect(response.status).toBe(201);
    const plan = planResponse.parse(response.body);
    expect(plan).toMatchObject({
      modelId: model.id,
      modelName: 'Tall heron',
      revisionNumber: 1,
      number: 1,
      seed: 7,
      createdBy: 'designer of a',
      envelope: boxEnvelope,
      job: { kind: 'plan.make', state: 'queued' },
      pieceCount: null,
      allPassed: null,
      result: null,
    });
    const input = jobSchemas['plan.make'].input.parse(await inputOf(product, plan.job.id));
    expect(input).toMatchObject({
      modelName: 'Tall heron',
      millimetresPerUnit: 25.4,
      seed: 7,
      space: { shape: 'rectangular', widthMm: 310, depthMm: 410, heightMm: 250 },
    });
    expect(input.solidKey).toMatch(/solid\.mesh$/);
    expect(input.outputPrefix).toContain(plan.id);
  });

  it('keeps the envelope as it was when it is edited or removed afterwards', async () => {
    const model = await inspectedModel(product, designer);
    const own = { ...boxEnvelope, name: 'Short-lived' };
    const envelope = await lead.send('post', '/api/envelopes', own);
    const plan = await designer.send('post', '/api/plans', {
      modelId: model.id,
      envelopeId: envelope.body.id,
    });
    await lead.send('put', `/api/envelopes/${envelope.body.id}`, { ...own, heightMm: 1 });
    await lead.send('delete', `/api/envelopes/${envelope.body.id}`);
    const stored = await designer.get(`/api/plans/${plan.body.id}`);
    expect(planResponse.parse(stored.body).envelope).toEqual(envelope.body);
  });

  it('numbers plans per model, gives no number twice, and lists the newest first', async () => {
    const model = await inspectedModel(product, designer);
    const other = await inspectedModel(product, designer);
    const at = await Promise.all([1, 2, 3, 4].map((seed) => makePlan(model.id, seed)));
    expect(at.map((answer) => answer.body.number).sort()).toEqual([1, 2, 3, 4]);
    expect((await makePlan(other.id)).body.number).toBe(1);
    const fourth = at.find((answer) => answer.body.number === 4);
    await designer.send('delete', `/api/plans/${fourth?.body.id}`);
    product.clock.advance(1_000);
    expect((await makePlan(model.id)).body.number).toBe(5);
    const list = planListResponse.parse(
      (await designer.get(`/api/plans?modelId=${model.id}`)).body,
    );
    expect(list.plans[0]?.number).toBe(5);
    expect(list.plans.map(({ number }) => number).sort()).toEqual([1, 2, 3, 5]);
    const listed = await designer.get(`/api/models/${model.id}`);
    expect(listed.body.planCount).toBe(4);
  });

  it('is refused before the inspection is through, and for a model that cannot be planned', async () => {
    const waiting = await upload(designer);
    const early = await makePlan(waiting.id);
    expect([early.status, early.body.error.code]).toEqual([409, 'model.notReady']);
    const open = await upload(designer);
    const refusal = 'The surface has 12 open edges.';
    const output = await inspectionResult(product, open.revision.job.id, {
      plannable: false,
      closed: false,
      refusal,
    });
    await finishJob(product, open.revision.job.id, {
      state: 'done',
      output: { ...output, files: { ...output.files, solid: null } },
    });
    await settle();
    const late = await makePlan(open.id);
    expect(late.status).toBe(409);
    expect(late.body.error).toEqual({ code: 'model.notPlannable', message: refusal });
  });

  it.each([
    ['a seed below zero', { seed: -1 }],
    ['a seed that is no whole number', { seed: 1.5 }],
    ['no model', { modelId: undefined }],
    ['an envelope that is no identifier', { envelopeId: 'large' }],
    ['neither envelope nor offer', { envelopeId: undefined }],
    ['a preference beyond its scale', { wishes: { preferences: { fewPieces: 2 } } }],
    [
      'a zone without a name',
      { wishes: { keepWhole: [{ shape: 'sphere', centre: [0, 0, 0], radiusMm: 5 }] } },
    ],
    ['a ninth envelope', { otherEnvelopeIds: Array(8).fill('a'.repeat(20)) }],
  ])('is refused with %s', async (_case, change) => {
    const body = { modelId: 'a'.repeat(20), envelopeId, seed: 1, ...change };
    const response = await designer.send('post', '/api/plans', body);
    expect([response.status, response.body.error.code]).toEqual([400, 'request.invalid']);
  });
});

describe('a finished plan', () => {
  it('is stored once, without the keys of its files', async () => {
    const model = await inspectedModel(product, designer);
    const plan = await makePlan(model.id);
    const jobId = plan.body.job.id as string;
    const output = await planResult(product, jobId);
    await finishJob(product, jobId, { state: 'done', output });
    const settled = await Promise.all([settle(), settle(), settle()]);
    expect([...settled].sort()).toEqual([0, 0, 1]);
    const answer = await designer.get(`/api/plans/${plan.body.id}`);
    const stored = planResponse.parse(answer.body);
    expect(stored).toMatchObject({ pieceCount: 2, allPassed: true, job: { state: 'done' } });
    const { files, ...shown } = output;
    expect(stored.result).toEqual({ ...shown, archiveBytes: 290_480 });
    expect(answer.text).not.toContain(files.view);
    expect(answer.text).not.toContain('workshops/');
    const view = await designer
      .request('get', `/api/plans/${plan.body.id}/view`)
      .responseType('blob');
    expect(view.headers['content-type']).toBe('model/gltf-binary');
    expect(view.body.toString()).toBe('glTF of the plan');
    expect(await settle()).toBe(0);
  });

  it('has no picture and no download before', async () => {
    const model = await inspectedModel(product, designer);
    const plan = await makePlan(model.id);
    for (const part of ['view', 'download']) {
      const response = await designer.get(`/api/plans/${plan.body.id}/${part}`);
      expect([response.status, response.body.error.code]).toEqual([409, 'plan.notReady']);
    }
  });

  it('hands out no file outside its own folder, whatever its worker says', async () => {
    const model = await inspectedModel(product, designer);
    for (const key of ['../../secret', 'workshops/other/plans/x/P01.stl', '/etc/passwd']) {
      const plan = await makePlan(model.id);
      const jobId = plan.body.job.id as string;
      const output = await planResult(product, jobId);
      output.files.archive.push({ name: 'x', key, bytes: 1 });
      await finishJob(product, jobId, { state: 'done', output });
      await settle();
      const stored = planResponse.parse((await designer.get(`/api/plans/${plan.body.id}`)).body);
      expect(stored).toMatchObject({ result: null, job: { state: 'failed' } });
    }
  });

  it('keeps its model from being deleted until it is deleted itself, with its files', async () => {
    const model = await inspectedModel(product, designer);
    const plan = await makePlan(model.id);
    const jobId = plan.body.job.id as string;
    const output = await planResult(product, jobId);
    await finishJob(product, jobId, { state: 'done', output });
    await settle();
    const refused = await designer.send('delete', `/api/models/${model.id}`);
    expect([refused.status, refused.body.error.code]).toEqual([409, 'model.inUse']);
    expect((await designer.send('delete', `/api/plans/${plan.body.id}`)).status).toBe(204);
    expect(await product.storage.sizeOf(output.files.view)).toBeNull();
    expect((await designer.send('delete', `/api/models/${model.id}`)).status).toBe(204);
    const [left] = await product.database.pool.query<RowDataPacket[]>(
      'SELECT id FROM jobs WHERE id IN (?, ?)',
      [jobId, model.revision.job.id],
    );
    expect(left).toEqual([]);
  });
});

describe('what is asked of a plan', () => {
  const wishes = planWishes.parse({
    preferences: { fewPieces: 0.4, littleSupport: 1, hiddenSeams: 0.2, sturdySeams: 0.2 },
    showDirections: [[0, -1, 0]],
    keepWhole: [{ shape: 'sphere', name: 'boss', centre: [1, 2, 3], radiusMm: 9 }],
    lockedCuts: [{ normal: [0, 0, 1], offset: 120 }],
  });

  async function finishedPlan(order: object) {
    const model = await inspectedModel(product, designer);
    const plan = await designer.send('post', '/api/plans', { modelId: model.id, ...order });
    expect(plan.status).toBe(201);
    const jobId = plan.body.job.id as string;
    const output = await planResult(product, jobId);
    output.objectives = { pieces: 2, supportMm3: 500, visibleSeamMm: 900, weakestSeamKpa: 3 };
    output.offers = [
      { bestAt: ['fewest pieces'], objectives: output.objectives, tree: output.recipe.tree },
      { bestAt: ['least support'], objectives: output.objectives, tree: output.recipe.tree },
    ];
    output.chosenOffer = 0;
    await finishJob(product, jobId, { state: 'done', output });
    await settle();
    return { model, id: plan.body.id as string, jobId, output };
  }

  it('goes to the worker and stays with the plan, several envelopes in their order', async () => {
    const tall = { ...boxEnvelope, name: 'Tall bed', heightMm: 900, marginMm: 5 };
    const other = (await lead.send('post', '/api/envelopes', tall)).body.id as string;
    const order = { envelopeId, otherEnvelopeIds: [other, envelopeId], wishes };
    const { id, jobId } = await finishedPlan(order);
    expect(await inputOf<'plan.make'>(product, jobId)).toMatchObject({
      space: { heightMm: 250 },
      otherSpaces: [{ shape: 'rectangular', heightMm: 900, widthMm: boxEnvelope.widthMm - 10 }],
      wishes,
      tree: null,
    });
    const stored = planResponse.parse((await designer.get(`/api/plans/${id}`)).body);
    expect(stored.otherEnvelopes.map((one) => one.name)).toEqual(['Tall bed']);
    expect(stored).toMatchObject({ wishes, fromPlan: null, objectives: { pieces: 2 } });
    const { plans } = planListResponse.parse((await designer.get('/api/plans')).body);
    expect(plans.find((plan) => plan.id === id)?.objectives).toEqual(stored.objectives);
  });

  it('is taken over, with the cuts, by a plan made from an offer', async () => {
    const { model, id, output } = await finishedPlan({ envelopeId, wishes, seed: 7 });
    const order = { modelId: model.id, fromOffer: { planId: id, offer: 1 } };
    const made = planResponse.parse((await designer.send('post', '/api/plans', order)).body);
    expect(made).toMatchObject({ seed: 7, wishes, fromPlan: 1, number: 2 });
    expect(made.envelope.id).toBe(envelopeId);
    const input = await inputOf<'plan.make'>(product, made.job.id);
    expect(input.tree).toEqual(output.offers[1]!.tree);
    expect(input.wishes).toEqual(wishes);
  });

  it('is refused for an offer that is not there, is not ready, or is of another scale or workshop', async () => {
    const { model, id } = await finishedPlan({ envelopeId });
    const from = (planId: string, offer: number, modelId: string = model.id) =>
      designer.send('post', '/api/plans', { modelId, fromOffer: { planId, offer } });
    const codeOf = async (answer: ReturnType<typeof from>) => {
      const { status, body } = await answer;
      return [status, body.error.code];
    };
    expect(await codeOf(from(id, 2))).toEqual([404, 'plan.offerNotFound']);
    expect(await codeOf(from('f'.repeat(20), 0))).toEqual([404, 'plan.notFound']);
    const waiting = (await makePlan(model.id)).body.id as string;
    expect(await codeOf(from(waiting, 0))).toEqual([409, 'plan.notReady']);
    const another = await inspectedModel(product, designer);
    expect(await codeOf(from(id, 0, another.id))).toEqual([409, 'plan.offerOutdated']);
    await product.database.pool.query('UPDATE plans SET millimetres_per_unit = 25.4 WHERE id = ?', [
      id,
    ]);
    expect(await codeOf(from(id, 0))).toEqual([409, 'plan.offerOutdated']);
  });

  it('is as usual for plans stored before anything could be asked', async () => {
    const { id } = await finishedPlan({ envelopeId });
    await product.database.pool.query(
      `UPDATE plans SET wishes = NULL, other_envelopes = NULL, objectives = NULL,
       result = JSON_REMOVE(result, '$.offers', '$.objectives', '$.chosenOffer', '$.bounds.gap',
       '$.recipe.wishes', '$.recipe.otherSpaces', '$.pieces[0].supportMm3', '$.seams[0].visibleMm')
       WHERE id = ?`,
      [id],
    );
    const old = planResponse.parse((await designer.get(`/api/plans/${id}`)).body);
    expect(old).toMatchObject({ wishes: usualWishes, otherEnvelopes: [], objectives: null });
    expect(old.result).toMatchObject({ offers: [], objectives: null, chosenOffer: null });
    expect(old.result!.pieces[0]!.supportMm3).toBe(0);
    expect(old.result!.recipe.wishes).toEqual(usualWishes);
  });
});

describe('taking the best so far', () => {
  it('asks the worker of a job that waits or runs, and leaves a finished one as it is', async () => {
    const model = await inspectedModel(product, designer);
    const plan = await makePlan(model.id);
    const jobId = plan.body.job.id as string;
    const { pool } = product.database;
    const asked = async () => {
      const [rows] = await pool.query<RowDataPacket[]>(
        'SELECT enough_requested AS enough, cancel_requested AS cancel FROM jobs WHERE id = ?',
        [jobId],
      );
      return rows[0];
    };
    expect(await asked()).toEqual({ enough: 0, cancel: 0 });
    const answer = await designer.send('post', `/api/jobs/${jobId}/enough`, {});
    expect([answer.status, answer.body.state]).toEqual([200, 'queued']);
    expect(await asked()).toEqual({ enough: 1, cancel: 0 });
    await finishJob(product, jobId, { state: 'done', output: await planResult(product, jobId) });
    await settle();
    expect((await designer.send('post', `/api/jobs/${jobId}/enough`, {})).body.state).toBe('done');
  });
});

describe('cancelling', () => {
  it('ends a job that waits at once, and it is settled like any other', async () => {
    const model = await inspectedModel(product, designer);
    const plan = await makePlan(model.id);
    const path = `/api/jobs/${plan.body.job.id}`;
    expect((await designer.send('post', `${path}/cancel`, {})).status).toBe(200);
    await settle();
    expect((await designer.get(path)).body).toMatchObject({ state: 'cancelled', error: null });
    const stored = planResponse.parse((await designer.get(`/api/plans/${plan.body.id}`)).body);
    expect(stored).toMatchObject({ result: null, job: { state: 'cancelled' } });
  });

  it('asks the worker of a running job, and leaves a finished one as it is', async () => {
    const model = await inspectedModel(product, designer);
    const plan = await makePlan(model.id);
    const jobId = plan.body.job.id as string;
    const { pool } = product.database;
    await pool.query(`UPDATE jobs SET state = 'running' WHERE id = ?`, [jobId]);
    const asked = await designer.send('post', `/api/jobs/${jobId}/cancel`, {});
    expect(asked.body.state).toBe('running');
    const [rows] = await pool.query('SELECT cancel_requested FROM jobs WHERE id = ?', [jobId]);
    expect(rows).toEqual([{ cancel_requested: 1 }]);
    await finishJob(product, jobId, { state: 'done', output: await planResult(product, jobId) });
    await settle();
    const late = await designer.send('post', `/api/jobs/${jobId}/cancel`, {});
    expect(late.body.state).toBe('done');
  });
});
