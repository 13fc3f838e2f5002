import { existsSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { modelResponse, revisionListResponse } from '../../shared/api/models.contract.js';
import { noChoices } from '../../shared/jobs/mending-choices.js';
import type { JobMap } from '../../shared/jobs/job-map.js';
import type { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';
import {
  boxEnvelope,
  finishJob,
  inputOf,
  inspectedModel,
  inspectionResult,
  stlBytes,
  upload,
} from './support/worker-results.js';

type Report = JobMap['model.inspect']['output']['report'];

let product: TestProduct;
let designer: ApiClient;
let maker: ApiClient;
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
  designer = await product.signIn('designer');
  maker = await product.signIn('maker');
});
afterAll(() => product.stop());

async function getModel(id: string) {
  return modelResponse.parse((await designer.get(`/api/models/${id}`)).body);
}

/** Ends the inspection of a model's newest revision with such a report. */
async function inspect(id: string, changes: Partial<Report> = {}) {
  const jobId = (await getModel(id)).revision.job.id;
  const output = await inspectionResult(product, jobId, changes);
  await finishJob(product, jobId, { state: 'done', output });
  await product.product.settler.settleAll();
  return { output, model: await getModel(id) };
}

const uploadRevision = (id: string, fileName = 'heron-2.stl') =>
  designer
    .request('post', `/api/models/${id}/revisions`)
    .attach('file', stlBytes(9), { filename: fileName });
const mend = (id: string, choices: object) =>
  designer.send('post', `/api/models/${id}/mending`, { choices });
const pathOf = (key: string | null) => product.storage.pathOf(key!);
const accepted = { kind: 'accept', sentence: 'Mending made the volume 3 % larger.' } as const;

describe('a re-uploaded model', () => {
  it('gets a new revision with an inspection of its own; the list compares them', async () => {
    const { id } = await inspectedModel(product, designer);
    const response = await uploadRevision(id);
    expect(response.status).toBe(201);
    const fresh = modelResponse.parse(response.body);
    expect(fresh.revision).toMatchObject({ number: 2, fileName: 'heron-2.stl', report: null });
    await inspect(id, { triangles: 24, volume: 1000, size: [300, 400, 600] });
    const { revisions } = revisionListResponse.parse(
      (await maker.get(`/api/models/${id}/revisions`)).body,
    );
    expect(revisions.map((one) => [one.number, one.triangles, one.sizeMm])).toEqual([
      [2, 24, [300, 400, 600]],
      [1, 12, [300, 400, 500]],
    ]);
    expect(revisions[0]).toMatchObject({ createdBy: 'designer of a', volumeMm3: 1000 });
  });

  it('takes a chosen scale over, unless the new file states its unit', async () => {
    const { id } = await inspectedModel(product, designer);
    const scale = { unit: 'inch', factor: 25.4, target: null };
    await designer.send('patch', `/api/models/${id}`, { scale });
    await uploadRevision(id);
    const { model } = await inspect(id);
    expect(model.revision).toMatchObject({ scale, scaleReason: 'Taken over from revision 1.' });
    await uploadRevision(id, 'heron.3mf');
    const stated = (await inspect(id, { fileUnit: { name: 'centimeter', millimetres: 10 } })).model;
    expect(stated.revision).toMatchObject({
      number: 3,
      scale: { unit: 'other', factor: 10 },
      scaleReason: 'The file states its unit: centimeter.',
      millimetresPerUnit: 10,
    });
  });

  it('gets two numbers when two files come at once', async () => {
    const { id } = await inspectedModel(product, designer);
    const answers = await Promise.all([uploadRevision(id), uploadRevision(id), uploadRevision(id)]);
    expect(answers.map((answer) => answer.status)).toEqual([201, 201, 201]);
    const { revisions } = (await designer.get(`/api/models/${id}/revisions`)).body;
    expect(revisions.map((one: { number: number }) => one.number)).toEqual([4, 3, 2, 1]);
  });

  it('keeps earlier plans with their revision, and goes as a whole', async () => {
    const { id } = await inspectedModel(product, designer);
    const lead = await product.signIn('shopLead');
    const envelope = await lead.send('post', '/api/envelopes', {
      ...boxEnvelope,
      name: 'For revisions',
    });
    const order = { modelId: id, envelopeId: envelope.body.id };
    const plan = await designer.send('post', '/api/plans', order);
    await uploadRevision(id);
    await inspect(id);
    expect((await designer.get(`/api/plans/${plan.body.id}`)).body.revisionNumber).toBe(1);
    const { revisions } = (await designer.get(`/api/models/${id}/revisions`)).body;
    expect(revisions.map((one: { planCount: number }) => one.planCount)).toEqual([0, 1]);
    await designer.send('delete', `/api/plans/${plan.body.id}`);
    expect((await designer.send('delete', `/api/models/${id}`)).status).toBe(204);
    expect(existsSync(pathOf(`workshops/${product.workshopIds.a}/models/${id}`))).toBe(false);
  });

  it('refuses what is no model and leaves nothing of it', async () => {
    const { id } = await inspectedModel(product, designer);
    const response = await designer
      .request('post', `/api/models/${id}/revisions`)
      .attach('file', Buffer.from('%PDF-1.7 and more'), { filename: 'a.stl' });
    expect(response.status).toBe(415);
    expect(response.body.error.message).toBe('This is a PDF. Seamwright reads STL, OBJ and 3MF.');
    expect((await getModel(id)).revision.number).toBe(1);
  });
});

