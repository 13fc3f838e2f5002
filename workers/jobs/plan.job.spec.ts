import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { NodeIO } from '@gltf-transform/core';
import { EXTMeshoptCompression } from '@gltf-transform/extensions';
import { MeshoptDecoder } from 'meshoptimizer';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { usualJoints } from '../../shared/jobs/joint-plan.js';
import { usualMaterial } from '../../shared/jobs/material-profile.js';
import { usualWishes } from '../../shared/jobs/plan-wishes.js';
import { type JobMap, jobSchemas } from '../../shared/jobs/job-map.js';
import { box, torusKnot } from '../../test/support/shapes.js';
import { encodeMesh } from '../intake/mesh-file.js';
import { AbortError, isAbortError } from '../runtime/cancellation.js';
import { silentContext } from '../runtime/job-context.js';
import { createDiskStorage, type Storage } from '../runtime/storage.js';
import { makePlan } from './plan.job.js';

let folder = '';
let storage: Storage;
const bed = { shape: 'rectangular', widthMm: 220, depthMm: 220, heightMm: 250 } as const;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'seamwright-plan-'));
  storage = createDiskStorage(folder);
  await storage.write('knot/solid.mesh', encodeMesh(torusKnot(2.5, 1.1, 150, 20)));
  await storage.write('cube/solid.mesh', encodeMesh(box([0, 0, 0], [40, 30, 20]).mesh));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

const order = (prefix: string): JobMap['plan.make']['input'] => ({
  solidKey: 'knot/solid.mesh',
  modelName: 'a knot, "in" inches',
  millimetresPerUnit: 25.4,
  space: bed,
  otherSpaces: [],
  wishes: usualWishes,
  tree: null,
  joints: usualJoints,
  material: usualMaterial,
  orientations: [],
  seed: 3,
  outputPrefix: prefix,
});

describe('makePlan', { timeout: 180_000 }, () => {
  it('gives a result the contract accepts, whose files all exist with the sizes it says', async () => {
    const heard: [string, number][] = [];
    const output = await makePlan(
      order('plans/one'),
      { storage },
      {
        throwIfCancelled: () => {},
        progress: (stage, fraction) => heard.push([stage, fraction]),
      },
    );
    expect(jobSchemas['plan.make'].output.parse(output)).toEqual(output);
    expect(output.proof.filter((row) => !row.passed)).toEqual([]);
    expect(output.pieces.length).toBeGreaterThan(1);
    expect(output.pieces.map((piece) => piece.item)).toEqual(output.pieces.map((_, i) => i + 1));
    expect(output.seams.length).toBeGreaterThan(0);
    expect(output.files.archive.map((entry) => entry.name)).toEqual([
      ...output.pieces.map((piece) => piece.file),
      ...output.parts.flatMap(({ file }) => (file === null ? [] : [file])),
      'manifest.json',
      'cut-list.csv',
    ]);
    for (const { key, bytes } of output.files.archive)
      expect((await storage.read(key)).byteLength).toBe(bytes);
    const fractions = heard.map(([, fraction]) => fraction);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
    expect(fractions.at(-1)).toBe(1);
    expect(new Set(heard.map(([stage]) => stage)).size).toBeGreaterThan(4);
  });

  it('draws every piece and every seam under its name, where it sits in the assembled model', async () => {
    const output = await makePlan(order('plans/drawn'), { storage }, silentContext);
    await MeshoptDecoder.ready;
    const reader = new NodeIO()
      .registerExtensions([EXTMeshoptCompression])
      .registerDependencies({ 'meshopt.decoder': MeshoptDecoder });
    const scene = await reader.readBinary(await storage.read(output.files.view));
    const nodes = scene.getRoot().listNodes();
    const names = nodes.map((node) => node.getName());
    expect(names.filter((name) => !name.startsWith('support-'))).toEqual([
      ...output.pieces.map((piece) => piece.name),
      ...output.seams.map((_, index) => `seam-${index + 1}`),
    ]);
    for (const [index, { centreMm }] of output.pieces.entries()) {
      const positions = nodes[index].getMesh()!.listPrimitives()[0].getAttribute('POSITION')!;
      const [low, high] = [positions.getMin([]), positions.getMax([])];
      for (let k = 0; k < 3; k++) expect((low[k] + high[k]) / 2).toBeCloseTo(centreMm[k], 0);
    }
  });

  it('writes the same bytes again, and no time or place of the machine', async () => {
    const [one, two] = [
      await makePlan(order('plans/first'), { storage }, silentContext),
      await makePlan(order('plans/second'), { storage }, silentContext),
    ];
    const keysOf = (output: typeof one) => [
      output.files.view,
      ...output.files.archive.map((entry) => entry.key),
    ];
    for (const [i, key] of keysOf(one).entries()) {
      const [a, b] = await Promise.all([storage.read(key), storage.read(keysOf(two)[i])]);
      expect(Buffer.compare(a, b), key).toBe(0);
    }
    const manifest = new TextDecoder().decode(await storage.read('plans/first/manifest.json'));
    expect(manifest).not.toContain(folder);
    expect(manifest).not.toContain('timingsMs');
    expect(JSON.parse(manifest)).toMatchObject({
      kind: 'seamwright-pieces',
      units: { length: 'mm' },
      model: { name: 'a knot, "in" inches', millimetresPerFileUnit: 25.4 },
      recipe: { seed: 3, space: bed },
    });
  });

  it('leaves a model that fits in one piece', async () => {
    const whole = { ...order('plans/whole'), solidKey: 'cube/solid.mesh', millimetresPerUnit: 1 };
    const output = await makePlan(whole, { storage }, silentContext);
    expect(output.recipe.tree).toEqual({ kind: 'leaf' });
    expect(output.pieces).toHaveLength(1);
    expect(output.pieces[0]).toMatchObject({ name: 'P01', fits: true, file: 'pieces/P01.stl' });
    expect(output.pieces[0].volumeMm3).toBeCloseTo(24_000, 2);
    expect(output.seams).toEqual([]);
  });

  it('ends with the abort error wherever it is cancelled', async () => {
    for (const after of [1, 5, 40]) {
      let polls = 0;
      const context = {
        progress: () => {},
        throwIfCancelled: () => {
          if (++polls >= after) throw new AbortError();
        },
      };
      const error = await makePlan(order('plans/cancelled'), { storage }, context).catch(
        (reason: unknown) => reason,
      );
      expect(isAbortError(error)).toBe(true);
    }
  });
});
