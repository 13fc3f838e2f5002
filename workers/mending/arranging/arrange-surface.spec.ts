import type { ManifoldToplevel } from 'manifold-3d';
import { beforeAll, describe, expect, it } from 'vitest';
import { matesOf } from '../../../shared/geometry/mesh/edge-mates.js';
import { boundingBox, signedVolume } from '../../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { seededRandom } from '../../../test/support/random.js';
import { box, join, sphere, torusKnot } from '../../../test/support/shapes.js';
import { loadManifold } from '../../../test/support/triangulator.js';
import { findCrossings } from '../../measuring/find-crossings.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import { buildWindingTree } from '../remeshing/winding-tree.js';
import { arrangeSurface } from './arrange-surface.js';

let manifold: ManifoldToplevel;
beforeAll(async () => {
  manifold = await loadManifold();
});

const crossingsOf = (mesh: TriangleMesh) => findCrossings(mesh, buildBvh(mesh));
const arrange = (mesh: TriangleMesh) => arrangeSurface(mesh, crossingsOf(mesh).triangles);

function toManifold(mesh: TriangleMesh) {
  const { Manifold, Mesh } = manifold;
  const mesh3 = new Mesh({
    numProp: 3,
    vertProperties: Float32Array.from(mesh.positions),
    triVerts: mesh.indices,
  });
  return new Manifold(mesh3);
}

/** Closed, without crossings, and taken by manifold-3d; the volume is returned. */
function expectSound(mesh: TriangleMesh | null): number {
  expect(mesh).not.toBeNull();
  expect(matesOf(mesh!).closed).toBe(true);
  expect(crossingsOf(mesh!).pairs).toBe(0);
  const solid = toManifold(mesh!);
  expect(solid.status()).toBe('NoError');
  solid.delete();
  return signedVolume(mesh!);
}

/** Volume around which a surface winds more than zero times, from points spread over its box. */
function windingVolume(mesh: TriangleMesh, points: number, seed: number): number {
  const { min, size } = boundingBox(mesh.positions);
  const tree = buildWindingTree(mesh, [0, 0, 0]);
  const random = seededRandom(seed);
  let inside = 0;
  for (let k = 0; k < points; k++) {
    const [x, y, z] = min.map((from, axis) => from + size[axis]! * random());
    if (tree.windingAt(x!, y!, z!) > 0.5) inside++;
  }
  return (inside / points) * size[0] * size[1] * size[2];
}

/** A ball with a place pushed along −x. */
function pushed(depth: number): TriangleMesh {
  const { mesh } = sphere(50, 48, 48);
  const positions = mesh.positions.slice();
  for (let k = 0; k < positions.length; k += 3) {
    const far = Math.hypot(positions[k]! - 50, positions[k + 1]!, positions[k + 2]!);
    positions[k]! -= depth * Math.exp(-((far / 18) ** 2));
  }
  return { ...mesh, positions };
}

/** A ball whose points are carried off by waves, across the surface as well as along it. */
function blob(seed: number): TriangleMesh {
  const random = seededRandom(seed);
  const { mesh } = sphere(50, 28, 20);
  const waves = Array.from({ length: 9 }, () => [0.05 * (random() - 0.5), 7 * random()] as const);
  const reach = 35 + 30 * random();
  const positions = mesh.positions.map((at, k) => {
    const first = k - (k % 3);
    const axis = k % 3;
    let moved = at;
    for (let wave = 0; wave < 3; wave++) {
      const [step, start] = waves[3 * axis + wave]!;
      const along = mesh.positions[first + ((axis + 1 + wave) % 3)]!;
      moved += (reach / 3) * Math.sin(2 * step * along * (wave + 1) + start);
    }
    return moved;
  });
  return { ...mesh, positions };
}

