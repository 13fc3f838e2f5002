import { randomBytes } from 'node:crypto';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { ResultSetHeader, RowDataPacket } from 'mysql2/promise';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { inspectOutput } from '../../shared/jobs/model-inspect.js';
import { createJobQueue } from '../../workers/runtime/job-queue.js';
import { createDiskStorage } from '../../workers/runtime/storage.js';
import { createTestDatabase, type TestDatabase } from '../support/mariadb.js';
import { sphere, toSoup, torusKnot } from '../support/shapes.js';
import { binaryStl } from '../support/stl-files.js';
import { openGate, startWorker, type WorkerProcess } from '../support/worker-process.js';

interface JobRow extends RowDataPacket {
  state: string;
  stage: string;
  fraction: number;
  attempts: number;
  output: unknown;
  error: { code: string; message: string } | null;
  lease_token: string | null;
  finished_at: Date | null;
}

let database: TestDatabase;
let folder: string;
const workers: WorkerProcess[] = [];

beforeAll(async () => {
  database = await createTestDatabase(inject('mariadbUrl'));
  folder = await mkdtemp(join(tmpdir(), 'queue-'));
  const storage = createDiskStorage(join(folder, 'storage'));
  await storage.write('small.stl', binaryStl(toSoup(sphere(50, 24, 12).mesh)));
  await storage.write('empty.stl', new Uint8Array(0));
  // Large enough that its inspection takes seconds: there is time to interfere.
  await storage.write('large.stl', binaryStl(toSoup(torusKnot(100, 30, 6000, 40))));
});

afterEach(async () => {
  await Promise.all(workers.splice(0).map((worker) => worker.end('SIGKILL')));
  await database.pool.query('DELETE FROM jobs');
});

afterAll(async () => {
  await database.drop();
  await rm(folder, { recursive: true });
});

async function start(url = database.url, threads = 1): Promise<WorkerProcess> {
  const worker = await startWorker({
    DATABASE_URL: url,
    SEAMWRIGHT_DATA: folder,
    SEAMWRIGHT_WORKERS: String(threads),
  });
  workers.push(worker);
  return worker;
}

const newId = () => randomBytes(10).toString('hex');

async function addJob(sourceKey: string, kind = 'model.inspect'): Promise<string> {
  const id = newId();
  const input = { sourceKey, fileName: sourceKey, outputPrefix: `models/${id}` };
  await database.pool.query(
    `INSERT INTO jobs (id, workshop_id, kind, subject_id, input, state) VALUES (?, ?, ?, ?, ?, 'queued')`,
    [id, newId(), kind, newId(), JSON.stringify(input)],
  );
  return id;
}

async function read(id: string): Promise<JobRow> {
  const [rows] = await database.pool.query<JobRow[]>('SELECT * FROM jobs WHERE id = ?', [id]);
  return rows[0]!;
}

async function until(
  id: string,
  what: (row: JobRow) => boolean,
  withinMs = 40_000,
): Promise<JobRow> {
  const end = Date.now() + withinMs;
  for (;;) {
    const row = await read(id);
    if (what(row)) return row;
    if (Date.now() > end)
      throw new Error(
        `Still ${JSON.stringify(row)}\n${workers.map((worker) => worker.log()).join('\n')}`,
      );
    await new Promise((resolve) => setTimeout(resolve, 30));
  }
}
const isWorking = (row: JobRow) =>
  row.state === 'running' && row.stage !== '' && row.fraction > 0.1;
const isEnded = (row: JobRow) => ['done', 'failed', 'cancelled'].includes(row.state);
const expireLease = (id: string) =>
  database.pool.query(
    'UPDATE jobs SET lease_until = UTC_TIMESTAMP(3) - INTERVAL 1 SECOND WHERE id = ?',
    [id],
  );

