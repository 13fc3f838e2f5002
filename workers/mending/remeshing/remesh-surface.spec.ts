import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { beforeAll, describe, expect, it } from 'vitest';
import { surfacesOf } from '../../../shared/geometry/mesh/edge-mates.js';
import { boundingBox, signedVolume } from '../../../shared/geometry/mesh/measure.js';
import { roundAndWeld } from '../../../shared/geometry/mesh/rounded.js';
import { edgeReport } from '../../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { identityMotion } from '../../../shared/geometry/vectors/rigid-motion.js';
import {
  cutWindow,
  duplicateFacets,
  flipFacets,
  removeFacets,
} from '../../../test/support/damage.js';
import { randomInteger, seededRandom } from '../../../test/support/random.js';
import {
  box,
  boxWithCavity,
  join,
  sphere,
  torus,
  turnInsideOut,
} from '../../../test/support/shapes.js';
import { readStl } from '../../intake/stl-reader.js';
import { findCrossings } from '../../measuring/find-crossings.js';
import { surfaceDeviation } from '../../measuring/surface-deviation.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import { loadSolids, type Solids } from '../../solids/solid-kernel.js';
import { remeshSurface } from './remesh-surface.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

/** Rebuilt; closed, outward, without crossings, taken by manifold-3d, closed in single precision. */
function rebuild(mesh: TriangleMesh, cells: number) {
  const rebuilt = remeshSurface(mesh, cells, { solids, samples: 4000 });
  if ('refusal' in rebuilt) throw new Error(rebuilt.refusal);
  expect(edgeReport(rebuilt.mesh).closed).toBe(true);
  expect(roundAndWeld(rebuilt.mesh, identityMotion).report.closed).toBe(true);
  expect(findCrossings(rebuilt.mesh, buildBvh(rebuilt.mesh)).pairs).toBe(0);
  const volume = signedVolume(rebuilt.mesh);
  const theirs = solids.withSolids(({ Manifold, Mesh, keep }) => {
    const vertProperties = Float32Array.from(rebuilt.mesh.positions);
    return keep(
      new Manifold(new Mesh({ numProp: 3, vertProperties, triVerts: rebuilt.mesh.indices })),
    ).volume();
  });
  expect(theirs / volume).toBeCloseTo(1, 4);
  return { ...rebuilt, volume };
}

const cellOf = (mesh: TriangleMesh, cells: number) =>
  Math.max(...boundingBox(mesh.positions).size) / cells;

/** Flips, copies and removes facets: a soup. */
function damaged(mesh: TriangleMesh): TriangleMesh {
  const random = seededRandom(11);
  return duplicateFacets(flipFacets(removeFacets(mesh, 12, random), 0.005, random), 0.05, random);
}

const ball = sphere(50, 64, 32);
const ring = torus(50, 20, 64, 32);
/** A box with 12,288 facets. */
const block = (() => {
  let { mesh } = box([0, 0, 0], [40, 30, 20]);
  for (let i = 0; i < 5; i++) mesh = quartered(mesh);
  return mesh;
})();

/** Every triangle parted into four. */
function quartered({ positions, indices }: TriangleMesh): TriangleMesh {
  const points = [...positions];
  const middles = new Map<string, number>();
  const middle = (a: number, b: number) => {
    const key = a < b ? `${a},${b}` : `${b},${a}`;
    const known = middles.get(key);
    if (known !== undefined) return known;
    const number = points.length / 3;
    for (let axis = 0; axis < 3; axis++)
      points.push((points[3 * a + axis] + points[3 * b + axis]) / 2);
    middles.set(key, number);
    return number;
  };
  const parts: number[] = [];
  for (let i = 0; i < indices.length; i += 3) {
    const [a, b, c] = indices.subarray(i, i + 3);
    const [ab, bc, ca] = [middle(a, b), middle(b, c), middle(c, a)];
    parts.push(a, ab, ca, ab, b, bc, ca, bc, c, ab, bc, ca);
  }
  return { positions: Float64Array.from(points), indices: Uint32Array.from(parts) };
}

