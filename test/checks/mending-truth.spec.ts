import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { noChoices, type MendingChoices } from '../../shared/jobs/mending-choices.js';
import { inspectFile } from '../../workers/inspecting/inspect-file.js';
import { surfaceDeviation } from '../../workers/measuring/surface-deviation.js';
import { buildBvh } from '../../workers/measuring/triangle-bvh.js';
import { loadSolids, type Solids } from '../../workers/solids/solid-kernel.js';
import {
  addFins,
  cutWindow,
  duplicateFacets,
  flipFacets,
  jitterCorners,
  makeTJunctions,
  removeFacets,
} from '../support/damage.js';
import { seededRandom } from '../support/random.js';
import {
  boxWithCavity,
  join,
  sevenEighthsCube,
  sphere,
  torus,
  torusKnot,
  toSoup,
  turnInsideOut,
} from '../support/shapes.js';
import { binaryStl } from '../support/stl-files.js';

/** A shell of 3 mm, as large hollow props have (common practice, no source). */
const shell = join([sphere(60, 64, 32).mesh, turnInsideOut(sphere(57, 64, 32).mesh)]);
const shapes: Record<string, TriangleMesh> = {
  ball: sphere(50, 64, 32).mesh,
  ring: torus(40, 14, 64, 32).mesh,
  knot: torusKnot(20, 7, 300, 24),
  'hollow box': boxWithCavity(80, 50).mesh,
  'cube without an octant': sevenEighthsCube(80).mesh,
  'shell of 3 mm': shell,
};

interface Damage {
  /** Corners as the file gets them. */
  readonly breakIt: (mesh: TriangleMesh, random: () => number) => ArrayLike<number>;
  readonly choices?: Partial<MendingChoices>;
  /** Largest share of the volume and largest distance, mm, by which the mended solid may be off. */
  readonly volumeShare: number;
  readonly distanceMm: number;
  readonly kinds: readonly string[];
}

const everyHole = { fillHolesUpTo: 1e6 };
/** float32 corners and nothing else. */
const exact = { volumeShare: 2e-6, distanceMm: 2e-5 };

const damages: Record<string, Damage> = {
  'one facet gone': {
    breakIt: (mesh, random) => toSoup(removeFacets(mesh, 1, random)),
    ...exact,
    kinds: ['fill-holes'],
  },
  '30 % of the facets turned': {
    breakIt: (mesh, random) => toSoup(flipFacets(mesh, 0.3, random)),
    ...exact,
    kinds: ['turn-facets'],
  },
  'half of the facets twice': {
    breakIt: (mesh, random) => toSoup(duplicateFacets(mesh, 0.5, random)),
    ...exact,
    kinds: ['drop-duplicates'],
  },
  'inside out': {
    breakIt: (mesh) => toSoup(turnInsideOut(mesh)),
    ...exact,
    kinds: ['turn-shells'],
  },
  // Middles of sides are rounded to float32 and lie off the side by half a step.
  'T-junctions': {
    breakIt: (mesh, random) => toSoup(makeTJunctions(mesh, 0.2, random)),
    volumeShare: 1e-5,
    distanceMm: 1e-4,
    kinds: ['stitch'],
  },
  'corners moved by up to 0.0002 mm': {
    breakIt: (mesh, random) => jitterCorners(mesh, 2e-4, random),
    volumeShare: 3e-5,
    distanceMm: 4.2e-4,
    kinds: ['weld'],
  },
  fins: {
    breakIt: (mesh, random) => toSoup(addFins(mesh, 6, 3, random)),
    ...exact,
    kinds: ['drop-duplicates'],
  },
  // A window of 12 mm radius is closed by the least bend, not by the curve that was there.
  'a window': {
    breakIt: (mesh) => toSoup(cutWindow(mesh, firstPoint(mesh), 12)),
    choices: everyHole,
    volumeShare: 0.005,
    distanceMm: 3,
    kinds: ['fill-holes'],
  },
  'turned, doubled and with missing facets': {
    breakIt: (mesh, random) =>
      toSoup(removeFacets(duplicateFacets(flipFacets(mesh, 0.2, random), 0.2, random), 3, random)),
    choices: everyHole,
    volumeShare: 0.002,
    distanceMm: 1,
    kinds: ['turn-facets', 'drop-duplicates'],
  },
};

/** Of so few facets that a window takes none, or a whole corner that nobody could guess. */
function isCoarse({ indices }: TriangleMesh): boolean {
  return indices.length < 300;
}