describe('the worker process', () => {
  it('does a job, stores its checked output and shows its progress on the way', async () => {
    const id = await addJob('large.stl');
    await start();
    const midway = await until(id, isWorking);
    expect(midway.lease_token).toHaveLength(36);
    const row = await until(id, isEnded);
    expect(row).toMatchObject({
      state: 'done',
      fraction: 1,
      attempts: 1,
      error: null,
      lease_token: null,
    });
    expect(row.finished_at).not.toBeNull();
    const output = inspectOutput.parse(row.output);
    expect(output.report.triangles).toBe(480_000);
    expect(output.viewTriangles).toBeLessThanOrEqual(60_000);
  });

  it('finishes a job whose worker was killed, once its lease has run out', async () => {
    const id = await addJob('large.stl');
    const first = await start();
    await until(id, isWorking);
    await first.end('SIGKILL');
    const second = await start();
    await new Promise((resolve) => setTimeout(resolve, 1000));
    expect((await read(id)).attempts).toBe(1);
    await expireLease(id);
    const row = await until(id, isEnded);
    expect(row).toMatchObject({ state: 'done', attempts: 2 });
    expect(second.log()).toMatch(/"attempt":2/);
  });

  it('cancels a running job within two seconds and goes on with the next', async () => {
    const id = await addJob('large.stl');
    await start();
    await until(id, isWorking);
    await database.pool.query('UPDATE jobs SET cancel_requested = TRUE WHERE id = ?', [id]);
    const askedAt = Date.now();
    const row = await until(id, isEnded);
    expect(row).toMatchObject({ state: 'cancelled', output: null, error: null });
    expect(Date.now() - askedAt).toBeLessThan(4000);
    const next = await addJob('small.stl');
    expect((await until(next, isEnded)).state).toBe('done');
  });

  it('puts its job back when it is told to stop, and ends within five seconds', async () => {
    const id = await addJob('large.stl');
    const worker = await start();
    await until(id, isWorking);
    const askedAt = Date.now();
    expect(await worker.end('SIGTERM')).toBe(0);
    expect(Date.now() - askedAt).toBeLessThan(5000);
    expect(await read(id)).toMatchObject({
      state: 'queued',
      attempts: 0,
      lease_token: null,
      fraction: 0,
    });
    await start();
    expect(await until(id, isEnded)).toMatchObject({ state: 'done', attempts: 1 });
  });

  it('shares many jobs among workers without doing one twice', async () => {
    const started = await Promise.all([start(), start(database.url, 2)]);
    const ids = await Promise.all(Array.from({ length: 24 }, () => addJob('small.stl')));
    for (const id of ids)
      expect(await until(id, isEnded)).toMatchObject({ state: 'done', attempts: 1 });
    const begun = started.map((worker) => worker.log().split('job begun').length - 1);
    expect(begun[0]! + begun[1]!).toBe(24);
    expect(Math.min(...begun)).toBeGreaterThan(0);
  });

  it('tells the person why a file was refused, and no stack when it was our fault', async () => {
    const refused = await addJob('empty.stl');
    const broken = await addJob('missing.stl');
    const worker = await start();
    expect((await until(refused, isEnded)).error).toEqual({
      code: 'refused',
      message: '“empty.stl” is empty.',
    });
    const { state, error } = await until(broken, isEnded);
    expect(state).toBe('failed');
    expect(error!.code).toBe('failed');
    expect(error!.message).not.toMatch(/ENOENT|missing|\.ts|\n/);
    expect(worker.log()).toMatch(/ENOENT/);
  });

  it('drops a job whose lease another worker has taken, and writes nothing to it', async () => {
    const id = await addJob('large.stl');
    const worker = await start();
    await until(id, isWorking);
    const other = '00000000-0000-4000-8000-000000000000';
    await database.pool.query(
      `UPDATE jobs SET lease_token = ?, lease_until = UTC_TIMESTAMP(3) + INTERVAL 60 SECOND, stage = 'theirs' WHERE id = ?`,
      [other, id],
    );
    const next = await addJob('small.stl');
    await until(next, isEnded);
    expect(worker.log()).toMatch(/lease lost/);
    expect(await read(id)).toMatchObject({ state: 'running', stage: 'theirs', lease_token: other });
  });

  it('goes on when the database was away, with the job in hand and with new ones', async () => {
    const gate = await openGate(new URL(database.url));
    const id = await addJob('large.stl');
    await start(gate.url);
    await until(id, isWorking);
    gate.shut();
    await new Promise((resolve) => setTimeout(resolve, 2500));
    gate.open();
    expect(await until(id, isEnded)).toMatchObject({ state: 'done', attempts: 1 });
    gate.shut();
    const next = await addJob('small.stl');
    await new Promise((resolve) => setTimeout(resolve, 1500));
    gate.open();
    expect((await until(next, isEnded)).state).toBe('done');
    gate.close();
  });
});

