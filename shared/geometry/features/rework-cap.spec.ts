import { beforeAll, describe, expect, it } from 'vitest';
import { box, prism, torusKnot, voxels } from '../../../test/support/shapes.js';
import { insetOverlap } from '../../../workers/solids/regions.js';
import { loadSolids, type Solids } from '../../../workers/solids/solid-kernel.js';
import { cutMesh } from '../cutting/cut-mesh.js';
import { signedVolume, surfaceArea } from '../mesh/measure.js';
import { edgeReport } from '../mesh/topology.js';
import { connectedShells } from '../mesh/shells.js';
import { seamPlane } from '../sections/seam-plane.js';
import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { type Plane } from '../vectors/plane.js';
import { type CapFeature, featureVolume } from './cap-feature.js';
import { capFrame } from './cap-frame.js';
import { type CapTools, reworkCap } from './rework-cap.js';

let solids: Solids;
let tools: CapTools;
beforeAll(async () => {
  solids = await loadSolids();
  tools = {
    triangulate: solids.triangulate,
    inset: (one, other, by) => insetOverlap(solids, one, other, by),
  };
});

const SIDES = 48;
const circle = (x: number, y: number, radius: number) =>
  Float64Array.from(
    Array.from({ length: SIDES }, (_, k) => {
      const angle = (2 * Math.PI * k) / SIDES;
      return [x + radius * Math.cos(angle), y + radius * Math.sin(angle)];
    }).flat(),
  );
/** Area of the regular polygon that stands for a circle. */
const disc = (radius: number) => (SIDES / 2) * Math.sin((2 * Math.PI) / SIDES) * radius ** 2;

const hole = (x: number, y: number, radius: number, depthMm: number): CapFeature => ({
  levels: [
    { loops: [circle(x, y, radius)], depthMm: 0 },
    { loops: [circle(x, y, radius)], depthMm },
  ],
});

const plane: Plane = { normal: [0, 0, 1], offset: 30 };
const halves = (mesh: TriangleMesh, at = plane) =>
  cutMesh(mesh, at, { triangulate: solids.triangulate, capTag: 1 });
const frameOf = (isAlong: boolean, at = plane) =>
  capFrame(seamPlane(at, [0, 0, at.offset]), at.normal, isAlong);

function areaWithTag({ positions, indices, tags }: TriangleMesh, tag: number): number {
  const chosen = [...indices].filter((_, i) => tags![Math.floor(i / 3)] === tag);
  return surfaceArea({ positions, indices: Uint32Array.from(chosen) });
}

