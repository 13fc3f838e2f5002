import { describe, expect, it } from 'vitest';
import { applyTree, type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane, type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { box, boxWithCavity } from '../../test/support/shapes.js';
import { loadSolids } from '../solids/solid-kernel.js';
import { findSeams } from './seam-areas.js';

const leaf: PlaneTree = { kind: 'leaf' };
const cut = (
  normal: Vector3,
  offset: number,
  above: PlaneTree = leaf,
  below: PlaneTree = leaf,
): PlaneTree => ({
  kind: 'cut',
  plane: { normal, offset },
  above,
  below,
});
const planes = (tree: PlaneTree): Plane[] =>
  tree.kind === 'leaf' ? [] : [tree.plane, ...planes(tree.above), ...planes(tree.below)];

async function seamsOf(mesh: TriangleMesh, tree: PlaneTree) {
  const solids = await loadSolids();
  const { triangulate } = solids;
  const { bodies } = applyTree(mesh, tree, { triangulate, toleranceMm: 0 });
  const named = bodies.map((body) => ({ name: body.path, mesh: body.mesh }));
  return findSeams(named, planes(tree), solids);
}

describe('findSeams', () => {
  it('measures one straight cut by its closed form, tilted or not', async () => {
    const { mesh } = box([0, 0, 0], [30, 40, 50]);
    const [straight, ...more] = await seamsOf(mesh, cut([0, 0, 1], 20));
    expect(more).toEqual([]);
    expect(straight.areaMm2).toBeCloseTo(1200, 5);
    expect(straight.cut).toBe(1);
    // A plane tilted by 30° about y widens the section by 1 / cos 30°.
    const tilt = Math.PI / 6;
    const normal: Vector3 = [Math.sin(tilt), 0, Math.cos(tilt)];
    const [tilted] = await seamsOf(mesh, cut(normal, normal[0] * 15 + normal[2] * 25));
    expect(tilted.areaMm2).toBeCloseTo(1200 / Math.cos(tilt), 4);
  });

  it('splits a cut between the pieces that later cuts make on both sides', async () => {
    // Above x = 50 three slices of 30, 40, 30; below two of 45, 55: four overlaps along y.
    const above = cut([0, 1, 0], 30, cut([0, 1, 0], 70));
    const below = cut([0, 1, 0], 45);
    const seams = await seamsOf(
      box([0, 0, 0], [100, 100, 10]).mesh,
      cut([1, 0, 0], 50, above, below),
    );
    const across = seams.filter((seam) => seam.cut === 1).map((seam) => seam.areaMm2);
    expect(across.sort((a, b) => a - b).map((area) => Number(area.toFixed(4)))).toEqual([
      150, 250, 300, 300,
    ]);
    expect(seams.filter((seam) => seam.cut > 1).map((seam) => Math.round(seam.areaMm2))).toEqual([
      500, 500, 500,
    ]);
  });

  it('leaves hollows out of the area and outlines every loop in the plane of the cut', async () => {
    const [seam] = await seamsOf(boxWithCavity(10, 4).mesh, cut([0, 0, 1], 5));
    expect(seam.areaMm2).toBeCloseTo(84, 5);
    let length = 0;
    for (let i = 0; i < seam.outline.length; i += 6) {
      const [x0, y0, z0, x1, y1, z1] = seam.outline.subarray(i, i + 6);
      length += Math.hypot(x1 - x0, y1 - y0, z1 - z0);
      expect([z0, z1]).toEqual([5, 5]);
    }
    expect(length).toBeCloseTo(40 + 16, 4);
  });

  it('finds no seam on an uncut model', async () => {
    expect(await seamsOf(box([0, 0, 0], [1, 1, 1]).mesh, leaf)).toEqual([]);
  });
});
