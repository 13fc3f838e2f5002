import { describe, expect, it } from 'vitest';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { meshReport } from '../../shared/jobs/model-inspect.js';
import {
  box,
  boxWithCavity,
  extrude,
  join,
  sphere,
  toSoup,
  turnInsideOut,
} from '../../test/support/shapes.js';
import { binaryStl } from '../../test/support/stl-files.js';
import { readStl } from '../intake/stl-reader.js';
import { JobRefusal } from '../runtime/job-refusal.js';
import { inspectMesh } from './mesh-report.js';

function inspectSoup(soup: ArrayLike<number>) {
  const bytes = binaryStl(soup);
  const fileName = 'prop.stl';
  const inspection = inspectMesh({
    reading: readStl(bytes, fileName),
    fileName,
    fileBytes: bytes.length,
  });
  expect(meshReport.parse(inspection.report)).toEqual(inspection.report);
  expect(inspection.solid === null).toBe(!inspection.report.plannable);
  expect(inspection.report.plannable).toBe(inspection.report.refusal === null);
  return inspection;
}
const inspect = (mesh: TriangleMesh) => inspectSoup(toSoup(mesh));

const ball = sphere(50, 48, 24);
const cube = (from: number, to: number) => box([from, from, from], [to, to, to]).mesh;