describe('claiming a job', () => {
  const queue = () => createJobQueue({ pool: database.pool });

  it('takes the oldest that may run, and leaves those whose time has not come', async () => {
    const later = await addJob('small.stl');
    await database.pool.query(
      'UPDATE jobs SET run_after = UTC_TIMESTAMP(3) + INTERVAL 1 HOUR WHERE id = ?',
      [later],
    );
    const second = await addJob('small.stl');
    const first = await addJob('small.stl');
    await database.pool.query(
      'UPDATE jobs SET run_after = UTC_TIMESTAMP(3) - INTERVAL 1 HOUR WHERE id = ?',
      [first],
    );
    expect((await queue().claim())?.id).toBe(first);
    expect((await queue().claim())?.id).toBe(second);
    expect(await queue().claim()).toBeNull();
  });

  it('gives each of many claimers a job of its own', async () => {
    const ids = await Promise.all(Array.from({ length: 30 }, () => addJob('small.stl')));
    const claimed: string[] = [];
    await Promise.all(
      Array.from({ length: 6 }, async () => {
        const own = queue();
        for (let job = await own.claim(); job; job = await own.claim()) claimed.push(job.id);
      }),
    );
    expect([...claimed].sort()).toEqual([...ids].sort());
  });

  it('gives up a job after three attempts, with a sentence', async () => {
    const id = await addJob('small.stl');
    for (let attempt = 1; attempt <= 3; attempt++) {
      expect((await queue().claim())?.attempts).toBe(attempt);
      await expireLease(id);
    }
    expect(await queue().claim()).toBeNull();
    const { state, error, finished_at } = await read(id);
    expect(state).toBe('failed');
    expect(error?.code).toBe('abandoned');
    expect(error?.message).toMatch(/begun 3 times/);
    expect(finished_at).not.toBeNull();
  });

  it('closes a job that was to be cancelled when its worker died', async () => {
    const id = await addJob('small.stl');
    await queue().claim();
    await database.pool.query('UPDATE jobs SET cancel_requested = TRUE WHERE id = ?', [id]);
    await expireLease(id);
    expect(await queue().claim()).toBeNull();
    expect((await read(id)).state).toBe('cancelled');
  });

  it('lets nobody write under a lease that is over', async () => {
    const id = await addJob('small.stl');
    const old = (await queue().claim())!;
    await expireLease(id);
    const current = (await queue().claim())!;
    expect(await queue().report(old, 'Reading', 0.5)).toBe(false);
    expect(await queue().renew(old)).toBe(false);
    expect(await queue().wish(old)).toBe('lost');
    expect(await queue().finish(old, {})).toBe(false);
    expect(await queue().release(old)).toBe(false);
    expect(await queue().renew(current)).toBe(true);
    expect(await queue().finish(current, { a: 1 })).toBe(true);
    expect(await queue().fail(current, { code: 'failed', message: 'late' })).toBe(false);
    expect(await read(id)).toMatchObject({ state: 'done', output: { a: 1 }, error: null });
    const [left] = await database.pool.query<ResultSetHeader>('DELETE FROM jobs WHERE id = ?', [
      id,
    ]);
    expect(left.affectedRows).toBe(1);
  });
});
