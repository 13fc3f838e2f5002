import { beforeAll, describe, expect, it } from 'vitest';
import { randomDirection, seededRandom } from '../../../test/support/random.js';
import * as shapes from '../../../test/support/shapes.js';
import { loadManifold, manifoldTriangulator } from '../../../test/support/triangulator.js';
import { roundAndWeld } from '../mesh/rounded.js';
import { edgeReport } from '../mesh/topology.js';
import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { type Plane } from '../vectors/plane.js';
import { applyMotion, identityMotion, rotationTaking } from '../vectors/rigid-motion.js';
import { cutMesh, type PolygonTriangulator } from './cut-mesh.js';
import { placeCut } from './place-cut.js';

const SEED = 41;
const TOLERANCE_MM = 0.02;

let triangulate: PolygonTriangulator;
beforeAll(async () => {
  triangulate = manifoldTriangulator(await loadManifold());
});

/** Points at given heights; placing looks at vertices only, as long as none lies on the plane. */
function heights(...zs: number[]): TriangleMesh {
  return {
    positions: Float64Array.from(zs.flatMap((z) => [0, 0, z])),
    indices: new Uint32Array(0),
  };
}

const level = (offset: number): Plane => ({ normal: [0, 0, 1], offset });
const placed = (mesh: TriangleMesh, offset: number) =>
  placeCut(mesh, level(offset), TOLERANCE_MM).offset;

function clearance({ positions }: TriangleMesh, { normal, offset }: Plane): number {
  let least = Infinity;
  for (let i = 0; i < positions.length; i += 3) {
    const [x, y, z] = [positions[i]!, positions[i + 1]!, positions[i + 2]!];
    least = Math.min(least, Math.abs(normal[0] * x + normal[1] * y + normal[2] * z - offset));
  }
  return least;
}

describe('placing a cut', () => {
  it('leaves a plane alone that is clear of vertices', () => {
    expect(placed(heights(-5, 5), 1)).toBe(1);
    expect(placed(heights(-5, 0.5, 5), 0.52001)).toBe(0.52001);
  });

  it('moves as little as gives the full tolerance of room', () => {
    expect(placed(heights(-5, 0.005, 5), 0)).toBeCloseTo(-0.015, 12);
    expect(placed(heights(-5, -0.001, 5), 0)).toBeCloseTo(0.019, 12);
  });

  it('takes the middle of the widest gap when no place has that much', () => {
    expect(placed(heights(-5, -0.019, -0.01, 0, 0.012, 0.03, 5), 0)).toBeCloseTo(0.02, 12);
    expect(placed(heights(-5, -0.022, -0.01, 0.004, 0.006, 0.021, 5), 0)).toBeCloseTo(0.0135, 12);
  });

  it('does not leave the mesh for room', () => {
    expect(placed(heights(-5, -0.003, 0.004), 0)).toBeCloseTo(-0.02, 12);
  });

  it('keeps a plane along a face or a ring of edges', () => {
    expect(placed(shapes.sevenEighthsCube(80).mesh, 40)).toBe(40);
    expect(placed(shapes.torus(50, 18, 24, 12).mesh, 0)).toBe(0);
    expect(placed(shapes.box([0, 0, 0], [9, 9, 9]).mesh, 9)).toBe(9);
  });

  it('moves to the outer side of faces that rounding left not quite flat', () => {
    // A floor, a turned cube and single precision: its corners miss their plane by micrometres.
    const { mesh } = shapes.sevenEighthsCube(80);
    const turn = rotationTaking([0, 0, 1], [0.36, 0.48, 0.8]);
    const positions = Float64Array.from(Float32Array.from(applyMotion(turn, mesh.positions)));
    const turned = { ...mesh, positions };
    const up: Plane = { normal: [0.36, 0.48, 0.8], offset: 40 };
    const down: Plane = { normal: [-0.36, -0.48, -0.8], offset: -40 };
    expect(placeCut(turned, up, TOLERANCE_MM).offset).toBeCloseTo(40 + TOLERANCE_MM, 4);
    expect(placeCut(turned, down, TOLERANCE_MM).offset).toBeCloseTo(-40 - TOLERANCE_MM, 4);
    // Nothing is cut off an outer face.
    const top: Plane = { ...up, offset: 80 };
    const { above } = cutMesh(turned, placeCut(turned, top, TOLERANCE_MM), {
      triangulate,
      capTag: 1,
    });
    expect(above.indices.length).toBe(0);
  });

  it('moves off an edge that only touches the plane, so that the sides stay closed', () => {
    // A valley whose bottom lies on the plane: left on it, both slopes would meet the cap there.
    const polygon = [
      [0, 0],
      [40, 0],
      [40, 20],
      [20, 10],
      [0, 20],
    ] as const;
    const flat = shapes.extrude(
      polygon,
      [...triangulate([Float64Array.from(polygon.flat())])],
      0,
      50,
    );
    const plane: Plane = { normal: [0, 1, 0], offset: 10 };
    const moved = placeCut(flat, plane, TOLERANCE_MM);
    expect(Math.abs(moved.offset - 10)).toBeCloseTo(TOLERANCE_MM, 12);
    const { above, below } = cutMesh(flat, moved, { triangulate, capTag: 1 });
    for (const side of [above, below]) {
      expect(edgeReport(side).closed).toBe(true);
      expect(roundAndWeld(side, identityMotion).report.closed).toBe(true);
    }
  });

  it(`never moves farther than allowed nor nearer to a vertex, seed ${SEED}`, () => {
    const random = seededRandom(SEED);
    const mesh = shapes.torusKnot(40, 16, 400, 60);
    for (let round = 0; round < 100; round++) {
      const wanted: Plane = { normal: randomDirection(random), offset: 60 * random() - 30 };
      const found = placeCut(mesh, wanted, TOLERANCE_MM);
      expect(Math.abs(found.offset - wanted.offset)).toBeLessThanOrEqual(TOLERANCE_MM + 1e-12);
      const before = Math.min(clearance(mesh, wanted), TOLERANCE_MM);
      expect(clearance(mesh, found)).toBeGreaterThanOrEqual(before - 1e-12);
    }
  });
});