describe('remeshSurface on sound shapes', () => {
  it.each([
    ['ball', ball.mesh, ball.volumeMm3],
    ['ring', ring.mesh, ring.volumeMm3],
    ['box', block, 24_000],
  ])('keeps a %s within a fraction of a cell', (name, mesh, volume) => {
    const { volume: rebuilt, deviation, steps, places } = rebuild(mesh, 48);
    const cell = cellOf(mesh, 48);
    expect(rebuilt / volume).toBeCloseTo(1, 2);
    expect(deviation.mean).toBeLessThan(0.05 * cell);
    expect(deviation.p95).toBeLessThan(0.15 * cell);
    expect(deviation.max).toBeLessThan(cell);
    expect(steps.map((step) => step.kind)).toEqual(['remesh']);
    expect(places.map((place) => place.kind)).toEqual(['far-from-original']);
  });

  it('lies on the planes of a box', () => {
    const { mesh } = rebuild(box([0, 0, 0], [40, 30, 20]).mesh, 64);
    const { min, max } = boundingBox(mesh.positions);
    expect([...min, ...max].map((value) => Math.round(value * 1e5) / 1e5 + 0)).toEqual([
      0, 0, 0, 40, 30, 20,
    ]);
  });

  it('comes closer with the square of the cells', () => {
    const at = (cells: number) => rebuild(ball.mesh, cells).deviation.mean;
    // The facets are flat, so only their edges are cut; an honest sphere would give a factor of 4.
    expect(at(24) / at(48)).toBeGreaterThan(2);
  });

  it('keeps hollows and turns what faces inward', () => {
    const hollow = boxWithCavity(20, 8);
    expect(rebuild(hollow.mesh, 48).volume / hollow.volumeMm3).toBeCloseTo(1, 2);
    expect(rebuild(turnInsideOut(ball.mesh), 48).volume / ball.volumeMm3).toBeCloseTo(1, 2);
  });

  it('keeps both sides of a thin wall', () => {
    // 3 mm of wall in cells of 0.9 mm.
    const shell = join([sphere(40, 64, 32).mesh, turnInsideOut(sphere(37, 64, 32).mesh)]);
    const { mesh, volume, deviation } = rebuild(shell, 89);
    expect(surfacesOf(mesh).count).toBe(2);
    expect(volume / signedVolume(shell)).toBeCloseTo(1, 2);
    expect(deviation.max).toBeLessThan(0.5);
  });

  it('unites what overlaps and does not count what the solid swallows', () => {
    const one = box([0, 0, 0], [10, 10, 10]).mesh;
    const other = box([6, 5, 4], [16, 15, 14]).mesh;
    const { volume, mesh, deviation } = rebuild(join([one, other]), 48);
    expect(volume / 1880).toBeCloseTo(1, 2);
    expect(surfacesOf(mesh).count).toBe(1);
    expect(deviation.max).toBeLessThan(cellOf(mesh, 48));
  });
});