describe('reworkCap', () => {
  it('sinks a round socket with a lead-in into both sides of a cut, by their closed forms', () => {
    const { above, below } = halves(box([-20, -20, 0], [20, 20, 60]).mesh);
    const socket: CapFeature = {
      levels: [
        { loops: [circle(5, 3, 3)], depthMm: 0 },
        { loops: [circle(5, 3, 2.5)], depthMm: 0.5 },
        { loops: [circle(5, 3, 2.5)], depthMm: 8 },
      ],
    };
    // A frustum of similar sections: h/3 (A + √(A·B) + B); then a prism.
    const removed =
      (0.5 / 3) * (disc(3) + Math.sqrt(disc(3) * disc(2.5)) + disc(2.5)) + 7.5 * disc(2.5);
    expect(featureVolume(socket)).toBeCloseTo(-removed, 9);
    for (const [half, isAlong] of [
      [below, true],
      [above, false],
    ] as const) {
      const change = { tag: 1, frame: frameOf(isAlong), features: [socket], bevelMm: 0 };
      const made = reworkCap(half, change, tools);
      expect(edgeReport(made.mesh).closed).toBe(true);
      expect(signedVolume(made.mesh)).toBeCloseTo(signedVolume(half) - removed, 8);
      expect(areaWithTag(made.mesh, 1)).toBeCloseTo(1600 - disc(3), 8);
      expect(made.featuresMm3).toBeCloseTo(-removed, 9);
    }
  });

  it('raises a fixed pin and engraves a ring whose middle stays', () => {
    const { below } = halves(box([-20, -20, 0], [20, 20, 60]).mesh);
    const pin = hole(-8, 0, 3, -6);
    const ring: CapFeature = {
      levels: [0, 0.4].map((depthMm) => ({
        loops: [circle(8, 0, 5), circle(8, 0, 3).reverse()].map((loop, k) =>
          k === 0 ? loop : Float64Array.from(loop.keys(), (i) => loop[i ^ 1]),
        ),
        depthMm,
      })),
    };
    const change = { tag: 1, frame: frameOf(true), features: [pin, ring], bevelMm: 0 };
    const made = reworkCap(below, change, tools);
    const expected = 6 * disc(3) - 0.4 * (disc(5) - disc(3));
    expect(edgeReport(made.mesh).closed).toBe(true);
    expect(connectedShells(made.mesh).count).toBe(1);
    expect(signedVolume(made.mesh) - signedVolume(below)).toBeCloseTo(expected, 8);
    expect(made.featuresMm3).toBeCloseTo(expected, 8);
  });

  it('bevels the edge of a box: what goes is a frustum less', () => {
    const { below } = halves(box([-20, -10, 0], [20, 10, 60]).mesh);
    const c = 0.4;
    const change = { tag: 1, frame: frameOf(true), features: [], bevelMm: c };
    const made = reworkCap(below, change, tools);
    // Prismatoid: h/6 (A + 4 M + B) with the middle section inset by half as much.
    const section = (by: number) => (40 - 2 * by) * (20 - 2 * by);
    const removed = c * 800 - (c / 6) * (section(0) + 4 * section(c / 2) + section(c));
    expect(made.isBevelled).toBe(true);
    expect(edgeReport(made.mesh).closed).toBe(true);
    const gone = signedVolume(below) - signedVolume(made.mesh);
    expect(made.bevelMm3).toBeCloseTo(gone, 6);
    // Vertices of the sides close to a corner take a little more of the corner away.
    expect(gone).toBeGreaterThan(removed - 1e-5);
    expect(gone).toBeLessThan(1.1 * removed);
    expect(areaWithTag(made.mesh, 1)).toBeCloseTo(section(c), 5);
  });

  it('keeps a bump beside the face that ends inside the bevelled slab', () => {
    // A tall tower and a lower one on one base; the lower ends 0.2 below the cut.
    const isSolid = (x: number, y: number, z: number) =>
      z === 0 || (x === 0 && z < 3) || (x === 2 && z < 2);
    const { mesh } = voxels('towers', [3, 1, 3], 10, isSolid);
    const at: Plane = { normal: [0, 0, 1], offset: 20.2 };
    const { below } = halves(mesh, at);
    const change = { tag: 1, frame: frameOf(true, at), features: [], bevelMm: 0.4 };
    const made = reworkCap(below, change, tools);
    expect(made.isBevelled).toBe(true);
    expect(edgeReport(made.mesh).closed).toBe(true);
    expect(signedVolume(below) - signedVolume(made.mesh)).toBeCloseTo(made.bevelMm3, 6);
    expect(made.bevelMm3).toBeLessThan(4);
    const tops = [...made.mesh.positions].filter((_, i, all) => i % 3 === 2 && all[i - 2]! > 15);
    expect(Math.max(...tops)).toBeCloseTo(20, 9);
  });

  it('leaves the edge of a face sharp that a bevel would eat', () => {
    const { below } = halves(box([-20, -0.4, 0], [20, 0.4, 60]).mesh);
    const made = reworkCap(
      below,
      { tag: 1, frame: frameOf(true), features: [], bevelMm: 0.4 },
      tools,
    );
    expect(made).toMatchObject({ isBevelled: false, bevelMm3: 0 });
    expect(made.mesh).toBe(below);
  });

  it('takes every piece of a cut knot, sockets and bevels together, as manifold-3d wants it', () => {
    const knot = torusKnot(70, 26, 900, 60);
    const at: Plane = { normal: [0.6, 0, 0.8], offset: 4.1 };
    const { above, below } = halves(knot, at);
    for (const [half, isAlong] of [
      [below, true],
      [above, false],
    ] as const) {
      const made = reworkCap(
        half,
        { tag: 1, frame: frameOf(isAlong, at), features: [], bevelMm: 0.4 },
        tools,
      );
      expect(made.isBevelled).toBe(true);
      expect(edgeReport(made.mesh).closed).toBe(true);
      expect(signedVolume(half) - signedVolume(made.mesh)).toBeCloseTo(made.bevelMm3, 5);
      const status = solids.withSolids((scope) => {
        const solid = scope.keep(
          new scope.Manifold(
            new scope.Mesh({
              numProp: 3,
              vertProperties: Float32Array.from(made.mesh.positions),
              triVerts: made.mesh.indices,
            }),
          ),
        );
        return { status: solid.status(), volume: solid.volume() };
      });
      expect(status.status).toBe('NoError');
      expect(status.volume / signedVolume(made.mesh)).toBeCloseTo(1, 5);
    }
  });

  it('changes nothing on a body without that face', () => {
    const { mesh } = prism(10, 20, 24);
    const change = { tag: 1, frame: frameOf(true), features: [hole(0, 0, 1, 2)], bevelMm: 0.4 };
    expect(reworkCap(mesh, change, tools)).toEqual({
      mesh,
      isBevelled: false,
      featuresMm3: 0,
      bevelMm3: 0,
    });
  });
});
