import { createServer, request as httpRequest, type Server } from 'node:http';
import { readdir } from 'node:fs/promises';
import type { AddressInfo } from 'node:net';
import { join } from 'node:path';
import type { RowDataPacket } from 'mysql2/promise';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { modelResponse } from '../../shared/api/models.contract.js';
import type { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';
import { finishJob, inspectionResult, stlBytes, upload } from './support/worker-results.js';

const MAX_BYTES = 100_000;
let product: TestProduct;
let designer: ApiClient;
let server: Server;
beforeAll(async () => {
  product = await startTestProduct(inject('mariadbUrl'), { maxModelBytes: MAX_BYTES });
  designer = await product.signIn('designer');
  server = createServer(product.app).listen(0, '127.0.0.1');
  await new Promise((resolve) => server.once('listening', resolve));
});
afterAll(async () => {
  server.closeAllConnections();
  server.close();
  await product.stop();
});

async function filesUnder(folder: string): Promise<string[]> {
  const entries = await readdir(folder, { recursive: true, withFileTypes: true });
  return entries.filter((entry) => entry.isFile()).map((entry) => entry.name);
}

/** What a refused upload must leave as it was: files, rows and jobs. */
async function everything() {
  const counts = await product.database.pool.query<RowDataPacket[]>(
    `SELECT (SELECT COUNT(*) FROM models) AS models, (SELECT COUNT(*) FROM revisions) AS revisions,
            (SELECT COUNT(*) FROM jobs) AS jobs`,
  );
  return { files: await filesUnder(product.storage.folder), rows: counts[0] };
}

const attach = (bytes: Buffer, filename: string) =>
  designer.request('post', '/api/models').attach('file', bytes, { filename });

describe('an upload', () => {
  it('becomes a model with a queued inspection; its file lies in the storage', async () => {
    const response = await attach(stlBytes(10), 'Großer Reiher ⌀.stl');
    expect(response.status).toBe(201);
    const model = modelResponse.parse(response.body);
    expect(model).toMatchObject({ name: 'Großer Reiher ⌀', createdBy: 'designer of a' });
    expect(model.revision).toMatchObject({
      fileName: 'Großer Reiher ⌀.stl',
      fileBytes: 584,
      report: null,
      scaleConfirmed: false,
      hasThumbnail: false,
      job: { kind: 'model.inspect', state: 'queued', fraction: 0 },
    });
    const [jobs] = await product.database.pool.query<RowDataPacket[]>(
      'SELECT input, subject_id FROM jobs WHERE id = ?',
      [model.revision.job.id],
    );
    const input = jobs[0]?.['input'] as { sourceKey: string; fileName: string };
    expect(input.fileName).toBe('Großer Reiher ⌀.stl');
    expect(jobs[0]?.['subject_id']).toBe(model.revision.id);
    expect(await product.storage.sizeOf(input.sourceKey)).toBe(584);
    expect(await readdir(product.storage.incomingFolder)).toEqual([]);
  });

  it('may bring a name of its own', async () => {
    const response = await designer
      .request('post', '/api/models')
      .field('name', '  Bell for act two ')
      .attach('file', stlBytes(), { filename: 'x.stl' });
    expect(response.body.name).toBe('Bell for act two');
  });

  it.each([
    ['../../../etc/passwd.stl', 'passwd.stl'],
    ['..\\..\\windows\\bell.stl', 'bell.stl'],
    ['a%0Ab\u202Ec\u0085.stl', 'abc.stl'],
    ['....', 'model.stl'],
  ])('named %j is stored under a key of ours and shown as %j', async (given, shown) => {
    const response = await attach(stlBytes(), given);
    expect(response.status).toBe(201);
    expect(response.body.revision.fileName).toBe(shown);
    const outside = await readdir(join(product.storage.folder, '..'));
    expect(outside).toEqual(['storage']);
  });

  it('with a name of 300 characters is taken with a shortened one', async () => {
    const response = await attach(stlBytes(), `${'n'.repeat(296)}.stl`);
    expect(response.status).toBe(201);
    expect([...response.body.revision.fileName]).toHaveLength(200);
    expect(response.body.name).toHaveLength(120);
  });
});

describe('a refused upload leaves nothing behind', () => {
  it.each([
    ['an empty file', Buffer.alloc(0), 400, 'request.invalid', /empty/],
    [
      'a picture',
      Buffer.from('\x89PNG\r\n\x1a\n', 'latin1'),
      415,
      'request.invalid',
      /PNG picture/,
    ],
    ['a letter', Buffer.from('Dear maker, here is'), 415, 'request.invalid', /begins with “Dear/],
    ['three bytes', Buffer.from([0, 1, 2]), 415, 'request.invalid', /its 3 bytes/],
    ['too many bytes', Buffer.alloc(MAX_BYTES + 1), 413, 'request.tooLarge', /0\.0954 MB/],
    ['far too many bytes', Buffer.alloc(3 * MAX_BYTES), 413, 'request.tooLarge', /MB/],
  ] as const)('%s', async (_case, bytes, status, code, words) => {
    const before = await everything();
    const response = await attach(bytes, 'model.stl');
    expect([response.status, response.body.error.code]).toEqual([status, code]);
    expect(response.body.error.message).toMatch(words);
    expect(await everything()).toEqual(before);
  });

  it('a form without a file, with two files, with a wrong field, or with a name too long', async () => {
    const before = await everything();
    const post = () => designer.request('post', '/api/models');
    const file = { filename: 'x.stl' };
    const answers = [
      await post().field('name', 'no file'),
      await post().attach('file', stlBytes(), file).attach('file', stlBytes(), file),
      await post().attach('model', stlBytes(), file),
      await post().field('name', 'x'.repeat(121)).attach('file', stlBytes(), file),
      await post().set('Content-Type', 'multipart/form-data').send('no boundary'),
      await post()
        .set('Content-Type', 'multipart/form-data; boundary=x')
        .send('--x\r\nContent-Disposition: form-data; name="file"; filename="a.stl"\r\n\r\nabc'),
    ];
    expect(answers.map((answer) => [answer.status, answer.body.error.code])).toEqual(
      answers.map(() => [400, 'request.invalid']),
    );
    expect(await everything()).toEqual(before);
  });

  it('a file name with control characters, which makes the form unreadable', async () => {
    const before = await everything();
    const response = await attach(stlBytes(), 'a\u0007b.stl');
    expect(response.status).toBe(400);
    expect(response.body.error.message).toMatch(/Rename it without control characters/);
    expect(await everything()).toEqual(before);
  });

  it('something that is no form at all', async () => {
    const response = await designer.send('post', '/api/models', { file: 'x' });
    expect([response.status, response.body.error.code]).toEqual([415, 'request.invalid']);
  });

  it('a person who may not upload, before a byte is stored', async () => {
    const maker = await product.signIn('maker');
    const before = await everything();
    const response = await maker
      .request('post', '/api/models')
      .attach('file', stlBytes(), { filename: 'x.stl' });
    expect([response.status, response.body.error.code]).toEqual([403, 'session.forbidden']);
    expect(await everything()).toEqual(before);
  });

  it('a connection that is broken off in the middle', async () => {
    const before = await everything();
    const { port } = server.address() as AddressInfo;
    const broken = httpRequest({
      port,
      host: '127.0.0.1',
      method: 'POST',
      path: '/api/models',
      headers: {
        Cookie: designer.cookieHeader(),
        'X-XSRF-TOKEN': designer.cookies.get('XSRF-TOKEN') ?? '',
        'Content-Type': 'multipart/form-data; boundary=x',
        'Content-Length': 90_000,
      },
    });
    broken.on('error', () => undefined);
    broken.write(
      '--x\r\nContent-Disposition: form-data; name="file"; filename="a.stl"\r\n' +
        'Content-Type: application/octet-stream\r\n\r\n',
    );
    broken.write(Buffer.alloc(40_000));
    await expect.poll(() => readdir(product.storage.incomingFolder)).toHaveLength(1);
    broken.destroy();
    await expect.poll(() => readdir(product.storage.incomingFolder)).toEqual([]);
    expect(await everything()).toEqual(before);
  });

  it('a database that fails after the file has come', async () => {
    const failing = await startTestProduct(inject('mariadbUrl'));
    const person = await failing.signIn('designer');
    await failing.database.pool.query('DROP TABLE jobs');
    const response = await person
      .request('post', '/api/models')
      .attach('file', stlBytes(), { filename: 'x.stl' });
    expect(response.status).toBe(500);
    expect(response.text).not.toMatch(/jobs|ER_NO_SUCH_TABLE|at .*\.ts/);
    expect(await filesUnder(failing.storage.folder)).toEqual([]);
    const [models] = await failing.database.pool.query('SELECT id FROM models');
    expect(models).toEqual([]);
    await failing.stop();
  });
});

describe('changing and deleting a model', () => {
  it('renames, takes a scale as confirmed, and refuses what is not valid', async () => {
    const model = await upload(designer);
    const path = `/api/models/${model.id}`;
    const scale = { unit: 'inch', factor: 1, target: null };
    const changed = await designer.send('patch', path, { name: ' Bird ', scale });
    expect(modelResponse.parse(changed.body)).toMatchObject({
      name: 'Bird',
      revision: { scale, scaleConfirmed: true },
    });
    for (const bad of [
      { name: '' },
      { scale: { unit: 'ell' } },
      { scale: { unit: 'other', factor: 0 } },
    ]) {
      const response = await designer.send('patch', path, bad);
      expect([response.status, response.body.error.code]).toEqual([400, 'request.invalid']);
    }
    expect((await designer.get(path)).body).toEqual(changed.body);
  });

  it('removes rows, files and a job that still waits', async () => {
    const before = await everything();
    const model = await upload(designer);
    expect((await designer.send('delete', `/api/models/${model.id}`)).status).toBe(204);
    expect((await designer.get(`/api/models/${model.id}`)).status).toBe(404);
    await product.product.settler.settleAll();
    expect(await everything()).toEqual(before);
  });

  it('stops an inspection that runs and clears what it wrote meanwhile', async () => {
    const before = await everything();
    const model = await upload(designer);
    const jobId = model.revision.job.id;
    const { pool } = product.database;
    await pool.query(`UPDATE jobs SET state = 'running' WHERE id = ?`, [jobId]);
    await designer.send('delete', `/api/models/${model.id}`);
    const [rows] = await pool.query('SELECT state, cancel_requested FROM jobs WHERE id = ?', [
      jobId,
    ]);
    expect(rows).toEqual([{ state: 'running', cancel_requested: 1 }]);
    // The worker was deaf, wrote its result and said so.
    const output = await inspectionResult(product, jobId);
    await finishJob(product, jobId, { state: 'done', output });
    await product.product.settler.settleAll();
    expect(await everything()).toEqual(before);
  });
});
