import { beforeAll, describe, expect, it } from 'vitest';
import * as shapes from '../../../test/support/shapes.js';
import { loadManifold, manifoldTriangulator } from '../../../test/support/triangulator.js';
import { signedVolume } from '../mesh/measure.js';
import { edgeReport } from '../mesh/topology.js';
import { type Vector3 } from '../vectors/plane.js';
import { applyTree, type PlaneTree, type TreeOptions } from './apply-tree.js';

let options: TreeOptions;
beforeAll(async () => {
  options = { triangulate: manifoldTriangulator(await loadManifold()), toleranceMm: 0.02 };
});

const leaf: PlaneTree = { kind: 'leaf' };
function branch(
  normal: Vector3,
  offset: number,
  above: PlaneTree = leaf,
  below: PlaneTree = leaf,
): PlaneTree {
  return { kind: 'cut', plane: { normal, offset }, above, below };
}

describe('applying a cut tree', () => {
  it('numbers cuts in preorder, above first, in tags, offsets and progress', () => {
    const { mesh, volumeMm3 } = shapes.box([0, 0, 0], [30, 30, 30]);
    const tree = branch(
      [0, 0, 1],
      20,
      branch([1, 0, 0], 10),
      branch([0, 1, 0], 15, leaf, branch([1, 0, 0], 12)),
    );
    const heard: number[][] = [];
    const onCut = (done: number, total: number) => heard.push([done, total]);
    const { bodies, offsets } = applyTree(mesh, tree, { ...options, onCut });
    expect(offsets).toEqual([20, 10, 15, 12]);
    expect(heard).toEqual([1, 2, 3, 4].map((done) => [done, 4]));
    expect(bodies.map((body) => body.path)).toEqual(['aa', 'ab', 'ba', 'bba', 'bbb']);
    const caps = bodies.map(({ mesh: { tags } }) => [...new Set(tags)].sort().join());
    expect(caps).toEqual(['0,1,2', '0,1,2', '0,1,3', '0,1,3,4', '0,1,3,4']);
    const sum = bodies.reduce((total, body) => total + signedVolume(body.mesh), 0);
    expect(sum).toBeCloseTo(volumeMm3, 8);
    expect(bodies.every((body) => edgeReport(body.mesh).closed)).toBe(true);
  });

  it('makes loose solids bodies of their own, the largest first', () => {
    const { mesh } = shapes.torus(50, 18, 40, 20);
    const { bodies } = applyTree(mesh, branch([1, 0, 0], 40), options);
    expect(bodies.map((body) => body.path)).toEqual(['a', 'b']);
    const across = applyTree(mesh, branch([1, 0, 0], 5.3, leaf, branch([0, 1, 0], -7)), options);
    expect(across.bodies.map((body) => body.path)).toEqual(['a', 'ba', 'bb']);
    const table = shapes.voxels('table', [5, 1, 3], 10, (x, _y, z) => z === 2 || x === 0 || x > 2);
    const legs = applyTree(table.mesh, branch([0, 0, 1], 20), options);
    expect(legs.bodies.map((body) => body.path)).toEqual(['a', 'b.1', 'b.2']);
    expect(legs.bodies.map((body) => Math.round(signedVolume(body.mesh)))).toEqual([
      5000, 4000, 2000,
    ]);
  });

  it('keeps the number of a cut that meets nothing and leaves its empty side out', () => {
    const { mesh } = shapes.box([0, 0, 0], [30, 30, 30]);
    const tree = branch([0, 0, 1], 50, branch([1, 0, 0], 7), branch([1, 0, 0], 15));
    const { bodies, offsets } = applyTree(mesh, tree, options);
    expect(offsets).toEqual([50, 7, 15]);
    expect(bodies.map((body) => body.path)).toEqual(['ba', 'bb']);
    expect(new Set(bodies[0]!.mesh.tags)).toEqual(new Set([0, 3]));
  });

  it('returns the whole solids for a leaf, and reports offsets as moved', () => {
    const { mesh } = shapes.sphere(50, 32, 20);
    expect(applyTree(mesh, leaf, options)).toEqual({ bodies: [{ mesh, path: '' }], offsets: [] });
    const ringHeight = 50 * Math.sin(Math.PI / 20);
    const { offsets } = applyTree(mesh, branch([0, 0, 1], ringHeight + 0.005), options);
    expect(offsets[0]).toBeCloseTo(ringHeight + 0.02, 10);
  });

  it('stops when the listener throws', () => {
    const { mesh } = shapes.box([0, 0, 0], [30, 30, 30]);
    const onCut = () => {
      throw new Error('cancelled');
    };
    expect(() => applyTree(mesh, branch([0, 0, 1], 9), { ...options, onCut })).toThrow('cancelled');
  });
});
