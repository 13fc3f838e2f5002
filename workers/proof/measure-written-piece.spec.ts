import { describe, expect, it } from 'vitest';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { box, boxWithCavity, join, torusKnot, turnInsideOut } from '../../test/support/shapes.js';
import { writeStl } from '../export/stl-writer.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { measureWrittenPiece } from './measure-written-piece.js';

const cube = (side: number, at = 0) => box([at, at, at], [at + side, at + side, at + side]).mesh;
const written = (mesh: TriangleMesh) =>
  writeStl({ positions: Float32Array.from(mesh.positions), indices: mesh.indices }, 'spec');
const measured = (bytes: Uint8Array) => measureWrittenPiece('P01', bytes, [0, 0]);
const without = (mesh: TriangleMesh, ...facets: number[]): TriangleMesh => ({
  positions: mesh.positions,
  indices: mesh.indices.filter((_, i) => !facets.includes(Math.floor(i / 3))),
});

describe('measureWrittenPiece', () => {
  it('measures a box by its closed form', () => {
    const piece = measured(written(box([-10, -20, 0], [20, 20, 50]).mesh));
    expect(piece).toMatchObject({
      facets: 12,
      sizeMatches: true,
      finite: true,
      openEdges: 0,
      repeatedEdges: 0,
      collapsedFacets: 0,
      bodies: 1,
      hollows: 0,
      strayHollows: 0,
      min: [-10, -20, 0],
      max: [20, 20, 50],
    });
    expect(piece.volumeMm3).toBeCloseTo(60_000, 6);
    expect(piece.radiusMm).toBeCloseTo(Math.hypot(20, 20), 6);
  });

  it('finds a curved surface closed and its volume the mesh volume to float32 precision', () => {
    const knot = torusKnot(70, 30, 300, 20);
    const piece = measured(written(knot));
    expect(piece.openEdges + piece.repeatedEdges).toBe(0);
    expect(piece.bodies).toBe(1);
    expect(Math.abs(piece.volumeMm3 / signedVolume(knot) - 1)).toBeLessThan(1e-7);
  });

  it('counts the edges that a missing facet leaves open', () => {
    expect(measured(written(without(cube(1), 4))).openEdges).toBe(3);
  });

  it('counts the edges of a doubled facet and of a wrongly turned one', () => {
    const sound = cube(1);
    const doubled = {
      ...sound,
      indices: Uint32Array.from([...sound.indices, ...sound.indices.slice(0, 3)]),
    };
    expect(measured(written(doubled)).repeatedEdges).toBe(3);
    const flipped = { ...sound, indices: sound.indices.slice() };
    flipped.indices.set([sound.indices[1], sound.indices[0]], 0);
    const piece = measured(written(flipped));
    expect(piece.repeatedEdges).toBe(3);
    expect(piece.openEdges).toBeGreaterThan(0);
  });

  it('tells bodies, hollows inside them, and a piece turned inside out', () => {
    const hollow = boxWithCavity(100, 40).mesh;
    expect(measured(written(hollow))).toMatchObject({ bodies: 1, hollows: 1, strayHollows: 0 });
    const two = join([cube(10), cube(10, 20)]);
    expect(measured(written(two))).toMatchObject({ bodies: 2, hollows: 0 });
    const insideOut = measured(written(turnInsideOut(cube(10))));
    expect(insideOut).toMatchObject({ bodies: 0, hollows: 1, strayHollows: 1 });
    expect(insideOut.volumeMm3).toBeLessThan(0);
  });

  it('does not join two bodies that touch in a single point', () => {
    const touching = join([cube(10), cube(10, 10)]);
    expect(measured(written(touching)).bodies).toBe(2);
  });

  it('takes −0 and 0 for the same coordinate', () => {
    const bytes = written(cube(10));
    const view = new DataView(bytes.buffer);
    for (let at = 84 + 12; at < 84 + 48; at += 4)
      if (view.getFloat32(at, true) === 0) view.setFloat32(at, -0, true);
    expect(measured(bytes)).toMatchObject({ openEdges: 0, bodies: 1 });
  });

  it('says when the bytes are cut short, too long, or hold something that is no number', () => {
    const bytes = written(cube(1));
    expect(measured(bytes.subarray(0, 40))).toMatchObject({ sizeMatches: false, facets: 0 });
    expect(measured(bytes.subarray(0, 300))).toMatchObject({ sizeMatches: false, facets: 4 });
    expect(measured(Uint8Array.from([...bytes, 0])).sizeMatches).toBe(false);
    new DataView(bytes.buffer).setFloat32(100, NaN, true);
    expect(measured(bytes).finite).toBe(false);
  });
});
