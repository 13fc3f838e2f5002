import { describe, expect, it } from 'vitest';
import { ball, box, together, torusKnot, turned, volumeOf } from '../building/spec-shapes.js';
import { writeStl } from '../export/stl-writer.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { measureWrittenPiece } from './measure-written-piece.js';

const written = (mesh: TriangleMesh) =>
  writeStl({ positions: Float32Array.from(mesh.positions), indices: mesh.indices }, 'spec');
const measured = (bytes: Uint8Array) => measureWrittenPiece('P01', bytes, [0, 0]);
const without = (mesh: TriangleMesh, ...facets: number[]): TriangleMesh => ({
  positions: mesh.positions,
  indices: mesh.indices.filter((_, i) => !facets.includes(Math.floor(i / 3))),
});

describe('measureWrittenPiece', () => {
  it('measures a box by its closed form', () => {
    const piece = measured(written(box(30, 40, 50, [-10, -20, 0])));
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
    const knot = torusKnot(200, 30, 300, 20);
    const piece = measured(written(knot));
    expect(piece.openEdges + piece.repeatedEdges).toBe(0);
    expect(piece.bodies).toBe(1);
    expect(Math.abs(piece.volumeMm3 / volumeOf(knot) - 1)).toBeLessThan(1e-7);
  });

  it('counts the edges that a missing facet leaves open', () => {
    expect(measured(written(without(box(1, 1, 1), 4))).openEdges).toBe(3);
  });

  it('counts the edges of a doubled facet and of a wrongly turned one', () => {
    const cube = box(1, 1, 1);
    const doubled = {
      ...cube,
      indices: Uint32Array.from([...cube.indices, ...cube.indices.slice(0, 3)]),
    };
    expect(measured(written(doubled)).repeatedEdges).toBe(3);
    const flipped = { ...cube, indices: cube.indices.slice() };
    flipped.indices.set([cube.indices[1], cube.indices[0]], 0);
    const piece = measured(written(flipped));
    expect(piece.repeatedEdges).toBe(3);
    expect(piece.openEdges).toBeGreaterThan(0);
  });

  it('tells bodies, hollows inside them, and a piece turned inside out', () => {
    const hollow = together(box(100, 100, 100), turned(ball(20, 16, [50, 50, 50])));
    expect(measured(written(hollow))).toMatchObject({ bodies: 1, hollows: 1, strayHollows: 0 });
    const two = together(box(10, 10, 10), box(10, 10, 10, [20, 0, 0]));
    expect(measured(written(two))).toMatchObject({ bodies: 2, hollows: 0 });
    const insideOut = measured(written(turned(box(10, 10, 10))));
    expect(insideOut).toMatchObject({ bodies: 0, hollows: 1, strayHollows: 1 });
    expect(insideOut.volumeMm3).toBeLessThan(0);
  });

  it('does not join two bodies that touch in a single point', () => {
    const touching = together(box(10, 10, 10), box(10, 10, 10, [10, 10, 10]));
    expect(measured(written(touching)).bodies).toBe(2);
  });

  it('takes −0 and 0 for the same coordinate', () => {
    const bytes = written(box(10, 10, 10));
    const view = new DataView(bytes.buffer);
    for (let at = 84 + 12; at < 84 + 48; at += 4)
      if (view.getFloat32(at, true) === 0) view.setFloat32(at, -0, true);
    expect(measured(bytes)).toMatchObject({ openEdges: 0, bodies: 1 });
  });

  it('says when the bytes are cut short, too long, or hold something that is no number', () => {
    const bytes = written(box(1, 1, 1));
    expect(measured(bytes.subarray(0, 40))).toMatchObject({ sizeMatches: false, facets: 0 });
    expect(measured(bytes.subarray(0, 300))).toMatchObject({ sizeMatches: false, facets: 4 });
    expect(measured(Uint8Array.from([...bytes, 0])).sizeMatches).toBe(false);
    new DataView(bytes.buffer).setFloat32(100, NaN, true);
    expect(measured(bytes).finite).toBe(false);
  });
});