describe('arrangeSurface', () => {
  it('leaves a surface that does not cross itself as it is', () => {
    const mesh = sphere(50, 24, 16).mesh;
    expect(arrangeSurface(mesh, new Uint32Array(0))).toBe(mesh);
  });

  it('makes of a tube that runs through itself what manifold-3d makes of its pieces', () => {
    for (const [size, tube] of [
      [20, 18],
      [20, 19.5],
      [21, 18.7],
    ] as const) {
      const [along, around] = [120, 20];
      const knot = torusKnot(size, tube, along, around);
      expect(crossingsOf(knot).pairs).toBeGreaterThan(50);
      const volume = expectSound(arrange(knot));
      // The same tube in closed slices, each between two rings, united by manifold-3d.
      const slices = Array.from({ length: along }, (_, i) => slice(knot, i, along, around));
      const solids = slices.map(toManifold);
      const union = manifold.Manifold.union(solids);
      expect(Math.abs(volume / union.volume() - 1), `${size} ${tube}`).toBeLessThan(2e-5);
      for (const solid of [...solids, union]) solid.delete();
    }
  });

  it('makes of shells that overlap what manifold-3d makes of them', () => {
    const ball = sphere(50, 40, 30).mesh;
    const moved = {
      ...ball,
      positions: ball.positions.map((at, k) => at + [30.3, 7.1, 11.7][k % 3]!),
    };
    const third = {
      ...ball,
      positions: ball.positions.map((at, k) => at + [11.9, 28.3, -9.7][k % 3]!),
    };
    const volume = expectSound(arrange(join([ball, moved, third])));
    const solids = [ball, moved, third].map(toManifold);
    const union = manifold.Manifold.union(solids);
    expect(Math.abs(volume / union.volume() - 1)).toBeLessThan(1e-5);
    for (const solid of [...solids, union]) solid.delete();
  });

  it('breaks the ties of faces that lie in one plane', () => {
    const mesh = join([box([0, 0, 0], [10, 10, 10]).mesh, box([5, 2, 0], [15, 8, 10]).mesh]);
    expect(expectSound(arrange(mesh))).toBeCloseTo(1000 + 600 - 300, 3);
  });

  it('drops what is turned inside out: a dent that comes out on the far side', () => {
    const mesh = pushed(120);
    expect(crossingsOf(mesh).pairs).toBeGreaterThan(20);
    const volume = expectSound(arrange(mesh));
    // The bulge beyond the far wall winds −1 times: without it the solid is larger than the sum.
    expect(volume).toBeGreaterThan(signedVolume(mesh));
    expect(Math.abs(volume / windingVolume(mesh, 40_000, 3) - 1)).toBeLessThan(0.02);
  });

  it('makes solids of 100 seeded blobs, the space that they wind around (seeds 1 to 100)', () => {
    let crossed = 0;
    let given = 0;
    for (let seed = 1; seed <= 100; seed++) {
      const mesh = blob(seed);
      if (crossingsOf(mesh).pairs === 0) continue;
      crossed++;
      const made = arrange(mesh);
      if (!made) {
        given++;
        continue;
      }
      const volume = expectSound(made);
      const expected = windingVolume(mesh, 8_000, seed);
      expect(Math.abs(volume / expected - 1), `seed ${seed}`).toBeLessThan(0.06);
    }
    console.log(`${crossed} blobs crossed themselves, ${given} were given up`);
    expect(crossed).toBeGreaterThan(60);
    expect(given).toBeLessThanOrEqual(2);
  });
});

/** The tube between ring i and the next, closed by fans. */
function slice(knot: TriangleMesh, i: number, along: number, around: number): TriangleMesh {
  const ring = (number: number) =>
    Array.from(knot.positions.subarray(3 * around * number, 3 * around * (number + 1)));
  const positions = Float64Array.from([...ring(i), ...ring((i + 1) % along)]);
  const indices: number[] = [];
  for (let j = 0; j < around; j++) {
    const k = (j + 1) % around;
    indices.push(j, around + k, around + j, j, k, around + k);
    if (j > 0 && j < around - 1) {
      indices.push(0, k, j);
      indices.push(around, around + j, around + k);
    }
  }
  const mesh = { positions, indices: Uint32Array.from(indices) };
  return signedVolume(mesh) > 0
    ? mesh
    : {
        positions,
        indices: mesh.indices.map((_, at) => mesh.indices[at - (at % 3) + (2 - (at % 3))]!),
      };
}