describe('remeshSurface on soups', () => {
  it.each([
    ['ball', ball.mesh, ball.volumeMm3],
    ['ring', ring.mesh, ring.volumeMm3],
    ['box', block, 24_000],
  ])('makes a solid of a %s with holes, copies and turned facets', (name, mesh, volume) => {
    const { volume: rebuilt, mesh: solid, deviation } = rebuild(damaged(mesh), 48);
    const cell = cellOf(mesh, 48);
    expect(Math.abs(rebuilt / volume - 1)).toBeLessThan(0.015);
    expect(deviation.p95).toBeLessThan(0.6 * cell);
    expect(surfaceDeviation(solid, buildBvh(mesh), 5000)!.p95).toBeLessThan(0.6 * cell);
  });

  it('closes large holes', () => {
    const open = cutWindow(ball.mesh, [50, 0, 0], 25);
    const { volume, mesh } = rebuild(open, 64);
    // Between the window closed flat and the whole ball.
    expect(volume).toBeLessThan(ball.volumeMm3);
    expect(volume).toBeGreaterThan(0.95 * ball.volumeMm3);
    expect(surfacesOf(mesh).count).toBe(1);
    const half = {
      ...ball.mesh,
      indices: ball.mesh.indices.slice(0, ball.mesh.indices.length / 2),
    };
    // Seen from the middle of its rim a half ball fills just half of the view (Jacobson et al. 2013).
    expect(rebuild(half, 64).volume / (ball.volumeMm3 / 2)).toBeCloseTo(1, 0);
  });

  it('leaves out specks', () => {
    const speck = box([60, 0, 0], [60.5, 0.5, 0.5]).mesh;
    const specks = Array.from({ length: 5 }, (_, i) => ({
      ...speck,
      positions: speck.positions.map((value, k) => value + (k % 3 === 2 ? 1.37 * i : 0)),
    }));
    const { mesh } = rebuild(join([ball.mesh, ...specks]), 100);
    expect(surfacesOf(mesh).count).toBe(1);
  });

  it('makes a solid of triangles thrown at random, or says that they enclose nothing', () => {
    const random = seededRandom(9);
    for (let round = 0; round < 4; round++) {
      const points = 30 + 20 * round;
      const positions = new Float64Array(3 * points).map(() => 10 * random());
      const corners = Uint32Array.from({ length: 300 }, () => randomInteger(random, points));
      const isWhole = (i: number) =>
        new Set(corners.subarray(i - (i % 3), i - (i % 3) + 3)).size === 3;
      const indices = corners.filter((_, i) => isWhole(i));
      expect(rebuild({ positions, indices }, 24).volume).toBeGreaterThan(0);
    }
  });

  it('refuses what encloses nothing', () => {
    const sheet = {
      positions: Float64Array.from([0, 0, 0, 1, 0, 0, 1, 1, 0, 0, 1, 0]),
      indices: Uint32Array.from([0, 1, 2, 0, 2, 3]),
    };
    for (const mesh of [
      sheet,
      { positions: new Float64Array(0), indices: new Uint32Array(0) },
      { positions: new Float64Array(9), indices: Uint32Array.from([0, 1, 2]) },
    ])
      expect(remeshSurface(mesh, 50, { solids })).toEqual({
        refusal: expect.stringMatching(/enclose no space/),
      });
  });
});

describe('remeshSurface as a part of a job', () => {
  it('gives the same bytes twice', () => {
    const [one, other] = [rebuild(damaged(ring.mesh), 40), rebuild(damaged(ring.mesh), 40)];
    expect(one.mesh.positions).toEqual(other.mesh.positions);
    expect(one.mesh.indices).toEqual(other.mesh.indices);
    expect(one.deviation).toEqual(other.deviation);
  });

  it('reports progress that never falls and stops when told', () => {
    const fractions: number[] = [];
    const context = {
      throwIfCancelled: () => {},
      progress: (_: string, fraction: number) => void fractions.push(fraction),
    };
    remeshSurface(ball.mesh, 60, { solids, context });
    expect(fractions.length).toBeGreaterThan(50);
    expect(fractions.every((fraction, i) => i === 0 || fraction >= fractions[i - 1])).toBe(true);
    expect(fractions.at(-1)).toBeLessThanOrEqual(1);
    let calls = 0;
    const cancelled = {
      progress: () => {},
      throwIfCancelled: () => {
        if (++calls > 20) throw new Error('cancelled');
      },
    };
    expect(() => remeshSurface(ball.mesh, 60, { solids, context: cancelled })).toThrow('cancelled');
  });
});

/** Open test meshes that lie beside the repository on some machines. */
const folder = fileURLToPath(new URL('../../../../shared/meshes/stl', import.meta.url));

describe.skipIf(!existsSync(folder))('real meshes', () => {
  it.each([
    'b17_plane_holes',
    's24_pinholes',
    's20_overlapping_union_needed',
    'o20_bones',
    'm06_box_assembly',
  ])('makes a solid of %s', (name) => {
    const { mesh } = readStl(readFileSync(`${folder}/${name}.stl`), `${name}.stl`);
    const { deviation } = rebuild(mesh, 60);
    expect(deviation.p95).toBeLessThan(0.6 * cellOf(mesh, 60));
  });
});
