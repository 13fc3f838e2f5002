import { beforeAll, describe, expect, it } from 'vitest';
import { type CutResult, cutMesh } from '../../shared/geometry/cutting/cut-mesh.js';
import { defaultSnapMm } from '../../shared/geometry/cutting/plane-sides.js';
import { placeCut } from '../../shared/geometry/cutting/place-cut.js';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { roundAndWeld } from '../../shared/geometry/mesh/rounded.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { identityMotion } from '../../shared/geometry/vectors/rigid-motion.js';
import { planesThrough, type TestPlane } from '../support/cutting-planes.js';
import { volumeAbove } from '../support/half-space-volume.js';
import { seededRandom } from '../support/random.js';
import * as shapes from '../support/shapes.js';
import {
  loadManifold,
  type ManifoldModule,
  manifoldTriangulator,
} from '../support/triangulator.js';

const SEED = 20_240_611;
/** Share of the whole solid's volume. */
const VOLUME_TOLERANCE = 1e-9;
const PLACING_TOLERANCE_MM = 0.02;

const knotMesh = shapes.torusKnot(40, 16, 120, 24);
const solids: shapes.Shape[] = [
  shapes.sphere(50, 32, 20),
  shapes.prism(30, 90, 24),
  shapes.prism(35, 60, 6),
  shapes.cone(40, 90, 32),
  shapes.torus(50, 18, 40, 20),
  shapes.box([-10, 0, 5], [70, 40, 35]),
  shapes.sevenEighthsCube(80),
  shapes.boxWithCavity(60, 30),
  shapes.voxels('staircase of cubes', [3, 3, 3], 20, (x, y, z) => x + y >= z),
  { name: 'torus knot', mesh: knotMesh, volumeMm3: volumeAbove(knotMesh, farBelow()) },
];

let manifold: ManifoldModule;
beforeAll(async () => {
  manifold = await loadManifold();
});

function farBelow(): Plane {
  return { normal: [0, 0, 1], offset: -1000 };
}

function cut(mesh: TriangleMesh, plane: Plane): CutResult {
  return cutMesh(mesh, plane, { triangulate: manifoldTriangulator(manifold), capTag: 7 });
}

/** What is wrong with a cut of a solid, in words; none when it is right. */
function faultsOf(shape: shapes.Shape, plane: Plane): string[] {
  const faults: string[] = [];
  const { above, below } = cut(shape.mesh, plane);
  const allowed = VOLUME_TOLERANCE * shape.volumeMm3;
  for (const [name, mesh] of Object.entries({ above, below })) {
    if (!edgeReport(mesh).closed) faults.push(`${name} is not closed by index`);
    if (!roundAndWeld(mesh, identityMotion).report.closed) {
      faults.push(`${name} is not closed after rounding`);
    }
    const judged = manifoldVolume(mesh);
    if (judged === null) faults.push(`${name} is no manifold to manifold-3d`);
  }
  const volumeOver = signedVolume(above);
  const volumeUnder = signedVolume(below);
  if (Math.abs(volumeOver + volumeUnder - shape.volumeMm3) > allowed) {
    faults.push(`volumes add up to ${volumeOver + volumeUnder}, not ${shape.volumeMm3}`);
  }
  const expected = volumeAbove(shape.mesh, plane);
  if (Math.abs(volumeOver - expected) > allowed) {
    faults.push(`above holds ${volumeOver}, by integration ${expected}`);
  }
  return faults;
}

/** Volume of the mesh as manifold-3d reads it (in single precision), null when it refuses it. */
function manifoldVolume(mesh: TriangleMesh): number | null {
  if (mesh.indices.length === 0) return 0;
  const solid = importMesh(mesh);
  if (solid === null) return null;
  const volume = solid.volume();
  solid.delete();
  return volume;
}

function importMesh(mesh: TriangleMesh) {
  const rounded = roundAndWeld(mesh, identityMotion);
  try {
    return manifold.Manifold.ofMesh(
      new manifold.Mesh({
        numProp: 3,
        vertProperties: rounded.positions,
        triVerts: rounded.indices,
      }),
    );
  } catch {
    // ofMesh throws when the mesh is not an oriented 2-manifold.
    return null;
  }
}

