import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { beforeAll, describe, expect, it } from 'vitest';
import { boundingBox, signedVolume, surfaceArea } from '../../../shared/geometry/mesh/measure.js';
import { edgeReport } from '../../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { cutWindow, removeFacets } from '../../../test/support/damage.js';
import { seededRandom } from '../../../test/support/random.js';
import { box, facetedTurning, join, sphere, torus } from '../../../test/support/shapes.js';
import { readStl } from '../../intake/stl-reader.js';
import { findCrossings } from '../../measuring/find-crossings.js';
import { surfaceDeviation } from '../../measuring/surface-deviation.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import { loadSolids, type Solids } from '../../solids/solid-kernel.js';
import { fillHoles } from './fill-holes.js';
import { listHoles } from './list-holes.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

const toleranceOf = (mesh: TriangleMesh) => 1e-5 * Math.hypot(...boundingBox(mesh.positions).size);
const holesOf = (mesh: TriangleMesh) => listHoles(mesh, toleranceOf(mesh));

function fillAll(mesh: TriangleMesh, limit = Infinity) {
  const holes = holesOf(mesh);
  return { before: holes, ...fillHoles(mesh, holes, limit, solids) };
}

/** Fills everything; the result must be closed, unchanged but for new facets, and cross nowhere. */
function fillWell(mesh: TriangleMesh): TriangleMesh {
  const { mesh: filled, holes } = fillAll(mesh);
  expect(holes.every((hole) => hole.isFilled)).toBe(true);
  expect(edgeReport(filled).closed).toBe(true);
  expect(filled.indices.subarray(0, mesh.indices.length)).toEqual(mesh.indices);
  expect(findCrossings(filled, buildBvh(filled)).pairs).toBe(0);
  return filled;
}

function deviationOf(mesh: TriangleMesh, from: TriangleMesh): number {
  return surfaceDeviation(mesh, buildBvh(from))!.max;
}

/** Without the triangles with these numbers. */
function without(mesh: TriangleMesh, gone: (triangle: number) => boolean): TriangleMesh {
  return {
    positions: mesh.positions,
    indices: mesh.indices.filter((_, i) => !gone((i / 3) | 0)),
  };
}

const middleOf = (mesh: TriangleMesh, triangle: number) =>
  [0, 1, 2].map((axis) =>
    [0, 1, 2].reduce(
      (sum, k) => sum + mesh.positions[3 * mesh.indices[3 * triangle + k] + axis] / 3,
      0,
    ),
  );

/** A closed box with every side parted into squares. */
function griddedBox(size: number, parts: number): TriangleMesh {
  const number = new Map<string, number>();
  const positions: number[] = [];
  const indices: number[] = [];
  const vertex = (point: number[]) => {
    const key = point.join();
    if (!number.has(key)) {
      number.set(key, positions.length / 3);
      positions.push(...point.map((value) => (value * size) / parts));
    }
    return number.get(key)!;
  };
  for (let axis = 0; axis < 3; axis++)
    for (const side of [0, parts])
      for (let i = 0; i < parts; i++)
        for (let j = 0; j < parts; j++) {
          const at = (u: number, v: number) => {
            const point = [0, 0, 0];
            point[axis] = side;
            point[(axis + 1) % 3] = u;
            point[(axis + 2) % 3] = v;
            return vertex(point);
          };
          const [a, b, c, d] = [at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)];
          indices.push(...(side > 0 ? [a, b, c, a, c, d] : [a, c, b, a, d, c]));
        }
  return { positions: Float64Array.from(positions), indices: Uint32Array.from(indices) };
}

describe('listHoles', () => {
  it('finds none in a closed mesh', () => {
    expect(holesOf(sphere(10, 12, 6).mesh)).toEqual([]);
  });

  it('measures a square hole and runs as its open sides do', () => {
    const mesh = without(
      box([0, 0, 0], [4, 4, 4]).mesh,
      (triangle) => triangle < 4 && triangle % 2 === 1,
    );
    // Triangles 1 and 3 are half and half of the top, which lies at z = 4.
    const holes = holesOf(mesh);
    expect(holes).toHaveLength(1);
    expect(holes[0]).toMatchObject({
      id: 1,
      edges: 4,
      perimeter: 16,
      isFlat: true,
      isFilled: false,
    });
    expect(holes[0].centre).toEqual([2, 2, 4]);
    expect(holes[0].reach).toBeCloseTo(Math.sqrt(8), 12);
    const [first, second] = holes[0].vertices;
    const sides = Array.from(mesh.indices, (from, i) => [
      from,
      mesh.indices[i % 3 === 2 ? i - 2 : i + 1],
    ]);
    expect(sides).toContainEqual([first, second]);
  });

  it('sorts by perimeter and parts rims that meet in a vertex', () => {
    const grid = griddedBox(4, 4);
    // On the side z = 4: two squares that touch in a corner, and a strip of two elsewhere.
    const isGone = (triangle: number) => {
      const [x, y, z] = middleOf(grid, triangle);
      if (z < 4) return false;
      const square = [Math.floor(x), Math.floor(y)].join();
      return ['0,0', '1,1', '3,1', '3,2'].includes(square);
    };
    const holes = holesOf(without(grid, isGone));
    expect(holes.map(({ id, edges, perimeter }) => [id, edges, perimeter])).toEqual([
      [1, 6, 6],
      [2, 4, 4],
      [3, 4, 4],
    ]);
    for (const hole of holes) expect(new Set(hole.vertices).size).toBe(hole.edges);
    fillWell(without(grid, isGone));
  });
});

