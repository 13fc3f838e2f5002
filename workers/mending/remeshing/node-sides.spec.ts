import { describe, expect, it } from 'vitest';
import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import {
  cutWindow,
  duplicateFacets,
  flipFacets,
  removeFacets,
} from '../../../test/support/damage.js';
import { randomInteger, seededRandom } from '../../../test/support/random.js';
import { box, join, sphere, torus } from '../../../test/support/shapes.js';
import { silentContext } from '../../runtime/job-context.js';
import { makeCellPatches } from './cell-patches.js';
import { closingCones } from './closing-cones.js';
import { findGridCrossings } from './grid-crossings.js';
import { tellNodeSides } from './node-sides.js';
import { layGrid } from './sample-grid.js';
import { buildWindingTree } from './winding-tree.js';

const middleOf = (mesh: TriangleMesh) => {
  const { min, size } = boundingBox(mesh.positions);
  return min.map((value, axis) => value + size[axis] / 2);
};

/** The definition: the sum of all solid angles, over 4π (van Oosterom and Strackee 1983). */
function windingByDefinition({ positions: p, indices }: TriangleMesh, q: readonly number[]) {
  let sum = 0;
  for (let i = 0; i < indices.length; i += 3) {
    const [a, b, c] = [0, 1, 2].map((k) =>
      [0, 1, 2].map((axis) => p[3 * indices[i + k] + axis] - q[axis]),
    );
    const [la, lb, lc] = [a, b, c].map((v) => Math.hypot(...v));
    const dot = (u: number[], v: number[]) => u[0] * v[0] + u[1] * v[1] + u[2] * v[2];
    const volume =
      a[0] * (b[1] * c[2] - b[2] * c[1]) +
      a[1] * (b[2] * c[0] - b[0] * c[2]) +
      a[2] * (b[0] * c[1] - b[1] * c[0]);
    sum += 2 * Math.atan2(volume, la * lb * lc + dot(a, b) * lc + dot(b, c) * la + dot(c, a) * lb);
  }
  return sum / (4 * Math.PI);
}

const random = seededRandom(5);
const ball = sphere(20, 48, 24).mesh;
const soups: [string, TriangleMesh][] = [
  ['closed', join([ball, box([5, 5, 5], [30, 20, 25]).mesh])],
  ['with a window', cutWindow(ball, [20, 0, 0], 9)],
  [
    'with holes, copies and turned facets',
    duplicateFacets(
      flipFacets(removeFacets(torus(20, 8, 48, 24).mesh, 20, random), 0.05, random),
      0.1,
      random,
    ),
  ],
  ['of loose facets', removeFacets(ball, 1500, random)],
];

describe('the winding tree', () => {
  it.each(soups)('agrees with the sum over all facets on a surface %s', (_, mesh) => {
    const tree = buildWindingTree(mesh, middleOf(mesh));
    const { min, size } = boundingBox(mesh.positions);
    let worst = 0;
    for (let i = 0; i < 300; i++) {
      const q = min.map((value, axis) => value + size[axis] * (1.4 * random() - 0.2));
      worst = Math.max(
        worst,
        Math.abs(tree.windingAt(q[0], q[1], q[2]) - windingByDefinition(mesh, q)),
      );
    }
    expect(worst).toBeLessThan(0.02);
    const close = buildWindingTree(mesh, middleOf(mesh), { farRadii: 6 });
    let less = 0;
    for (let i = 0; i < 100; i++) {
      const q = min.map((value, axis) => value + size[axis] * (1.4 * random() - 0.2));
      less = Math.max(
        less,
        Math.abs(close.windingAt(q[0], q[1], q[2]) - windingByDefinition(mesh, q)),
      );
    }
    expect(less).toBeLessThan(4e-3);
  });
});

describe('closing cones', () => {
  it.each(soups.slice(0, 3))('leave no side without its opposite on a surface %s', (_, mesh) => {
    const cones = closingCones(mesh)!;
    const whole = join([mesh, cones]);
    const net = new Map<string, number>();
    const nameOf = (vertex: number) => whole.positions.subarray(3 * vertex, 3 * vertex + 3).join();
    for (let i = 0; i < whole.indices.length; i++) {
      const [a, b] = [whole.indices[i], whole.indices[i % 3 === 2 ? i - 2 : i + 1]].map(nameOf);
      if (a === b) continue;
      const [key, sign] = a < b ? [`${a} ${b}`, 1] : [`${b} ${a}`, -1];
      net.set(key, (net.get(key) ?? 0) + sign);
    }
    expect([...net.values()].filter((value) => value !== 0)).toEqual([]);
  });

  it('are not made for loose facets', () => {
    expect(closingCones(soups[3][1])).toBeNull();
  });
});

describe('sides of nodes', () => {
  it.each(soups)('are those of the winding number on a surface %s', (_, mesh) => {
    const grid = layGrid(mesh.positions, 20);
    const crossings = findGridCrossings(mesh, grid, silentContext);
    const middle = middleOf(mesh);
    const { isInside } = tellNodeSides(mesh, grid, crossings, {
      middle,
      facing: 1,
      context: silentContext,
    });
    const count = grid.nodes[0] * grid.nodes[1] * grid.nodes[2];
    const wrong: number[] = [];
    for (let node = 0; node < count; node++) {
      const side = isInside(node);
      // All are asked, so that numbers are handed on; some are compared.
      if (randomInteger(random, 20) > 0) continue;
      const at = [
        node % grid.nodes[0],
        Math.floor(node / grid.step[1]) % grid.nodes[1],
        Math.floor(node / grid.step[2]),
      ];
      const q = at.map((value, axis) => grid.origin[axis] + value * grid.spacing);
      const winding = windingByDefinition(mesh, q);
      if (Math.abs(winding - 0.5) > 0.01 && side !== winding > 0.5) wrong.push(node);
    }
    expect(wrong).toEqual([]);
  });
});

describe('patches of cells', () => {
  it('have an outline for every pattern that the neighbours see alike, and no side in a face besides', () => {
    const { triangles, edgeStart } = makeCellPatches();
    const facesOf = (edge: number) =>
      [0, 1, 2]
        .filter((axis) => axis !== edge >> 2)
        .map((axis) => 2 * axis + ((edgeStart[edge] >> axis) & 1));
    for (let inside = 0; inside < 256; inside++) {
      const net = new Map<string, number>();
      const patch = triangles[inside];
      for (let i = 0; i < patch.length; i++) {
        const [a, b] = [patch[i], patch[i % 3 === 2 ? i - 2 : i + 1]];
        const key = a < b ? `${a} ${b}` : `${b} ${a}`;
        net.set(key, (net.get(key) ?? 0) + (a < b ? 1 : -1));
      }
      for (const [key, sum] of net) {
        const [a, b] = key.split(' ').map(Number);
        const isInFace = facesOf(a).some((face) => facesOf(b).includes(face));
        // Sides in faces belong to the outline, once; all others meet their opposite.
        expect(Math.abs(sum)).toBe(isInFace ? 1 : 0);
      }
      const cut = Array.from(edgeStart, (corner, edge) =>
        ((inside >> corner) & 1) !== ((inside >> (corner | (1 << (edge >> 2)))) & 1) ? edge : -1,
      ).filter((edge) => edge >= 0);
      expect([...new Set(patch)].sort((a, b) => a - b)).toEqual(cut);
    }
  });
});
