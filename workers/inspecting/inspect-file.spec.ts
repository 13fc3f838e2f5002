import { beforeAll, describe, expect, it } from 'vitest';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { noChoices, type MendingChoices } from '../../shared/jobs/mending-choices.js';
import { mayBePlanned, meshReport } from '../../shared/jobs/model-inspect.js';
import {
  box,
  boxWithCavity,
  join,
  sphere,
  toSoup,
  turnInsideOut,
} from '../../test/support/shapes.js';
import { binaryStl } from '../../test/support/stl-files.js';
import { JobRefusal } from '../runtime/job-refusal.js';
import { loadSolids, type Solids } from '../solids/solid-kernel.js';
import { inspectFile } from './inspect-file.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

function inspectSoup(soup: ArrayLike<number>, choices: Partial<MendingChoices> = {}) {
  const file = {
    bytes: binaryStl(soup),
    fileName: 'prop.stl',
    choices: { ...noChoices, ...choices },
  };
  const inspection = inspectFile(file, { solids });
  const { report, solid } = inspection;
  expect(meshReport.parse(report)).toEqual(report);
  expect(solid !== null).toBe(mayBePlanned(report, true));
  expect(report.plannable).toBe(report.refusal === null && report.asks.length === 0);
  if (solid) {
    expect(edgeReport(solid).closed).toBe(true);
    expect(signedVolume(solid)).toBeCloseTo(report.volume, 6);
  }
  return inspection;
}
const inspect = (mesh: TriangleMesh, choices: Partial<MendingChoices> = {}) =>
  inspectSoup(toSoup(mesh), choices);

const ball = sphere(50, 48, 24);
const cube = (from: number, to: number) => box([from, from, from], [to, to, to]).mesh;
const facetsOf = (mesh: TriangleMesh) => mesh.indices.length / 3;
const kindsOf = ({ report }: ReturnType<typeof inspect>) => report.mending.map((step) => step.kind);

describe('inspecting a sound file', () => {
  it('measures it against its closed form and changes nothing', () => {
    const { report } = inspect(ball.mesh);
    expect(report).toMatchObject({
      closed: true,
      plannable: true,
      shells: 1,
      cavities: 0,
      triangles: facetsOf(ball.mesh),
      vertices: ball.mesh.positions.length / 3,
      mending: [],
      holes: [],
      asks: [],
    });
    expect(report.asRead).toMatchObject({ volume: report.volume, area: report.area });
    expect(Math.abs(report.volume / ball.volumeMm3 - 1)).toBeLessThan(1e-6);
    expect(report.size[2]).toBeCloseTo(100, 4);
    // A sphere's area, 4πr² = 31 415.9 mm², is approached from below by its facets.
    expect(report.area).toBeGreaterThan(0.99 * 31_415.9);
    expect(report.area).toBeLessThan(31_415.9);
    expect(report.measures).toMatchObject({ genus: 0, crossings: { pairs: 0, complete: true } });
    expect(report.notes).toEqual([
      'A closed surface of 2 208 triangles. Nothing had to be changed.',
    ]);
  });

  it('counts hollows, and solids inside hollows', () => {
    expect(inspect(boxWithCavity(40, 20).mesh).report).toMatchObject({ shells: 2, cavities: 1 });
    const nested = join([cube(0, 40), turnInsideOut(cube(5, 35)), cube(10, 30)]);
    const { report } = inspect(nested);
    expect(report).toMatchObject({ shells: 3, cavities: 1, plannable: true });
    expect(report.volume).toBeCloseTo(40 ** 3 - 30 ** 3 + 20 ** 3, 6);
  });

  it('mentions a model so far away that its coordinates are rough', () => {
    const far = toSoup(ball.mesh).map((value) => value + 300_000);
    expect(inspectSoup(far).report.notes.join(' ')).toMatch(/far from the origin/);
    expect(inspect(ball.mesh).report.notes.join(' ')).not.toMatch(/far from the origin/);
  });
});

