import * as bunny from 'bunny';
import { boundingBox, scaleMesh } from '../../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { demoModels } from '../../../server/seed/demo-models.js';
import { inspectFile } from '../../../workers/inspecting/inspect-file.js';
import { type Solids } from '../../../workers/solids/solid-kernel.js';
import { bowl, lumpyBody } from '../../support/planning-shapes.js';
import { box, facetedTurning, torus, torusKnot, toSoup, voxels } from '../../support/shapes.js';
import { binaryStl } from '../../support/stl-files.js';

export type ModelFamily = 'organic' | 'shell' | 'ring' | 'tall' | 'flat' | 'boxy';

export interface PlanModel {
  readonly name: string;
  readonly family: ModelFamily;
  readonly make: () => TriangleMesh;
}

/** What the planner is measured on: made by code, but for the scan of a rabbit, a package's own. */
export function planModels(solids: Solids): PlanModel[] {
  const demo = (name: string): TriangleMesh => {
    const model = demoModels.find((one) => one.name === name)!;
    const { positions, indices } = model.make();
    return { positions: Float64Array.from(positions), indices: Uint32Array.from(indices) };
  };
  return [
    { name: 'rabbit 600', family: 'organic', make: () => rabbit(600, solids) },
    { name: 'torus knot 590', family: 'organic', make: () => torusKnot(90, 25, 500, 24) },
    { name: 'lumpy body 560', family: 'organic', make: () => lumpyBody(190, 9, 4) },
    { name: 'heron', family: 'organic', make: () => demo('Heron') },
    { name: 'hull 512 × 294 × 90', family: 'shell', make: () => hull(512, 294, 90, 3) },
    { name: 'bell cowl', family: 'shell', make: () => demo('Harbour bell cowl') },
    { name: 'bowl 460', family: 'shell', make: () => bowl(230, 3, 96, 32) },
    { name: 'elbow', family: 'shell', make: () => demo('Ventilator elbow') },
    { name: 'ring 600', family: 'ring', make: () => torus(260, 40, 128, 32).mesh },
    { name: 'flat ring 700', family: 'ring', make: () => flatRing(350, 280, 30) },
    { name: 'column 1400', family: 'tall', make: () => column(1400) },
    { name: 'moon disc', family: 'flat', make: () => demo('Moon disc') },
    { name: 'panel 900 × 620', family: 'flat', make: () => box([0, 0, 0], [900, 620, 18]).mesh },
    {
      name: 'block 600 × 500 × 1800',
      family: 'boxy',
      make: () => box([0, 0, 0], [600, 500, 1800]).mesh,
    },
    { name: 'stool frame', family: 'boxy', make: stool },
  ];
}

/** The scan's holes in the base are filled as the product would after a yes. */
function rabbit(longestMm: number, solids: Solids): TriangleMesh {
  const positions = Float64Array.from(bunny.positions.flat());
  const indices = Uint32Array.from(bunny.cells.flat());
  const { size } = boundingBox(positions);
  const scaled = scaleMesh({ positions, indices }, longestMm / Math.max(...size));
  const { solid } = inspectFile(
    {
      bytes: binaryStl(toSoup(upright(scaled))),
      fileName: 'rabbit.stl',
      choices: { parts: null, fillHolesUpTo: 1e4, remeshCells: null },
    },
    { solids },
  );
  if (!solid) throw new Error('The rabbit could not be mended.');
  return solid;
}

/** From y up to z up. */
function upright({ positions, indices }: TriangleMesh): TriangleMesh {
  const turned = new Float64Array(positions.length);
  for (let k = 0; k < positions.length; k += 3) {
    turned[k] = positions[k]!;
    turned[k + 1] = -positions[k + 2]!;
    turned[k + 2] = positions[k + 1]!;
  }
  return { positions: turned, indices };
}

/** Half of an ellipsoid's skin, open at the top. */
function hull(length: number, width: number, depth: number, wall: number): TriangleMesh {
  const mesh = bowl(1000, 1000 * (wall / depth), 96, 32);
  return {
    ...mesh,
    positions: mesh.positions.map((at, k) => at * ([length / 2, width / 2, depth][k % 3]! / 1000)),
  };
}

function flatRing(outer: number, inner: number, height: number): TriangleMesh {
  const profile = [
    [outer, 0],
    [outer, height],
    [inner, height],
    [inner, 0],
  ] as const;
  return facetedTurning('flat ring', profile, 128).mesh;
}

/** A turned column with three beads. */
function column(heightMm: number): TriangleMesh {
  const steps = 120;
  const profile: [number, number][] = [[0, 0]];
  for (let k = 0; k <= steps; k++) {
    const share = k / steps;
    profile.push([70 + 35 * Math.cos(6 * Math.PI * share) ** 2, heightMm * share]);
  }
  profile.push([0, heightMm]);
  return facetedTurning('column', profile, 64).mesh;
}

/** Four legs, a seat and stretchers: bars of 60 mm. */
function stool(): TriangleMesh {
  const isLeg = (x: number, y: number) => (x === 0 || x === 6) && (y === 0 || y === 6);
  const isRung = (x: number, y: number, z: number) =>
    z === 3 && (x === 0 || x === 6 || y === 0 || y === 6);
  return voxels('stool', [7, 7, 9], 60, (x, y, z) => z === 8 || isLeg(x, y) || isRung(x, y, z))
    .mesh;
}