describe('other choices', () => {
  it('inspect again into a folder of their own, while the old result stands, then replace it', async () => {
    const { id } = await upload(designer);
    const before = await inspect(id, { plannable: false });
    const choices = { ...noChoices, fillHolesUpTo: 12.5 };
    const response = await mend(id, { fillHolesUpTo: 12.5 });
    expect(response.status).toBe(200);
    const waiting = modelResponse.parse(response.body);
    expect(waiting.revision).toMatchObject({ choices, isPlannable: false, hasView: true });
    expect(waiting.revision.job.state).toBe('queued');
    expect(waiting.revision.report).toEqual(before.output.report);
    const input = await inputOf<'model.inspect'>(product, waiting.revision.job.id);
    expect(input.choices).toEqual(choices);
    expect(input.outputPrefix).toMatch(/\/inspection-[a-z0-9]+$/);

    const after = await inspect(id, { choices });
    expect(after.model.revision).toMatchObject({ isPlannable: true, choices });
    expect(existsSync(pathOf(before.output.files.solid))).toBe(false);
    expect(existsSync(pathOf(after.output.files.solid))).toBe(true);
    expect(existsSync(pathOf(input.sourceKey))).toBe(true);
    expect((await designer.get(`/api/models/${id}/view`)).status).toBe(200);
  });

  it('wait for the inspection that runs, and are refused once there is a plan', async () => {
    const { id } = await upload(designer);
    const early = await mend(id, {});
    expect([early.status, early.body.error.code]).toEqual([409, 'model.notReady']);
    const ready = await inspectedModel(product, designer);
    const envelopes = (await designer.get('/api/envelopes')).body.envelopes;
    const order = { modelId: ready.id, envelopeId: envelopes[0].id };
    expect((await designer.send('post', '/api/plans', order)).status).toBe(201);
    const late = await mend(ready.id, { remeshCells: 200 });
    expect([late.status, late.body.error.code]).toEqual([409, 'model.inUse']);
    expect(late.body.error.message).toMatch(/has a plan\. Upload the file as a new revision/);
  });

  it('are dropped when their inspection fails or is cancelled', async () => {
    for (const end of [
      { state: 'failed', error: { code: 'refused', message: 'Too fine.' } } as const,
      { state: 'cancelled' } as const,
    ]) {
      const { id } = await inspectedModel(product, designer);
      const { revision } = modelResponse.parse((await mend(id, { remeshCells: 800 })).body);
      await finishJob(product, revision.job.id, end);
      await product.product.settler.settleAll();
      const model = await getModel(id);
      expect(model.revision).toMatchObject({ choices: noChoices, isPlannable: true });
      expect(model.revision.job.state).toBe(end.state);
    }
  });

  it.each([[{ remeshCells: 10 }], [{ fillHolesUpTo: -1 }], [{ parts: [] }], [{ parts: [-1] }]])(
    'are refused when they make no sense: %j',
    async (choices) => {
      const { id } = await inspectedModel(product, designer);
      expect((await mend(id, choices)).status).toBe(400);
    },
  );
});