describe('what is mended without asking', () => {
  it('a model that is inside out as a whole', () => {
    const hollow = boxWithCavity(40, 20);
    for (const { mesh, volumeMm3 } of [ball, hollow]) {
      const inspection = inspect(turnInsideOut(mesh));
      const { report } = inspection;
      expect(report).toMatchObject({ turnedOutward: true, plannable: true });
      expect(kindsOf(inspection)).toEqual(['turn-shells']);
      expect(Math.abs(report.volume / volumeMm3 - 1)).toBeLessThan(1e-6);
      expect(report.asRead.volume).toBeCloseTo(report.volume, 6);
    }
  });

  it('one shell that is turned, beside others that are not', () => {
    const inspection = inspect(join([cube(0, 40), turnInsideOut(cube(50, 60)), cube(70, 80)]));
    expect(kindsOf(inspection)).toContain('turn-shells');
    expect(inspection.report.volume).toBeCloseTo(40 ** 3 + 2 * 10 ** 3, 6);
  });

  it('single facets that are turned', () => {
    const soup = toSoup(ball.mesh);
    const turned = soup.slice();
    turned.set(soup.subarray(9 * 700 + 3, 9 * 700 + 6), 9 * 700 + 6);
    turned.set(soup.subarray(9 * 700 + 6, 9 * 700 + 9), 9 * 700 + 3);
    const inspection = inspectSoup(turned);
    const { report } = inspection;
    expect(report.asRead.misorientedEdges).toBe(3);
    expect(report.misorientedEdges).toBe(0);
    expect(kindsOf(inspection)).toEqual(['turn-facets']);
    expect(report.mending[0].count).toBe(1);
    expect(report.plannable).toBe(true);
  });

  it('facets that are there twice', () => {
    const soup = toSoup(ball.mesh);
    const inspection = inspectSoup(Float32Array.of(...soup, ...soup));
    const { report } = inspection;
    expect(report.asRead.duplicateFacets).toBe(facetsOf(ball.mesh));
    expect(report).toMatchObject({ triangles: facetsOf(ball.mesh), plannable: true });
    expect(kindsOf(inspection)).toEqual(['drop-duplicates']);
    expect(Math.abs(report.volume / ball.volumeMm3 - 1)).toBeLessThan(1e-6);
  });

  it('facets with two corners in one place', () => {
    const soup = Float32Array.of(...toSoup(ball.mesh), 0, 0, 50, 0, 0, 50, 1, 1, 1);
    const { report } = inspectSoup(soup);
    expect(report).toMatchObject({ degenerateDropped: 1, plannable: true });
    expect(report.mending[0].sentence).toMatch(/^1 facet had two corners in one place and was/);
  });

  it('a surface that folds through itself in one place', () => {
    const ball = sphere(50, 48, 48).mesh;
    const positions = ball.positions.slice();
    for (let k = 0; k < positions.length; k += 3) {
      const far = Math.hypot(positions[k] - 50, positions[k + 1], positions[k + 2]);
      positions[k] -= 120 * Math.exp(-((far / 18) ** 2));
    }
    const { report, solid } = inspectSoup(toSoup({ ...ball, positions }));
    expect(report.mending.map((step) => step.kind)).toEqual(['unite']);
    expect(report.mending[0].sentence).toBe('A shell that crossed itself was made one solid.');
    expect(report.measures!.crossings).toEqual({ pairs: 0, complete: true });
    // What stuck out on the far side is gone: the box has changed, which a person has to see.
    expect(report.asks.map((ask) => ask.kind)).toEqual(['accept']);
    expect(solid).not.toBeNull();
  });

  it('a single facet that is missing', () => {
    const soup = toSoup(ball.mesh);
    const inspection = inspectSoup(soup.slice(9));
    expect(kindsOf(inspection)).toEqual(['fill-holes']);
    expect(inspection.report).toMatchObject({ holesFound: 1, plannable: true });
    expect(inspection.report.holes[0]).toMatchObject({ id: 1, edges: 3, isFilled: true });
    expect(Math.abs(inspection.report.volume / ball.volumeMm3 - 1)).toBeLessThan(1e-6);
  });

  it('a sheet without volume beside a solid', () => {
    const sheet = [0, 0, 0, 10, 0, 0, 0, 10, 0, 0, 0, 0, 0, 10, 0, 10, 0, 0];
    const { report } = inspectSoup(Float32Array.of(...toSoup(cube(20, 30)), ...sheet));
    expect(report.shells).toBe(1);
    expect(report.volume).toBeCloseTo(1000, 6);
    // The box of the file was larger: that is for a person to decide.
    expect(report.asks.map((ask) => ask.kind)).toEqual(['accept']);
    expect(report.asks[0].sentence).toMatch(/outer size along x, y, z/);
  });
});

