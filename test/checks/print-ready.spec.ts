import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { usualJoints } from '../../shared/jobs/joint-plan.js';
import { type CutTree } from '../../shared/jobs/recipe.js';
import { usualMaterial } from '../../shared/jobs/material-profile.js';
import { usualWishes } from '../../shared/jobs/plan-wishes.js';
import { makePieces } from '../../workers/building/make-pieces.js';
import { pinMeasures } from '../../workers/jointing/seam-pin.js';
import { readWrittenStl } from '../../workers/proof/read-written-stl.js';
import { silentContext } from '../../workers/runtime/job-context.js';
import { loadSolids } from '../../workers/solids/solid-kernel.js';
import { askAdmesh, hasAdmesh } from '../support/admesh.js';
import { bowl, lumpyBody } from '../support/planning-shapes.js';
import {
  box,
  boxWithCavity,
  cone,
  prism,
  sphere,
  torus,
  torusKnot,
  voxels,
} from '../support/shapes.js';
import { loadManifold, type ManifoldModule } from '../support/triangulator.js';

/**
 * Ten models in two envelopes with joints, marks and bevels: judged by admesh and manifold-3d on
 * the bytes that were written.
 */
const envelopes: readonly [string, BuildSpace][] = [
  ['a rectangular bed', { shape: 'rectangular', widthMm: 150, depthMm: 140, heightMm: 160 }],
  ['a round bed', { shape: 'round', diameterMm: 180, heightMm: 200 }],
];
const models: readonly [string, () => TriangleMesh][] = [
  ['a block', () => box([0, 0, 0], [260, 120, 90]).mesh],
  ['a ball', () => sphere(120, 48, 24).mesh],
  ['a cone', () => cone(100, 300, 48).mesh],
  ['a post', () => prism(50, 420, 24).mesh],
  ['a ring', () => torus(130, 35, 64, 20).mesh],
  ['a knot', () => torusKnot(70, 26, 220, 24)],
  ['a lumpy body', () => lumpyBody(120, 9, 3)],
  ['a thin box', () => boxWithCavity(220, 214).mesh],
  ['a bowl', () => bowl(140, 4, 64, 20)],
  [
    'a frame',
    () =>
      voxels('frame', [7, 2, 7], 40, (x, _, z) => x === 0 || x === 6 || z === 0 || z === 6).mesh,
  ],
];
const cases = models.flatMap(([model, make]) =>
  envelopes.map(([bed, space]) => ({ title: `${model} on ${bed}`, make, space })),
);

let folder = '';
let manifold: ManifoldModule;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'seamwright-print-'));
  manifold = await loadManifold();
});
afterAll(() => rm(folder, { recursive: true, force: true }));

/** A facet soup as manifold-3d's solid, moved back to the assembled model by the inverse motion. */
function solidOf(corners: Float32Array, placement: readonly number[] | null) {
  const triVerts = Uint32Array.from({ length: corners.length / 3 }, (_, i) => i);
  const soup = new manifold.Mesh({ numProp: 3, vertProperties: corners, triVerts });
  soup.merge();
  const solid = new manifold.Manifold(soup);
  if (!placement) return solid;
  const m = placement;
  const back = (axis: number) => -(m[axis]! * m[3]! + m[4 + axis]! * m[7]! + m[8 + axis]! * m[11]!);
  // Column-major 4 × 4 of the transposed turn and the shift back.
  const moved = solid.transform([
    m[0]!,
    m[1]!,
    m[2]!,
    0,
    m[4]!,
    m[5]!,
    m[6]!,
    0,
    m[8]!,
    m[9]!,
    m[10]!,
    0,
    back(0),
    back(1),
    back(2),
    1,
  ]);
  solid.delete();
  return moved;
}

const soupOf = ({ positions, indices }: TriangleMesh) =>
  Float32Array.from([...indices].flatMap((v) => [...positions.subarray(3 * v, 3 * v + 3)]));