/** The shape with coordinates that single precision holds exactly, as a file brings it. */
function asInFile(mesh: TriangleMesh): TriangleMesh {
  return { ...mesh, positions: Float64Array.from(Float32Array.from(mesh.positions)) };
}

function planesFor(mesh: TriangleMesh): TestPlane[] {
  return planesThrough(mesh, seededRandom(SEED), 10, 4);
}

const planeCount = solids.length * planesFor(solids[0]!.mesh).length;

describe(`cuts of ${solids.length} solids along ${planeCount} planes, seed ${SEED}`, () => {
  it('covers at least 200 planes', () => {
    expect(planeCount).toBeGreaterThanOrEqual(200);
  });

  describe.each(solids)('$name', (shape) => {
    it('has the volume of its closed form', () => {
      expect(edgeReport(shape.mesh).closed).toBe(true);
      expect(signedVolume(shape.mesh) / shape.volumeMm3).toBeCloseTo(1, 11);
    });

    it('leaves closed sides that add up to the whole on every plane', () => {
      const faults = planesFor(shape.mesh).flatMap(({ kind, plane }) => {
        const isDegenerate = kind !== 'anywhere';
        const placed = isDegenerate ? placeCut(shape.mesh, plane, PLACING_TOLERANCE_MM) : plane;
        return faultsOf(shape, placed).map(
          (fault) => `${kind} ${JSON.stringify(placed)}: ${fault}`,
        );
      });
      expect(faults).toEqual([]);
    });

    it('stays closed by index on planes exactly through its vertices, edges and faces', () => {
      const faults = planesFor(shape.mesh).flatMap(({ kind, plane }) => {
        const { above, below } = cut(shape.mesh, plane);
        const sum = signedVolume(above) + signedVolume(below);
        const isRight =
          edgeReport(above).closed &&
          edgeReport(below).closed &&
          Math.abs(sum - shape.volumeMm3) <= VOLUME_TOLERANCE * shape.volumeMm3;
        return isRight ? [] : [`${kind} ${JSON.stringify(plane)}`];
      });
      expect(faults).toEqual([]);
    });

    it('gives both sides the volume that manifold-3d gives them', () => {
      const mesh = asInFile(shape.mesh);
      const whole = importMesh(mesh)!;
      let strict = 0;
      for (const { plane } of planesFor(mesh)) {
        const ours = cut(mesh, plane);
        const theirs = whole.splitByPlane(plane.normal as [number, number, number], plane.offset);
        // It imports single precision and joins what is closer than its tolerance, so a vertex
        // that close to the plane, but not on it, may shift its section by as much.
        const isStrict = !hasVertexWithin(mesh, plane, whole.tolerance());
        if (isStrict) strict++;
        const shift = isStrict ? 0 : whole.tolerance() * ours.sectionAreaMm2;
        const allowed = Math.max(VOLUME_TOLERANCE * shape.volumeMm3, shift);
        expect(Math.abs(signedVolume(ours.above) - theirs[0].volume())).toBeLessThan(allowed);
        expect(Math.abs(signedVolume(ours.below) - theirs[1].volume())).toBeLessThan(allowed);
        theirs.forEach((side) => side.delete());
      }
      whole.delete();
      expect(strict).toBeGreaterThanOrEqual(20);
    });
  });
});

/** Whether a vertex is closer to the plane than `distanceMm` without lying on it. */
function hasVertexWithin(mesh: TriangleMesh, { normal, offset }: Plane, distanceMm: number) {
  const on = defaultSnapMm(mesh.positions);
  for (let i = 0; i < mesh.positions.length; i += 3) {
    const [x, y, z] = [0, 1, 2].map((k) => mesh.positions[i + k]!) as [number, number, number];
    const distance = Math.abs(normal[0] * x + normal[1] * y + normal[2] * z - offset);
    if (distance > on && distance < distanceMm) return true;
  }
  return false;
}
