import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { planModel } from '../../workers/cli/plan-model.js';
import { writeStl } from '../../workers/export/stl-writer.js';
import { readWrittenStl } from '../../workers/proof/read-written-stl.js';
import { silentContext } from '../../workers/runtime/job-context.js';
import {
  box,
  boxWithCavity,
  cone,
  prism,
  sevenEighthsCube,
  torus,
  torusKnot,
} from '../support/shapes.js';
import { loadManifold, type ManifoldModule } from '../support/triangulator.js';
import { askAdmesh, hasAdmesh } from '../support/admesh.js';

/** The pieces of whole plans, judged by programs and arithmetic that had no part in making them. */

const bed: BuildSpace = { shape: 'rectangular', widthMm: 220, depthMm: 220, heightMm: 250 };
const roundBed: BuildSpace = { shape: 'round', diameterMm: 200, heightMm: 300 };
const cube = (side: number) => box([0, 0, 0], [side, side, side]).mesh;

interface Case {
  title: string;
  mesh: TriangleMesh;
  space: BuildSpace;
  pieces?: number;
}
const cases: Case[] = [
  { title: 'a cube of 500 mm', mesh: cube(500), space: bed },
  {
    title: 'a cube away from the origin',
    mesh: box([900, -70, 33], [1200, 200, 300]).mesh,
    space: bed,
  },
  { title: 'a torus knot', mesh: torusKnot(90, 38, 300, 36), space: bed },
  { title: 'a hollow shell', mesh: boxWithCavity(300, 294).mesh, space: bed },
  { title: 'a cube without an octant', mesh: sevenEighthsCube(420).mesh, space: bed },
  { title: 'a cone', mesh: cone(160, 500, 90).mesh, space: bed },
  {
    title: 'a box of exactly the build volume',
    mesh: box([0, 0, 0], [220, 220, 250]).mesh,
    space: bed,
    pieces: 1,
  },
  {
    title: 'a box 0.2 mm too long',
    mesh: box([0, 0, 0], [400, 200, 60]).mesh,
    space: bed,
    pieces: 2,
  },
  {
    title: 'a small box with a sealed hollow',
    mesh: boxWithCavity(100, 60).mesh,
    space: bed,
    pieces: 1,
  },
  { title: 'a ring on a round bed', mesh: torus(180, 40, 72, 24).mesh, space: roundBed },
  {
    title: 'a pillar that nearly fills a round bed',
    mesh: prism(99.99, 300, 64).mesh,
    space: roundBed,
    pieces: 1,
  },
];

let folder = '';
let manifold: ManifoldModule;
const admeshIsHere = hasAdmesh();

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'seamwright-pieces-'));
  manifold = await loadManifold();
});
afterAll(() => rm(folder, { recursive: true, force: true }));

async function planned({ title, mesh, space }: Case, run = 'first') {
  const modelPath = join(folder, `${title}.stl`);
  const file = { positions: Float32Array.from(mesh.positions), indices: mesh.indices };
  await writeFile(modelPath, writeStl(file, 'a test model'));
  const outFolder = join(folder, `${title}, ${run}`);
  const choices = { fillHolesUpToMm: null, remeshCells: null, parts: null, accept: false };
  const spaces = [space];
  const command = {
    modelPath,
    spaces,
    wishesPath: null,
    // Plain pieces: their volumes add up to the model as they are.
    jointsPath: 'none',
    material: null,
    seed: 1,
    millimetresPerUnit: 1,
    outFolder,
    ...choices,
  };
  return { report: await planModel(command, silentContext), outFolder };
}

/** Volume of a facet soup about its first corner. */
function volumeOf(corners: Float32Array): number {
  const at = (i: number) => corners[i] - corners[i % 3];
  let sixfold = 0;
  for (let i = 0; i < corners.length; i += 9) {
    const [ax, ay, az, bx, by, bz, cx, cy, cz] = Array.from({ length: 9 }, (_, k) => at(i + k));
    sixfold += ax * (by * cz - bz * cy) + ay * (bz * cx - bx * cz) + az * (bx * cy - by * cx);
  }
  return sixfold / 6;
}

