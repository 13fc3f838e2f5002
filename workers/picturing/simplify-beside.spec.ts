import { afterAll, describe, expect, it } from 'vitest';
import { torus } from '../../test/support/shapes.js';
import { buildBvh } from '../measuring/triangle-bvh.js';
import { makeSimpleModel, measureSimpleModel } from './simple-model.js';
import {
  beginMeasuring,
  beginSimplifying,
  endSimplifying,
  measuresOf,
  simpleModelOf,
} from './simplify-beside.js';

const largeRing = () => torus(40, 12, 640, 160).mesh;
const treeOf = (mesh: ReturnType<typeof largeRing>) => buildBvh(mesh, { inSharedMemory: true });
const expected = await makeSimpleModel(largeRing());
const expectedMeasures = measureSimpleModel(expected.mesh, buildBvh(largeRing()));

afterAll(endSimplifying);

describe('simplifying beside', () => {
  it('gives what is made in place, of the mesh as it was when it began', async () => {
    for (let turn = 0; turn < 2; turn++) {
      const mesh = largeRing();
      beginSimplifying(mesh);
      // Only a test may do this: made in place from now on, the model would be another one.
      mesh.positions.fill(1, 3000);
      expect(await simpleModelOf(mesh)).toEqual(expected);
    }
  });

  it('leaves a second mesh to whoever asks for it while it is busy', async () => {
    const [first, second] = [largeRing(), largeRing()];
    beginSimplifying(first);
    beginSimplifying(second);
    second.positions.set(first.positions.map((value) => 2 * value));
    const { mesh } = await simpleModelOf(second);
    expect(Math.max(...mesh.positions)).toBeCloseTo(104, 0);
    expect(await simpleModelOf(first)).toEqual(expected);
  });

  it('measures what it made with a tree that is handed over while it is busy', async () => {
    for (let turn = 0; turn < 2; turn++) {
      const mesh = largeRing();
      beginSimplifying(mesh);
      const bvh = treeOf(mesh);
      beginMeasuring(mesh, bvh);
      // Only a test may do this: measured in place from now on, the walls would be others.
      mesh.positions.fill(1);
      const simple = await simpleModelOf(mesh);
      expect(simple).toEqual(expected);
      expect(await measuresOf(simple, bvh)).toEqual(expectedMeasures);
    }
    expect(Math.max(...expectedMeasures.walls)).toBeGreaterThan(23.5);
  });

  it('measures with no tree but that of the mesh it was given last', async () => {
    const [first, second] = [largeRing(), largeRing()];
    second.positions.set(first.positions.map((value) => 2 * value));
    beginSimplifying(first);
    await simpleModelOf(first);
    beginSimplifying(second);
    const [firstTree, secondTree] = [treeOf(first), treeOf(second)];
    beginMeasuring(first, firstTree);
    beginMeasuring(second, secondTree);
    expect(await measuresOf(await simpleModelOf(first), firstTree)).toEqual(expectedMeasures);
    const twice = await measuresOf(await simpleModelOf(second), secondTree);
    expect(Math.max(...twice.walls)).toBeCloseTo(2 * Math.max(...expectedMeasures.walls), 0);
  });

  it('does without the thread when that ends early', async () => {
    const mesh = largeRing();
    beginSimplifying(mesh);
    const bvh = treeOf(mesh);
    beginMeasuring(mesh, bvh);
    await endSimplifying();
    const simple = await simpleModelOf(mesh);
    expect(simple).toEqual(expected);
    expect(await measuresOf(simple, bvh)).toEqual(expectedMeasures);
  });
});
