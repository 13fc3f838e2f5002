import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { inspectOutput } from '../../shared/jobs/model-inspect.js';
import { sphere, toSoup } from '../../test/support/shapes.js';
import { binaryStl } from '../../test/support/stl-files.js';
import { decodeMesh } from '../intake/mesh-file.js';
import { isEnoughWhenSet, setCancelFlag, setEnoughFlag, throwWhenSet } from './cancellation.js';
import { createDiskStorage } from './storage.js';
import { createJobThread } from './worker-pool.js';

const folder = await mkdtemp(join(tmpdir(), 'threads-'));
afterAll(() => rm(folder, { recursive: true }));
const storage = createDiskStorage(folder);
const badEntry = new URL('../../test/support/deaf.thread.ts', import.meta.url);
const job = (sourceKey: string) => ({
  kind: 'model.inspect',
  input: { sourceKey, fileName: 'ball.stl', outputPrefix: 'models/m1/r1/' },
});

describe('a job in its thread', () => {
  it('reports progress, writes its files and returns checked output', async () => {
    const thread = createJobThread(folder);
    const mesh = sphere(50, 200, 100).mesh;
    await storage.write('upload.stl', binaryStl(toSoup(mesh)));
    const stages: string[] = [];
    const { outcome } = thread.run(job('upload.stl'), ({ stage }) => stages.push(stage));
    const ended = await outcome;
    expect(ended.kind).toBe('done');
    const output = inspectOutput.parse(ended.kind === 'done' && ended.output);
    expect(output.report.plannable).toBe(true);
    expect(output.files).toEqual({
      solid: 'models/m1/r1/solid.mesh',
      view: 'models/m1/r1/view.glb',
      thumbnail: 'models/m1/r1/thumbnail.png',
      proxy: 'models/m1/r1/proxy.mesh',
    });
    expect(output.viewTriangles).toBe(mesh.indices.length / 3);
    const solid = decodeMesh(await storage.read(output.files.solid!));
    expect(solid.indices.length).toBe(mesh.indices.length);
    expect(stages).toContain('Measuring walls');
    expect(stages[0]).toBe('Reading');

    await storage.write('empty.stl', new Uint8Array(0));
    expect(await thread.run(job('empty.stl'), () => {}).outcome).toEqual({
      kind: 'refused',
      message: '“ball.stl” is empty.',
    });
    expect(await thread.run(job('missing.stl'), () => {}).outcome).toMatchObject({
      kind: 'failed',
    });
    const unknown = await thread.run({ kind: 'tea.make', input: {} }, () => {}).outcome;
    expect(unknown).toMatchObject({ kind: 'failed' });
    await thread.discard();
  });

  it('is told that it is enough without being ended, and a cancellation stands above that', async () => {
    const thread = createJobThread(folder, badEntry);
    const run = thread.run({ kind: 'waits', input: {} }, () => {});
    run.enough();
    const ended = await run.outcome;
    const flag = Int32Array.of(ended.kind === 'done' ? Number(ended.output) : 0);
    expect(isEnoughWhenSet(flag)()).toBe(true);
    expect(throwWhenSet(flag)).not.toThrow();
    setCancelFlag(flag);
    setEnoughFlag(flag);
    expect(isEnoughWhenSet(flag)()).toBe(false);
    expect(throwWhenSet(flag)).toThrow('cancelled');
    await thread.discard();
  });

  it('ends as cancelled when it is cancelled, and the thread goes on with the next', async () => {
    const thread = createJobThread(folder);
    await storage.write('ball.stl', binaryStl(toSoup(sphere(50, 60, 30).mesh)));
    const first = thread.run(job('ball.stl'), () => {});
    first.cancel();
    expect(await first.outcome).toEqual({ kind: 'cancelled' });
    expect((await thread.run(job('ball.stl'), () => {}).outcome).kind).toBe('done');
    await thread.discard();
  });

  it('is ended after two seconds when it is deaf, and the next job gets a fresh thread', async () => {
    const thread = createJobThread(folder, badEntry);
    await thread.run({ kind: 'fine', input: null }, () => {}).outcome;
    const deaf = thread.run({ kind: 'deaf', input: null }, () => {});
    const startMs = performance.now();
    deaf.cancel();
    expect(await deaf.outcome).toEqual({ kind: 'cancelled' });
    expect(performance.now() - startMs).toBeGreaterThan(1900);
    expect(performance.now() - startMs).toBeLessThan(10_000);
    const next = await thread.run({ kind: 'fine', input: null }, () => {}).outcome;
    expect(next).toEqual({ kind: 'done', output: 'fine' });
    await thread.discard();
  });

  it('that takes its thread down is a failure, not the end of the worker', async () => {
    const thread = createJobThread(folder, badEntry);
    const died = await thread.run({ kind: 'dies', input: null }, () => {}).outcome;
    expect(died.kind).toBe('failed');
    await thread.discard();
    const next = await thread.run({ kind: 'fine', input: null }, () => {}).outcome;
    expect(next.kind).toBe('done');
    await thread.discard();
  });
});