describe('the mesh report', () => {
  it('measures a sound solid against its closed form', () => {
    const { report } = inspect(ball.mesh);
    expect(report).toMatchObject({
      closed: true,
      plannable: true,
      shells: 1,
      cavities: 0,
      triangles: ball.mesh.indices.length / 3,
      vertices: ball.mesh.positions.length / 3,
    });
    expect(Math.abs(report.volume / ball.volumeMm3 - 1)).toBeLessThan(1e-6);
    expect(report.size[2]).toBeCloseTo(100, 4);
    expect(report.min[2]).toBeCloseTo(-50, 4);
    // A sphere's area, 4πr² = 31 415.9 mm², is approached from below by its facets.
    expect(report.area).toBeGreaterThan(0.99 * 31_415.9);
    expect(report.area).toBeLessThan(31_415.9);
    expect(report.notes).toEqual([
      'A closed surface of 2 208 triangles. Nothing had to be changed.',
    ]);
  });

  it('turns a model that is inside out as a whole, and says so', () => {
    const hollow = boxWithCavity(40, 20);
    for (const [mesh, volume] of [
      [ball.mesh, ball.volumeMm3],
      [hollow.mesh, hollow.volumeMm3],
    ] as const) {
      const { report, solid } = inspect(turnInsideOut(mesh));
      expect(report.turnedOutward).toBe(true);
      expect(report.notes[0]).toMatch(/was inside out/);
      expect(Math.abs(report.volume / volume - 1)).toBeLessThan(1e-6);
      expect(signedVolume(solid!)).toBe(report.volume);
    }
  });

  it('counts hollows, and solids inside hollows', () => {
    expect(inspect(boxWithCavity(40, 20).mesh).report).toMatchObject({ shells: 2, cavities: 1 });
    const nested = join([cube(0, 40), turnInsideOut(cube(5, 35)), cube(10, 30)]);
    const { report } = inspect(nested);
    expect(report).toMatchObject({ shells: 3, cavities: 1, plannable: true });
    expect(report.volume).toBeCloseTo(40 ** 3 - 30 ** 3 + 20 ** 3, 6);
    expect(report.notes[0]).toBe('The model is made of 2 solids with 1 closed hollow inside.');
  });

  it('refuses shells that contradict where they lie', () => {
    const doubled = inspect(join([cube(0, 40), cube(10, 30)])).report;
    expect(doubled.refusal).toMatch(/Of 2 shells, 1 lies inside another as a second solid/);
    const oneTurned = inspect(join([cube(0, 40), turnInsideOut(cube(50, 60)), cube(70, 80)]));
    expect(oneTurned.report.refusal).toMatch(/Of 3 shells, 1 is inside out\./);
    expect(oneTurned.report.closed).toBe(true);
  });

  it('mentions shells that run into each other', () => {
    // A post that starts inside a wedge and leaves through its slope, within the wedge's box.
    const wedge = extrude(
      [
        [0, 0],
        [60, 0],
        [0, 60],
      ],
      [0, 1, 2],
      0,
      40,
    );
    const post = box([10, 10, 5], [55, 20, 35]).mesh;
    const { report } = inspect(join([wedge, post]));
    expect(report.plannable).toBe(true);
    expect(report.notes.join(' ')).toMatch(/At least 1 shell runs into another one/);
    const apart = inspect(join([wedge, box([45, 45, 5], [55, 55, 35]).mesh])).report;
    expect(apart.notes.join(' ')).not.toMatch(/runs into/);
  });

  it('refuses an open surface with the count of its edges, and still shows it', () => {
    const soup = toSoup(ball.mesh);
    const { report, shown } = inspectSoup(soup.slice(0, soup.length - 9 * 5));
    expect(report).toMatchObject({ closed: false, plannable: false, volume: 0 });
    expect(report.refusal).toMatch(
      /^The surface is not closed: \d+ edges with a facet on one side/,
    );
    expect(report.openEdges).toBeGreaterThan(4);
    expect(shown.indices.length).toBe(ball.mesh.indices.length - 15);
  });

  it('refuses single facets that are turned, as a matter of sides', () => {
    const soup = toSoup(ball.mesh);
    const turned = soup.slice();
    turned.set(soup.subarray(9 * 700 + 3, 9 * 700 + 6), 9 * 700 + 6);
    turned.set(soup.subarray(9 * 700 + 6, 9 * 700 + 9), 9 * 700 + 3);
    const { report } = inspectSoup(turned);
    expect(report.misorientedEdges).toBe(3);
    expect(report.refusal).toMatch(/^The facets do not agree .* 3 edges/);
  });

  it('counts facets that are there twice', () => {
    const soup = toSoup(ball.mesh);
    const { report } = inspectSoup(Float32Array.of(...soup, ...soup));
    expect(report.duplicateFacets).toBe(ball.mesh.indices.length / 3);
    expect(report.refusal).toMatch(/shared by more than two facets\. 2 208 facets repeat others/);
  });

  it('drops facets with two corners in one place and says so', () => {
    const soup = Float32Array.of(...toSoup(ball.mesh), 0, 0, 50, 0, 0, 50, 1, 1, 1);
    const { report } = inspectSoup(soup);
    expect(report).toMatchObject({ degenerateDropped: 1, plannable: true });
    expect(report.notes[0]).toMatch(/^1 facet had two corners in one place and was dropped/);
  });

  it('refuses a surface without volume', () => {
    const sheet = [0, 0, 0, 10, 0, 0, 0, 10, 0];
    const back = [0, 0, 0, 0, 10, 0, 10, 0, 0];
    expect(inspectSoup([...sheet, ...back]).report.refusal).toMatch(/encloses no volume/);
    const beside = Float32Array.of(...toSoup(cube(20, 30)), ...sheet, ...back);
    expect(inspectSoup(beside).report.refusal).toMatch(/Of 2 shells, 1 encloses no volume/);
  });

  it('refuses what nothing is left of, and a model smaller than dust', () => {
    const point = Array.from({ length: 9 }, () => 3);
    expect(() => inspectSoup([...point, ...point])).toThrow(JobRefusal);
    expect(() => inspectSoup([...point, ...point])).toThrow(/2 facets, but not one has three/);
    const tiny = toSoup(ball.mesh).map((value) => value * 1e-36);
    expect(() => inspectSoup(tiny)).toThrow(/longest side is 1e-34/);
  });

  it('mentions a model so far away that its coordinates are rough', () => {
    const far = toSoup(ball.mesh).map((value) => value + 300_000);
    const { report } = inspectSoup(far);
    expect(report.notes.join(' ')).toMatch(/far from the origin/);
    expect(inspect(ball.mesh).report.notes.join(' ')).not.toMatch(/far from the origin/);
  });

  it('reports every stage, and stops when it is cancelled', () => {
    const bytes = binaryStl(toSoup(ball.mesh));
    const file = { reading: readStl(bytes, 'a.stl'), fileName: 'a.stl', fileBytes: bytes.length };
    const stages: string[] = [];
    const fractions: number[] = [];
    inspectMesh(file, {
      throwIfCancelled: () => {},
      progress: (stage, fraction) => {
        if (stages.at(-1) !== stage) stages.push(stage);
        fractions.push(fraction);
      },
    });
    expect(stages).toEqual(['Welding', 'Checking', 'Measuring']);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
    expect(fractions.at(-1)).toBe(1);
    const stop = () => {
      throw new Error('stopped');
    };
    expect(() => inspectMesh(file, { throwIfCancelled: stop, progress: () => {} })).toThrow(
      'stopped',
    );
  });
});