describe('what is asked', () => {
  const open = toSoup(cube(0, 40)).slice(0, 9 * 10);

  it('up to which size holes are filled, with the hole in the list', () => {
    const { report, solid, holes } = inspectSoup(open);
    expect(solid).toBeNull();
    expect(report.asks).toMatchObject([{ kind: 'fill-holes', count: 1 }]);
    expect(report.holes).toMatchObject([{ edges: 4, isFlat: true, isFilled: false }]);
    expect(report.holes[0].perimeter).toBeCloseTo(160, 6);
    expect(holes[0].rim.length).toBe(12);
    expect(report.asRead.volume).toBeCloseTo(64_000, 6);
    const filled = inspectSoup(open, { fillHolesUpTo: 161 });
    expect(filled.report.plannable).toBe(true);
    expect(filled.report.volume).toBeCloseTo(64_000, 6);
    expect(inspectSoup(open, { fillHolesUpTo: 159 }).report.asks[0].kind).toBe('fill-holes');
  });

  it('whether a solid is taken that encloses less than the file said', () => {
    const overlapping = join([cube(0, 40), cube(20, 60)]);
    const { report, solid } = inspect(overlapping);
    expect(report.mending.map((step) => step.kind)).toEqual(['unite']);
    expect(report.asRead.volume).toBeCloseTo(128_000, 6);
    expect(report.volume).toBeCloseTo(128_000 - 8_000, 0);
    expect(report.asks).toMatchObject([{ kind: 'accept' }]);
    expect(report.asks[0].sentence).toMatch(/6\.25 % smaller/);
    expect(solid).not.toBeNull();
    expect(mayBePlanned(report, false)).toBe(false);
    expect(mayBePlanned(report, true)).toBe(true);
  });

  it('whether an inner shell is meant as a hollow', () => {
    const { report } = inspect(join([cube(0, 40), cube(10, 30)]));
    expect(report).toMatchObject({ cavities: 1, shells: 2 });
    expect(report.volume).toBeCloseTo(64_000 - 8_000, 6);
    expect(report.asks.map((ask) => ask.kind)).toEqual(['accept']);
  });

  it('whether a surface made anew is taken, with its deviation', () => {
    // A ball with windows: the winding number closes them a little flatter than they were.
    const soup = toSoup(ball.mesh).filter((_, i) => Math.floor(i / 9) % 50 > 1);
    const { report, solid } = inspectSoup(soup, { remeshCells: 60 });
    expect(solid).not.toBeNull();
    expect(report.mending.map((step) => step.kind)).toContain('remesh');
    expect(report.asks).toMatchObject([{ kind: 'accept' }]);
    expect(report.asks[0].sentence).toMatch(/^The surface was rebuilt on a grid/);
    expect(report.remeshDeviation!.p95).toBeLessThan((0.6 * 100) / 60);
    expect(report.places[0].kind).toBe('far-from-original');
    expect(Math.abs(report.volume / ball.volumeMm3 - 1)).toBeLessThan(0.01);
  });
});

describe('what is refused', () => {
  it('a surface without volume', () => {
    const sheet = [0, 0, 0, 10, 0, 0, 0, 10, 0];
    const back = [0, 0, 0, 0, 10, 0, 10, 0, 0];
    for (const soup of [sheet, [...sheet, ...back]]) {
      const { report, solid } = inspectSoup(soup);
      expect(report.refusal).toMatch(/encloses no volume/);
      expect(solid).toBeNull();
    }
  });

  it('a file of which nothing is left, and a model smaller than dust', () => {
    const point = Array.from({ length: 9 }, () => 3);
    expect(() => inspectSoup([...point, ...point])).toThrow(JobRefusal);
    expect(() => inspectSoup([...point, ...point])).toThrow(/2 facets, but not one has three/);
    const tiny = toSoup(ball.mesh).map((value) => value * 1e-36);
    expect(() => inspectSoup(tiny)).toThrow(/longest side is 1e-34/);
  });
});

describe('the run of an inspection', () => {
  const file = { bytes: binaryStl(toSoup(ball.mesh)), fileName: 'a.stl' };

  it('reports its stages, and never goes back', () => {
    const stages: string[] = [];
    const fractions: number[] = [];
    const context = {
      throwIfCancelled: () => {},
      progress: (stage: string, fraction: number) => {
        if (stages.at(-1) !== stage) stages.push(stage);
        fractions.push(fraction);
      },
    };
    inspectFile(file, { solids, context });
    expect(stages.length).toBeGreaterThan(2);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
    expect(fractions.at(-1)).toBeLessThanOrEqual(1);
  });

  it('ends when it is cancelled, and gives the same again when it is not', () => {
    const stop = () => {
      throw new Error('stopped');
    };
    const context = { throwIfCancelled: stop, progress: () => {} };
    expect(() => inspectFile(file, { solids, context })).toThrow('stopped');
    const [one, other] = [inspectFile(file, { solids }), inspectFile(file, { solids })];
    expect(other.report).toEqual(one.report);
    expect(other.solid).toEqual(one.solid);
  });
});
