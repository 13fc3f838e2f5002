import { createServer, get, type Server } from 'node:http';
import { rm } from 'node:fs/promises';
import type { AddressInfo } from 'node:net';
import { unzipSync } from 'fflate';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { readFile } from 'node:fs/promises';
import type { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';
import { boxEnvelope, finishJob, inspectedModel, planResult } from './support/worker-results.js';

let product: TestProduct;
let designer: ApiClient;
let server: Server;
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
  designer = await product.signIn('designer');
  server = createServer(product.app).listen(0, '127.0.0.1');
  await new Promise((resolve) => server.once('listening', resolve));
  const lead = await product.signIn('shopLead');
  await lead.send('post', '/api/envelopes', boxEnvelope);
});
afterAll(async () => {
  server.closeAllConnections();
  server.close();
  await product.stop();
});

async function finishedPlan(modelName: string) {
  const model = await inspectedModel(product, designer);
  await designer.send('patch', `/api/models/${model.id}`, { name: modelName });
  const { envelopes } = (await designer.get('/api/envelopes')).body;
  const order = { modelId: model.id, envelopeId: envelopes[0].id };
  const plan = await designer.send('post', '/api/plans', order);
  const jobId = plan.body.job.id as string;
  const output = await planResult(product, jobId);
  await finishJob(product, jobId, { state: 'done', output });
  await product.product.settler.settleAll();
  return { path: `/api/plans/${plan.body.id}/download`, files: output.files };
}

const download = (path: string) =>
  designer
    .request('get', path)
    .buffer(true)
    .parse((response, done) => {
      const chunks: Buffer[] = [];
      response.on('data', (chunk: Buffer) => chunks.push(chunk));
      response.on('end', () => done(null, Buffer.concat(chunks)));
    });

describe('the download of a plan', () => {
  it('is a ZIP of exactly the stored bytes, the same every time', async () => {
    const { path, files } = await finishedPlan('Heron');
    const response = await download(path);
    expect(response.status).toBe(200);
    expect(response.headers['content-type']).toBe('application/zip');
    expect(response.headers['content-disposition']).toBe(
      `attachment; filename="Heron plan 1.zip"; filename*=UTF-8''Heron%20plan%201.zip`,
    );
    const entries = unzipSync(response.body as Buffer);
    expect(Object.keys(entries)).toEqual(files.archive.map((file) => file.name));
    for (const file of files.archive) {
      const stored = await readFile(product.storage.pathOf(file.key));
      expect(Buffer.from(entries[file.name] ?? []).equals(stored)).toBe(true);
    }
    expect(((await download(path)).body as Buffer).equals(response.body as Buffer)).toBe(true);
  });

  it.each([
    'Bell “Wrecked” ⌀ 5/6',
    '../../..',
    'a"; filename="evil.exe',
    '鶴 🔔',
    "it's 50 % \\ x",
  ])('has a safe file name for a model named %j', async (name) => {
    const { path } = await finishedPlan(name);
    const header = (await download(path)).headers['content-disposition'] ?? '';
    expect(header).toMatch(/^attachment; filename="[^"/\\]+"; filename\*=UTF-8''[\w.~!$&+%-]+$/);
  });

  it('is refused as JSON, before the first byte, when a file is gone', async () => {
    const { path, files } = await finishedPlan('Heron');
    await rm(product.storage.pathOf(files.archive[1]?.key ?? ''));
    const response = await designer.get(path);
    expect([response.status, response.body.error.code]).toEqual([500, 'server.failed']);
    expect(response.text).not.toContain('workshops/');
  });

  it('that is broken off leaves the server well', async () => {
    const { path } = await finishedPlan('Heron');
    const { port } = server.address() as AddressInfo;
    for (let round = 0; round < 5; round++) {
      await new Promise<void>((resolve, reject) => {
        const options = {
          port,
          path,
          host: '127.0.0.1',
          headers: { Cookie: designer.cookieHeader() },
        };
        const broken = get(options, (response) => {
          response.once('data', () => broken.destroy());
          response.once('close', resolve);
          response.on('error', () => undefined);
        });
        broken.on('error', (error) => (broken.destroyed ? resolve() : reject(error)));
      });
    }
    const whole = await download(path);
    expect(Object.keys(unzipSync(whole.body as Buffer))).toHaveLength(4);
  });
});