describe('fillHoles', () => {
  it('closes a window in a flat face exactly', () => {
    const whole = griddedBox(10, 10);
    for (const radius of [1, 2.5, 4]) {
      const open = cutWindow(whole, [5, 5, 10], radius);
      const filled = fillWell(open);
      expect(signedVolume(filled)).toBeCloseTo(1000, 9);
      expect(deviationOf(filled, whole)).toBeLessThan(1e-9);
    }
  });

  it('fills only up to the limit', () => {
    const whole = griddedBox(10, 10);
    const open = cutWindow(cutWindow(whole, [5, 5, 10], 3), [5, 5, 0], 1);
    const { mesh, holes, steps, places } = fillAll(open, 10);
    expect(holes.map((hole) => hole.isFilled)).toEqual([false, true]);
    expect(steps).toHaveLength(1);
    expect(steps[0].count).toBe(1);
    expect(places).toHaveLength(1);
    expect(holesOf(mesh)).toHaveLength(1);
    expect(fillAll(open, 0.1)).toMatchObject({ mesh: open, steps: [], places: [] });
  });

  it('closes single facets, quarters and halves of a sphere near to the truth', () => {
    const { mesh, volumeMm3 } = sphere(50, 48, 24);
    const pinned = fillWell(removeFacets(mesh, 40, seededRandom(1)));
    expect(Math.abs(signedVolume(pinned) / volumeMm3 - 1)).toBeLessThan(2e-4);
    // A window of 10 on a ball of 50: the cap over its rim is 50 - √(50² - 10²) = 1.01 high.
    const windowed = fillWell(cutWindow(mesh, [50, 0, 0], 10));
    expect(deviationOf(mesh, windowed)).toBeLessThan(1.5);
    const half = fillWell(without(mesh, (triangle) => middleOf(mesh, triangle)[2] > 0));
    expect(signedVolume(half)).toBeCloseTo(volumeMm3 / 2, 6);
  });

  it('closes a saddle-shaped hole in a torus near to the truth', () => {
    const { mesh, volumeMm3 } = torus(50, 20, 96, 48);
    const filled = fillWell(cutWindow(mesh, [30, 0, 0], 12));
    // The chord of the window across the tube sags by 12² / (2 · 20).
    expect(deviationOf(filled, mesh)).toBeLessThan(3.6);
    expect(Math.abs(signedVolume(filled) / volumeMm3 - 1)).toBeLessThan(2e-3);
  });

  it('closes cups of one plane that open opposite ways, side by side', () => {
    const profile = (bottom: number, floor: number) =>
      [
        [0, bottom],
        [20, bottom],
        [20, 0],
        [18, 0],
        [18, floor],
        [0, floor],
      ] as const;
    // Square ones, corner to the axes: apart from each other, but within each other's reach.
    const low = facetedTurning('low', profile(-30, -28), 4);
    const high = facetedTurning('high', profile(30, 28).slice().reverse(), 4);
    const moved = {
      positions: high.mesh.positions.map((value, i) => value + (i % 3 === 2 ? 0 : 25)),
      indices: high.mesh.indices,
    };
    const whole = join([low.mesh, moved]);
    const isRim = (triangle: number) => Math.abs(middleOf(whole, triangle)[2]) < 0.1;
    const filled = fillAll(without(whole, isRim)).mesh;
    expect(signedVolume(filled)).toBeCloseTo(low.volumeMm3 + high.volumeMm3, 8);
    // Two discs over each other enclose the same, with more area.
    expect(surfaceArea(filled)).toBeCloseTo(surfaceArea(whole), 8);
  });

  it('closes the cut edge of a thin-walled cup as a ring', () => {
    // A cup of 2 mm wall: outer and inner surface end open at z = 30.
    const cup = facetedTurning(
      'cup',
      [
        [0, 0],
        [20, 0],
        [20, 30],
        [18, 30],
        [18, 2],
        [0, 2],
      ],
      64,
    );
    const open = without(cup.mesh, (triangle) => middleOf(cup.mesh, triangle)[2] > 29.9);
    expect(holesOf(open)).toHaveLength(2);
    const filled = fillWell(open);
    expect(signedVolume(filled)).toBeCloseTo(cup.volumeMm3, 8);
    expect(surfaceArea(filled)).toBeCloseTo(surfaceArea(cup.mesh), 8);
  });

  it('closes nested rings and discs of one plane each for itself', () => {
    const tube = (inner: number, outer: number) =>
      facetedTurning(
        'tube',
        [
          [inner, 0],
          [outer, 0],
          [outer, 10],
          [inner, 10],
        ],
        24,
      );
    const rod = facetedTurning(
      'rod',
      [
        [0, 0],
        [3, 0],
        [3, 10],
        [0, 10],
      ],
      24,
    );
    const parts = [tube(5, 7), tube(10, 14), rod];
    const whole = join(parts.map((part) => part.mesh));
    const open = without(whole, (triangle) => middleOf(whole, triangle)[2] > 9.9);
    expect(holesOf(open)).toHaveLength(5);
    const volume = parts.reduce((sum, part) => sum + part.volumeMm3, 0);
    const filled = fillWell(open);
    expect(signedVolume(filled)).toBeCloseTo(volume, 8);
    expect(surfaceArea(filled)).toBeCloseTo(surfaceArea(whole), 8);
  });

  it('makes no edge that is there already', () => {
    // A square pyramid without its base, whose base diagonal is an edge of a flap below.
    const positions = Float64Array.from([0, 0, 0, 2, 0, 0, 2, 2, 0, 0, 2, 0, 1, 1, 2, 1, 1, -2]);
    const pyramid = [0, 1, 4, 1, 2, 4, 2, 3, 4, 3, 0, 4];
    const flap = [0, 2, 5, 2, 0, 5];
    const mesh = { positions, indices: Uint32Array.from([...pyramid, ...flap]) };
    const { mesh: filled } = fillAll(mesh);
    expect(edgeReport(filled)).toMatchObject({ openEdges: 0, nonManifoldEdges: 0 });
  });

  it('gives the same bytes twice', () => {
    const open = removeFacets(sphere(50, 64, 32).mesh, 500, seededRandom(3));
    const [one, other] = [fillAll(open).mesh, fillAll(open).mesh];
    expect(one.indices).toEqual(other.indices);
    expect(one.positions).toEqual(other.positions);
  });

  it('closes 10,000 pinholes of three and four edges', () => {
    const { mesh, volumeMm3 } = sphere(50, 400, 200);
    // Every second square of every second row of a chequerboard: no two touch.
    const open = without(mesh, (triangle) => {
      const square = triangle >> 1;
      return square % 4 === 0 && Math.floor(square / 400) % 2 === 0;
    });
    const { mesh: filled, holes } = fillAll(open);
    expect(holes.length).toBeGreaterThan(9000);
    expect(edgeReport(filled).closed).toBe(true);
    expect(Math.abs(signedVolume(filled) / volumeMm3 - 1)).toBeLessThan(1e-3);
  });

  it('closes a long ragged rim', () => {
    const { mesh } = sphere(50, 800, 400);
    // A wavy rim: about 1,000 edges, far from flat.
    const open = without(mesh, (triangle) => {
      const [x, y, z] = middleOf(mesh, triangle);
      return z > 30 + 3 * Math.sin(7 * Math.atan2(y, x));
    });
    const { mesh: filled, before } = fillAll(open);
    expect(before[0].edges).toBeGreaterThan(1000);
    expect(edgeReport(filled).closed).toBe(true);
    // The ball cut at z ≈ 30 loses a cap of π h² (3 R − h) / 3 with h = 20.
    const cap = (Math.PI * 400 * 130) / 3;
    expect(signedVolume(filled) / (signedVolume(mesh) - cap)).toBeCloseTo(1, 1);
  });
});

/** Open test meshes that lie beside the repository on some machines. */
const folder = fileURLToPath(new URL('../../../../shared/meshes/stl', import.meta.url));

describe.skipIf(!existsSync(folder))('real meshes', () => {
  it.each(['b17_plane_holes', 's24_pinholes'])('closes %s', (name) => {
    const { mesh } = readStl(readFileSync(`${folder}/${name}.stl`), `${name}.stl`);
    const { mesh: filled } = fillAll(mesh);
    expect(edgeReport(filled).closed).toBe(true);
    if (name !== 's24_pinholes') return;
    const whole = readStl(readFileSync(`${folder}/o01_spot.stl`), 'o01_spot.stl').mesh;
    expect(signedVolume(filled) / signedVolume(whole)).toBeCloseTo(1, 5);
    expect(deviationOf(filled, whole)).toBeLessThan(0.5);
  });
});