describe.each(cases)('$title', { timeout: 240_000 }, ({ title, make, space }) => {
  it('becomes sound pieces with pins in solid that go together without overlap', async (test) => {
    const mesh = make();
    const store = new Map<string, Uint8Array>();
    const { plan } = await makePieces(
      {
        mesh,
        modelName: title,
        millimetresPerUnit: 1,
        spaces: [space],
        wishes: usualWishes,
        joints: usualJoints,
        material: usualMaterial,
        orientations: [],
        seed: 1,
        tree: null,
        effort: 0.15,
      },
      {
        solids: await loadSolids(),
        files: {
          write: async (name, bytes) => void store.set(name, bytes),
          read: async (name) => store.get(name)!,
        },
        context: silentContext,
      },
    );
    expect(plan.proof.filter((row) => !row.passed)).toEqual([]);
    const volume = signedVolume(mesh);
    const stls = [...store.keys()].filter((name) => name.endsWith('.stl'));
    expect(stls.length).toBeGreaterThanOrEqual(plan.pieces.length);
    for (const name of stls) {
      const { corners } = readWrittenStl(store.get(name)!);
      const solid = solidOf(corners, null);
      expect(solid.status(), name).toBe('NoError');
      expect(solid.volume()).toBeGreaterThan(0);
      solid.delete();
      if (!hasAdmesh()) continue;
      const path = join(folder, 'one.stl');
      await writeFile(path, store.get(name)!);
      expect(askAdmesh(path), name).toEqual({ disconnectedFacets: 0, parts: 1 });
    }

    // Put together again: nothing overlaps, and what is missing is what joints and bevels took.
    const back = plan.pieces.map(({ file, placement }) =>
      solidOf(readWrittenStl(store.get(file)!).corners, placement),
    );
    let overlap = 0;
    for (const [k, one] of back.entries())
      for (const other of back.slice(k + 1)) {
        const shared = one.intersect(other);
        overlap += shared.volume();
        shared.delete();
      }
    expect(overlap).toBeLessThan(1e-6 * volume);
    const whole = solidOf(soupOf(mesh), null);
    const together = manifold.Manifold.union(back);
    const outside = together.subtract(whole);
    expect(outside.volume()).toBeLessThan(1e-6 * volume);
    const total = plan.pieces.reduce((sum, piece) => sum + piece.volumeMm3, 0);
    expect(Math.abs(together.volume() / total - 1)).toBeLessThan(2e-6);

    // No pin leaves the solid: its cylinder with its wall minus the model leaves nothing.
    for (const seam of plan.seams) {
      const { plane } = cutPlane(plan.recipe.tree, seam.cut)!;
      for (const { at, diameterMm, depthsMm, fit } of seam.joint!.fasteners) {
        if (seam.joint!.kind === 'backing-lip') continue;
        const { floorMm, glueRoomMm } = pinMeasures(diameterMm, {
          lineWidthMm: usualMaterial.lineWidthMm,
          edgeBevelMm: usualJoints.edgeBevelMm,
        });
        const radius = (diameterMm + usualMaterial.clearances.locatingMm) / 2 + 0.75;
        const half = Math.max(...depthsMm) + glueRoomMm + floorMm - 0.02;
        const upright = manifold.Manifold.cylinder(2 * half, radius, radius, 32, true);
        const pin = turnedTo(upright, plane.normal, at);
        const left = pin.subtract(whole);
        expect(left.volume(), `${seam.between.join(' and ')}, ${fit}`).toBeLessThan(1e-6 * volume);
        for (const handle of [upright, pin, left]) handle.delete();
      }
    }
    for (const handle of [...back, whole, together, outside]) handle.delete();
    if (!hasAdmesh()) test.skip('admesh is not installed; manifold-3d passed every file.');
  });
});

/** The cut of a number, root first, above before below. */
function cutPlane(tree: CutTree, wanted: number) {
  let next = 0;
  const find = (node: typeof tree): Extract<typeof tree, { kind: 'cut' }> | null => {
    if (node.kind === 'leaf') return null;
    if (++next === wanted) return node;
    return find(node.above) ?? find(node.below);
  };
  return find(tree);
}

/** A solid along z turned so that z is `normal`, then moved to `at`. */
function turnedTo(
  solid: InstanceType<ManifoldModule['Manifold']>,
  [nx, ny, nz]: readonly [number, number, number],
  at: readonly [number, number, number],
) {
  const other = Math.abs(nx) < 0.6 ? [1, 0, 0] : [0, 1, 0];
  const u = unit([
    ny * other[2]! - nz * other[1]!,
    nz * other[0]! - nx * other[2]!,
    nx * other[1]! - ny * other[0]!,
  ]);
  const v = [ny * u[2]! - nz * u[1]!, nz * u[0]! - nx * u[2]!, nx * u[1]! - ny * u[0]!];
  return solid.transform([
    u[0]!,
    u[1]!,
    u[2]!,
    0,
    v[0]!,
    v[1]!,
    v[2]!,
    0,
    nx,
    ny,
    nz,
    0,
    at[0],
    at[1],
    at[2],
    1,
  ]);
}

function unit(vector: readonly number[]): number[] {
  const size = Math.hypot(...vector);
  return vector.map((part) => part / size);
}