/** manifold-3d's own opinion of a facet soup: its status, its parts, its volume. */
function askManifold(corners: Float32Array) {
  const triVerts = Uint32Array.from({ length: corners.length / 3 }, (_, i) => i);
  const soup = new manifold.Mesh({ numProp: 3, vertProperties: corners, triVerts });
  soup.merge();
  const solid = new manifold.Manifold(soup);
  const answer = { status: solid.status(), volume: solid.volume() };
  solid.delete();
  return answer;
}

/** A whole plan on a machine that is busy with other tests. */
const PATIENCE_MS = 240_000;

describe.each(cases)('$title', { timeout: PATIENCE_MS }, (shape) => {
  it('becomes closed pieces that fit, whose volumes add up to the model', async (test) => {
    const { report, outFolder } = await planned(shape);
    expect(report.proof.filter((row) => !row.passed)).toEqual([]);
    expect(report.model.closed).toBe(true);
    expect(report.pieces.length).toBeGreaterThanOrEqual(report.bounds.pieces);
    if (shape.pieces !== undefined) expect(report.pieces).toHaveLength(shape.pieces);
    const { space } = shape;
    let total = 0;
    for (const piece of report.pieces) {
      expect(piece.file).toBe(join(outFolder, 'pieces', `${piece.name}.stl`));
      expect(piece.fits).toBe(true);
      const bytes = await readFile(piece.file);
      const { corners, facets, sizeMatches } = readWrittenStl(bytes);
      expect(sizeMatches).toBe(true);
      expect(facets).toBe(piece.triangles);
      expectInside(corners, space);
      const volume = volumeOf(corners);
      expect(Math.abs(volume / piece.volumeMm3 - 1)).toBeLessThan(1e-9);
      total += volume;
      const opinion = askManifold(corners);
      expect(opinion.status).toBe('NoError');
      expect(Math.abs(opinion.volume / volume - 1)).toBeLessThan(1e-4);
      if (!admeshIsHere) continue;
      const hollows = shape.title.includes('sealed') ? 1 : 0;
      expect(askAdmesh(piece.file)).toEqual({ disconnectedFacets: 0, parts: 1 + hollows });
    }
    const model = volumeOf(
      readWrittenStl(await readFile(join(folder, `${shape.title}.stl`))).corners,
    );
    expect(Math.abs(total / model - 1)).toBeLessThan(1e-6);
    if (!admeshIsHere) test.skip('admesh is not installed: everything else passed.');
  });
});

it(
  'gives the same bytes for the same model, envelope and seed',
  { timeout: PATIENCE_MS },
  async () => {
    const shape = cases[2];
    const first = await planned(shape, 'once');
    const second = await planned(shape, 'twice');
    const names = (await readdir(first.outFolder, { recursive: true })).sort();
    expect((await readdir(second.outFolder, { recursive: true })).sort()).toEqual(names);
    const files = names.filter((name) => /\.(stl|json|csv)$/.test(name));
    expect(files).toContain('manifest.json');
    expect(files).toContain('cut-list.csv');
    for (const name of files) {
      const [a, b] = await Promise.all(
        [first, second].map(({ outFolder }) => readFile(join(outFolder, name))),
      );
      expect(a.equals(b), name).toBe(true);
    }
  },
);

/** Corners inside the build volume, to the step of a float32 near its limits. */
function expectInside(corners: Float32Array, space: BuildSpace): void {
  const step = 1e-4;
  const low = [Infinity, Infinity, Infinity];
  const high = [-Infinity, -Infinity, -Infinity];
  let radius = 0;
  for (let i = 0; i < corners.length; i++) {
    low[i % 3] = Math.min(low[i % 3], corners[i]);
    high[i % 3] = Math.max(high[i % 3], corners[i]);
    if (space.shape === 'round' && i % 3 === 1) {
      const middle = space.diameterMm / 2;
      radius = Math.max(radius, Math.hypot(corners[i - 1] - middle, corners[i] - middle));
    }
  }
  const [width, depth] =
    space.shape === 'round' ? [space.diameterMm, space.diameterMm] : [space.widthMm, space.depthMm];
  expect(low[2]).toBe(0);
  expect(Math.min(low[0], low[1])).toBeGreaterThanOrEqual(-step);
  expect(high[0]).toBeLessThanOrEqual(width + step);
  expect(high[1]).toBeLessThanOrEqual(depth + step);
  expect(high[2]).toBeLessThanOrEqual(space.heightMm + step);
  if (space.shape === 'round') expect(radius).toBeLessThanOrEqual(space.diameterMm / 2 + step);
}
