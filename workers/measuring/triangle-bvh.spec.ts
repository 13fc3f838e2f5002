import { describe, expect, it } from 'vitest';
import { sphere, torus } from '../../test/support/shapes.js';
import { surfaceDeviation } from './surface-deviation.js';
import { buildBvh, bvhOfPlainTree, plainTree } from './triangle-bvh.js';
import { measureWalls } from './wall-thickness.js';

describe('a tree as plain data', () => {
  const { mesh } = torus(40, 12, 64, 32);
  const ball = sphere(45, 32, 16).mesh;

  it.each([true, false])('answers as the tree it was made of, in shared memory: %s', (inShared) => {
    const bvh = buildBvh(mesh, { inSharedMemory: inShared });
    const copied = structuredClone({ mesh, tree: plainTree(bvh) });
    const again = bvhOfPlainTree(copied.mesh, copied.tree);
    expect(surfaceDeviation(ball, again)).toEqual(surfaceDeviation(ball, bvh));
    expect(measureWalls(copied.mesh, again)).toEqual(measureWalls(mesh, bvh));
    expect(copied.mesh).toEqual(mesh);
  });

  it('is the same tree, whichever memory it lies in', () => {
    const [own, shared] = [false, true].map((inSharedMemory) => {
      const { roots, indirectBuffer } = plainTree(buildBvh(mesh, { inSharedMemory }));
      return { roots: roots.map((root) => new Uint8Array(root)), order: [...indirectBuffer!] };
    });
    expect(shared).toEqual(own);
  });
});