function firstPoint({ positions }: TriangleMesh): [number, number, number] {
  return [positions[0]!, positions[1]!, positions[2]!];
}

let solids: Solids;
const table: string[] = [];
beforeAll(async () => {
  solids = await loadSolids();
});
afterAll(() =>
  console.log(['shape × damage: volume off by, largest distance', ...table].join('\n')),
);

function outsideVolume(mesh: TriangleMesh): number {
  return solids.withSolids(({ Manifold, Mesh, keep }) => {
    const vertProperties = Float32Array.from(mesh.positions);
    return keep(
      new Manifold(new Mesh({ numProp: 3, vertProperties, triVerts: mesh.indices })),
    ).volume();
  });
}

describe('mending measured against what was there before', () => {
  const cases = Object.keys(shapes).flatMap((shape) =>
    Object.keys(damages)
      .filter((damage) => damage !== 'a window' || !isCoarse(shapes[shape]!))
      .map((damage) => [shape, damage] as const),
  );

  it.each(cases)('a %s with %s', (shape, name) => {
    const truth = shapes[shape]!;
    const damage = damages[name]!;
    const soup = damage.breakIt(truth, seededRandom(4242));
    const { report, solid } = inspectFile(
      {
        bytes: binaryStl(soup),
        fileName: 'broken.stl',
        choices: { ...noChoices, ...damage.choices },
      },
      { solids },
    );
    expect(solid).not.toBeNull();
    expect(edgeReport(solid!).closed).toBe(true);
    const volume = signedVolume(truth);
    const share = Math.abs(report.volume / volume - 1);
    const there = surfaceDeviation(truth, buildBvh(solid!), 3000)!;
    const back = surfaceDeviation(solid!, buildBvh(truth), 3000)!;
    const distanceMm = Math.max(there.max, back.max);
    table.push(
      `${shape} × ${name}: ${(100 * share).toPrecision(2)} %, ${distanceMm.toPrecision(2)} mm`,
    );
    expect(share).toBeLessThan(damage.volumeShare);
    expect(distanceMm).toBeLessThan(damage.distanceMm);
    expect(Math.abs(outsideVolume(solid!) / report.volume - 1)).toBeLessThan(1e-5);
    const done = report.mending.map((step) => step.kind);
    for (const kind of damage.kinds) expect(done).toContain(kind);
    // What may not be changed silently is asked; nothing else is.
    const changed = Math.abs(report.volume / report.asRead.volume - 1) > 0.005;
    const grown = [0, 1, 2].some(
      (k) => Math.abs(report.size[k]! - report.asRead.size[k]!) > 4e-5 * Math.hypot(...report.size),
    );
    expect(report.asks.map((ask) => ask.kind)).toEqual(changed || grown ? ['accept'] : []);
  });

  it('makes a solid of the worst soup by rebuilding its surface', () => {
    const random = seededRandom(77);
    for (const shape of ['ball', 'ring', 'hollow box']) {
      const truth = shapes[shape]!;
      const torn = removeFacets(truth, truth.indices.length / 60, random);
      const worst = jitterCorners(
        flipFacets(duplicateFacets(torn, 0.1, random), 0.02, random),
        0.05,
        random,
      );
      const cells = 100;
      const { report, solid } = inspectFile(
        {
          bytes: binaryStl(worst),
          fileName: 'soup.stl',
          choices: { ...noChoices, remeshCells: cells },
        },
        { solids },
      );
      expect({
        shape,
        asks: report.asks,
        refusal: report.refusal,
        isSolid: solid !== null,
      }).toMatchObject({ isSolid: true });
      expect(edgeReport(solid!).closed).toBe(true);
      const share = Math.abs(report.volume / signedVolume(truth) - 1);
      const cellMm = Math.max(...report.asRead.size) / cells;
      const off = surfaceDeviation(truth, buildBvh(solid!), 3000)!;
      table.push(
        `${shape} × worst soup, rebuilt: ${(100 * share).toPrecision(2)} %, p95 ${off.p95.toPrecision(2)} mm`,
      );
      expect(share).toBeLessThan(0.03);
      expect(off.p95).toBeLessThan(1.5 * cellMm);
      expect(outsideVolume(solid!)).toBeCloseTo(report.volume, -2);
      expect(report.asks.map((ask) => ask.kind)).toEqual(['accept']);
    }
  });
});