describe('a solid that differs from its file', () => {
  it('is planned only after someone has taken it', async () => {
    const { id } = await upload(designer);
    const { model } = await inspect(id, { plannable: false, asks: [accepted] });
    expect(model.revision.isPlannable).toBe(false);
    const envelopes = (await designer.get('/api/envelopes')).body.envelopes;
    const order = { modelId: id, envelopeId: envelopes[0].id };
    const early = await designer.send('post', '/api/plans', order);
    expect([early.status, early.body.error.message]).toEqual([409, accepted.sentence]);
    expect((await maker.send('patch', `/api/models/${id}`, { accept: true })).status).toBe(403);
    const taken = await designer.send('patch', `/api/models/${id}`, { accept: true });
    expect(taken.body.revision).toMatchObject({ isAccepted: true, isPlannable: true });
    expect((await designer.send('post', '/api/plans', order)).status).toBe(201);
  });

  it('cannot be taken when there is nothing to take', async () => {
    const sound = await inspectedModel(product, designer);
    const open = await upload(designer);
    await inspect(open.id, {
      plannable: false,
      asks: [{ kind: 'fill-holes', sentence: 'Holes.', count: 1, longest: 9 }],
    });
    for (const { id } of [sound, open]) {
      const response = await designer.send('patch', `/api/models/${id}`, { accept: true });
      expect([response.status, response.body.error.code]).toEqual([409, 'model.notPlannable']);
    }
  });

  it('has to be taken again after other choices', async () => {
    const { id } = await upload(designer);
    await inspect(id, { plannable: false, asks: [accepted] });
    await designer.send('patch', `/api/models/${id}`, { accept: true });
    await mend(id, { remeshCells: 300 });
    const { model } = await inspect(id, { plannable: false, asks: [accepted] });
    expect(model.revision).toMatchObject({ isAccepted: false, isPlannable: false });
  });
});

describe('the unit of a file that states none', () => {
  it('is the one the workshop chose last, where that is plausible, else a guess', async () => {
    const lead = await product.signIn('shopLead', 'b');
    const add = async (size: [number, number, number]) => {
      const { id } = await upload(lead);
      const jobId = (await lead.get(`/api/models/${id}`)).body.revision.job.id;
      const output = await inspectionResult(product, jobId, { size });
      await finishJob(product, jobId, { state: 'done', output });
      await product.product.settler.settleAll();
      return modelResponse.parse((await lead.get(`/api/models/${id}`)).body);
    };
    const first = await add([20, 30, 45]);
    expect(first.revision.scale.unit).toBe('mm');
    await lead.send('patch', `/api/models/${first.id}`, {
      scale: { unit: 'inch', factor: 25.4, target: { axis: 'z', lengthMm: 900 } },
    });
    const second = await add([20, 30, 50]);
    expect(second.revision).toMatchObject({
      scale: { unit: 'inch', target: null },
      scaleReason: 'Your workshop last chose inches.',
      scaleConfirmed: false,
    });
    // 50 000 inches are no model.
    const third = await add([20_000, 30, 50_000]);
    expect(third.revision.scaleReason).toMatch(/plausible as millimetres/);
  });
});
