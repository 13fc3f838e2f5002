import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { cutMesh } from '../../shared/geometry/cutting/cut-mesh.js';
import { placeCut } from '../../shared/geometry/cutting/place-cut.js';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { roundAndWeld } from '../../shared/geometry/mesh/rounded.js';
import { splitIntoSolids } from '../../shared/geometry/mesh/solids.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { identityMotion } from '../../shared/geometry/vectors/rigid-motion.js';
import { readStl } from '../../workers/intake/stl-reader.js';
import { planesThrough } from '../support/cutting-planes.js';
import { volumeAbove } from '../support/half-space-volume.js';
import { seededRandom } from '../support/random.js';
import {
  loadManifold,
  type ManifoldModule,
  manifoldTriangulator,
} from '../support/triangulator.js';

const SEED = 2718;
const PLACING_TOLERANCE_MM = 0.02;
/** Real meshes beside the repository; each is closed by an exact weld. */
const folder = join(import.meta.dirname, '..', '..', '..', 'shared', 'meshes', 'stl');
const names = [
  'o01_spot',
  'o05_scorpion',
  'o06_skull',
  'o08_boat',
  'o10_penguin',
  'm01_plate_holes',
  'm02_tray_bottom',
  'm14_7_8ths_cube',
  'm17_anchor',
  's01_hollow_spot_3mm_closed',
  's03_helmet_2.4mm',
  's06_truss_1200',
  's11_matryoshka_3_shells',
  's17_bowl_3mm_460',
  's25_far_from_origin_1e5',
];
const isPresent = existsSync(folder);
if (!isPresent) console.log('Left out: cuts of real meshes, none beside the repository.');

let manifold: ManifoldModule;
beforeAll(async () => {
  manifold = await loadManifold();
});

function faultsOf(mesh: TriangleMesh, whole: number, plane: Plane): string[] {
  const triangulate = manifoldTriangulator(manifold);
  const placed = placeCut(mesh, plane, PLACING_TOLERANCE_MM);
  const sides = cutMesh(mesh, placed, { triangulate, capTag: 1 });
  const faults: string[] = [];
  for (const [name, side] of [
    ['above', sides.above],
    ['below', sides.below],
  ] as const) {
    if (!edgeReport(side).closed) faults.push(`${name} is not closed`);
    for (const solid of splitIntoSolids(side)) {
      const { report } = roundAndWeld(solid, identityMotion);
      if (!report.closed) faults.push(`${name} is not closed after rounding`);
    }
  }
  const above = signedVolume(sides.above);
  if (Math.abs(above + signedVolume(sides.below) - whole) > 1e-9 * whole)
    faults.push('volume lost');
  if (Math.abs(above - volumeAbove(mesh, placed)) > 1e-9 * whole) faults.push('volume misplaced');
  return faults;
}

describe.skipIf(!isPresent)(`cuts of real meshes, seed ${SEED}`, () => {
  it.each(names)('%s', (name) => {
    const { mesh } = readStl(readFileSync(join(folder, `${name}.stl`)), `${name}.stl`);
    expect(edgeReport(mesh).closed).toBe(true);
    const whole = signedVolume(mesh);
    const planes = planesThrough(mesh, seededRandom(SEED), 4, 2);
    const faults = planes.flatMap(({ kind, plane }) =>
      faultsOf(mesh, whole, plane).map((fault) => `${kind} ${JSON.stringify(plane)}: ${fault}`),
    );
    expect(faults).toEqual([]);
  });
});
