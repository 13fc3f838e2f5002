import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { Readable } from 'node:stream';
import type { ReadableStream as WebStream } from 'node:stream/web';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { jobResponse } from '../../shared/api/jobs.contract.js';
import type { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';
import { finishJob, inspectionResult, upload } from './support/worker-results.js';

let product: TestProduct;
let designer: ApiClient;
let server: Server;
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'));
  designer = await product.signIn('designer');
  server = createServer(product.app).listen(0, '127.0.0.1');
  await new Promise((resolve) => server.once('listening', resolve));
  product.product.monitor.start();
});
afterAll(async () => {
  server.closeAllConnections();
  server.close();
  await product.stop();
});

/** Follows a job as a browser does. `events` grows while the stream is open. */
async function follow(jobId: string, client: ApiClient) {
  const { port } = server.address() as AddressInfo;
  const abort = new AbortController();
  const response = await fetch(`http://127.0.0.1:${port}/api/jobs/${jobId}/events`, {
    headers: { Cookie: client.cookieHeader() },
    signal: abort.signal,
  });
  const events: { name: string; job: ReturnType<typeof jobResponse.parse> }[] = [];
  const ended = (async () => {
    let text = '';
    const decoder = new TextDecoder();
    for await (const chunk of Readable.fromWeb(response.body as WebStream)) {
      text += decoder.decode(chunk as Uint8Array, { stream: true });
      for (let end = text.indexOf('\n\n'); end >= 0; end = text.indexOf('\n\n')) {
        const [, name, data] = /^event: (\w+)\ndata: (.*)$/m.exec(text.slice(0, end)) ?? [];
        if (name && data) events.push({ name, job: jobResponse.parse(JSON.parse(data)) });
        text = text.slice(end + 2);
      }
    }
  })().catch((error: unknown) => {
    if (!abort.signal.aborted) throw error;
  });
  return { response, events, ended, abort };
}

const listeners = () => product.product.monitor.listenerCount();

describe('the events of a job', () => {
  it('tell each change, end after the final one, and that comes only with the stored result', async () => {
    const model = await upload(designer);
    const jobId = model.revision.job.id;
    const { response, events, ended } = await follow(jobId, designer);
    expect(response.headers.get('content-type')).toContain('text/event-stream');
    await expect.poll(() => events.at(-1)?.job.state).toBe('queued');
    const { pool } = product.database;
    await pool.query(
      `UPDATE jobs SET state = 'running', stage = 'Welding', fraction = 0.4
      WHERE id = ?`,
      [jobId],
    );
    await expect.poll(() => events.at(-1)?.job).toMatchObject({ stage: 'Welding', fraction: 0.4 });
    const output = await inspectionResult(product, jobId);
    await finishJob(product, jobId, { state: 'done', output });
    await ended;
    expect(events.at(-1)?.job).toMatchObject({ id: jobId, state: 'done', fraction: 1 });
    expect(events.every((event) => event.name === 'job')).toBe(true);
    const stored = await designer.get(`/api/models/${model.id}`);
    expect(stored.body.revision.report.triangles).toBe(12);
    expect(listeners()).toBe(0);
  });

  it('of a job that is over come as one event', async () => {
    const model = await upload(designer);
    const jobId = model.revision.job.id;
    const error = { code: 'refused', message: 'No facets.' } as const;
    await finishJob(product, jobId, { state: 'failed', error });
    await product.product.settler.settleAll();
    const { events, ended } = await follow(jobId, designer);
    await ended;
    expect(events.map((event) => event.job)).toMatchObject([{ state: 'failed', error }]);
  });

  it('reach several followers, and one who leaves is forgotten', async () => {
    const model = await upload(designer);
    const jobId = model.revision.job.id;
    const stays = await follow(jobId, designer);
    const leaves = await follow(jobId, await product.signIn('maker'));
    await expect.poll(() => leaves.events.length).toBeGreaterThan(0);
    expect(listeners()).toBe(2);
    leaves.abort.abort();
    await leaves.ended;
    await expect.poll(listeners).toBe(1);
    await designer.send('post', `/api/jobs/${jobId}/cancel`, {});
    await stays.ended;
    expect(stays.events.at(-1)?.job.state).toBe('cancelled');
    expect(listeners()).toBe(0);
  });

  it('end when the record is deleted', async () => {
    const model = await upload(designer);
    const { events, ended } = await follow(model.revision.job.id, designer);
    await expect.poll(() => events.length).toBeGreaterThan(0);
    await designer.send('delete', `/api/models/${model.id}`);
    await ended;
    expect(listeners()).toBe(0);
  });

  it('are refused as JSON to those who may not see the job', async () => {
    const model = await upload(designer);
    const stranger = await product.signIn('owner', 'b');
    const response = await stranger.get(`/api/jobs/${model.revision.job.id}/events`);
    expect([response.status, response.body.error.code]).toEqual([404, 'job.notFound']);
    expect(listeners()).toBe(0);
  });
});
