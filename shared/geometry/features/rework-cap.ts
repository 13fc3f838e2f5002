import { cutMesh, type PolygonTriangulator } from '../cutting/cut-mesh.js';
import { loopArea } from '../cutting/section-cap.js';
import { signedVolume } from '../mesh/measure.js';
import { connectedShells } from '../mesh/shells.js';
import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { type Cap, capsOf } from '../sections/cap-loops.js';
import { toPlane } from '../sections/seam-plane.js';
import { type CapFeature, featureVolume } from './cap-feature.js';
import { type CapFrame, reverseLoop } from './cap-frame.js';
import { zipLoops } from './zip-loops.js';
import { MeshDraft } from './mesh-draft.js';

export interface CapChange {
  /** The triangles of the face have this tag. */
  readonly tag: number;
  /** In the plane of the face. */
  readonly frame: CapFrame;
  /** Strictly inside the face, and inside its bevel, apart from each other. */
  readonly features: readonly CapFeature[];
  /** Width and depth of the bevel along the face's edge, mm; 0 leaves the edge sharp. */
  readonly bevelMm: number;
}

export interface CapTools {
  readonly triangulate: PolygonTriangulator;
  /** The overlap of two regions shrunk by a distance (mm); outers counter-clockwise, holes clockwise. */
  readonly inset: (
    one: readonly Float64Array[],
    other: readonly Float64Array[],
    byMm: number,
  ) => Float64Array[];
}

export interface ReworkedCap {
  readonly mesh: TriangleMesh;
  /** False when the edge stayed sharp: too thin a face, or too thin a body under it. */
  readonly isBevelled: boolean;
  /** What the features add (negative: take away), from their outlines, mm³. */
  readonly featuresMm3: number;
  /** What the bevel takes away, from the slab it replaces, mm³; 0 or more. */
  readonly bevelMm3: number;
}

/** A bevel that would leave less of the face than this share is not made. */
const LEAST_FACE_LEFT = 0.6;
const BEVEL_TAG = 0x7fffffff;

/**
 * Gives a flat face of a closed body sockets, pins, engraved figures and a bevelled edge, without
 * boolean operations: the face is triangulated anew with the outlines as holes, walls and floors
 * are added. For the bevel the body is cut once more parallel to the face, and the slab between is
 * replaced by a surface that climbs from that section to the shrunken face; it has one height above
 * each of its points, so it cannot cross itself. Closed in, closed out; the rest of the body keeps
 * its triangles in their order. What the surface does inside the slab away from the face (a bump
 * that ends below it) is kept. The face's tag stays on what is left of the face; walls, floors and
 * bevel are tagged 0. A face that the mesh does not have changes nothing. O(triangles).
 */
export function reworkCap(mesh: TriangleMesh, change: CapChange, tools: CapTools): ReworkedCap {
  const [cap] = capsOf(mesh, change.tag);
  if (!cap) return { mesh, isBevelled: false, featuresMm3: 0, bevelMm3: 0 };
  const featuresMm3 = change.features.reduce((sum, one) => sum + featureVolume(one), 0);
  const bevelled = change.bevelMm > 0 ? withBevel(mesh, cap, change, tools) : null;
  if (bevelled) return { ...bevelled, isBevelled: true, featuresMm3 };
  if (change.features.length === 0) return { mesh, isBevelled: false, featuresMm3: 0, bevelMm3: 0 };
  const draft = new MeshDraft(mesh.positions);
  draft.addTriangles(mesh, (triangle) => mesh.tags![triangle] !== change.tag);
  const rim = cap.loops.map((loop) => ({
    vertices: loop,
    xy: flat(loop, mesh.positions, change.frame),
  }));
  fillFace(draft, rim, change, tools);
  return { mesh: draft.finish(), isBevelled: false, featuresMm3, bevelMm3: 0 };
}

/** A closed loop of vertices of the draft with their coordinates on the face. */
interface Rim {
  readonly vertices: readonly number[];
  readonly xy: Float64Array;
}

/** The face between its rim and the features, the features' walls and floors. */
function fillFace(
  draft: MeshDraft,
  rim: readonly Rim[],
  { frame, features, tag }: CapChange,
  { triangulate }: CapTools,
): void {
  const vertices = rim.flatMap((loop) => [...loop.vertices]);
  const outlines = rim.map((loop) => loop.xy);
  for (const feature of features) {
    const rings = feature.levels.map(({ loops, depthMm }) =>
      loops.map((loop) => draft.addLoop(frame, loop, depthMm)),
    );
    for (const [k, loop] of feature.levels[0].loops.entries()) {
      outlines.push(reverseLoop(loop));
      vertices.push(...[...rings[0][k]].reverse());
    }
    for (let level = 1; level < rings.length; level++)
      for (let loop = 0; loop < rings[level].length; loop++)
        draft.addWall(rings[level - 1][loop], rings[level][loop]);
    const floor = feature.levels[feature.levels.length - 1].loops;
    const floorVertices = rings[rings.length - 1].flat();
    draft.addFace(triangulate(floor), floorVertices, 0);
  }
  draft.addFace(triangulate(outlines), vertices, tag);
}

/** The body with a bevel round the face; null when there is no room for one. */
function withBevel(mesh: TriangleMesh, cap: Cap, change: CapChange, tools: CapTools) {
  const { frame, bevelMm, tag } = change;
  const { outward, origin } = frame;
  const height = outward[0] * origin[0] + outward[1] * origin[1] + outward[2] * origin[2];
  const { above: slab, below: rest } = cutMesh(
    mesh,
    { normal: outward, offset: height - bevelMm },
    { triangulate: fans, capTag: BEVEL_TAG },
  );
  if (rest.indices.length === 0 || slab.indices.length === 0) return null;
  const [section] = capsOf(rest, BEVEL_TAG);
  if (!section) return null;
  const bumps = bumpsOf(slab, tag);
  const rim = section.loops.filter((loop) => !bumps.has(pointKey(rest.positions, loop[0])));
  const rimXy = rim.map((loop) => flat(loop, rest.positions, frame));
  const capXy = cap.loops.map((loop) => flat(loop, mesh.positions, frame));
  const face = tools.inset(capXy, rimXy, bevelMm);
  if (areaOf(face) < LEAST_FACE_LEFT * areaOf(capXy)) return null;

  const draft = new MeshDraft(rest.positions);
  draft.addTriangles(rest, (triangle) => rest.tags![triangle] !== BEVEL_TAG);
  bumps.addTo(draft, rest);
  const faceRim = face.map((xy) => ({ xy, vertices: draft.addLoop(frame, xy, 0) }));
  const bevel = zipLoops(rimXy, face) ?? tools.triangulate([...rimXy, ...face.map(reverseLoop)]);
  const bevelVertices = [...rim.flat(), ...faceRim.flatMap((loop) => [...loop.vertices].reverse())];
  draft.addFace(bevel, bevelVertices, 0);
  fillFace(draft, faceRim, change, tools);
  const onRim = rim.reduce((sum, loop) => sum + loop.length, 0);
  const replaced = climbVolume([...rimXy, ...face.map(reverseLoop)], bevel, (point) =>
    point < onRim ? 0 : bevelMm,
  );
  return {
    mesh: draft.finish(),
    bevelMm3: signedVolume(slab) - bumps.volumeMm3 - replaced - areaOf(face) * bevelMm,
  };
}

/**
 * Each loop as a fan from its first point: not a filling that could be written, but one with the
 * loop as its border and the right volume below it. Of the section only the border is kept.
 */
const fans: PolygonTriangulator = (loops) => {
  const corners: number[] = [];
  let first = 0;
  for (const loop of loops) {
    const points = loop.length / 2;
    for (let k = 1; k + 1 < points; k++) corners.push(first, first + k, first + k + 1);
    first += points;
  }
  return Uint32Array.from(corners);
};

/** Volume under a lifted triangulation, mm³. */
function climbVolume(
  loops: readonly Float64Array[],
  triangles: Uint32Array,
  heightOf: (point: number) => number,
): number {
  const xy = loops.flatMap((loop) => [...loop]);
  let volume = 0;
  for (let i = 0; i < triangles.length; i += 3) {
    const [a, b, c] = [triangles[i], triangles[i + 1], triangles[i + 2]];
    const area =
      ((xy[2 * b] - xy[2 * a]) * (xy[2 * c + 1] - xy[2 * a + 1]) -
        (xy[2 * b + 1] - xy[2 * a + 1]) * (xy[2 * c] - xy[2 * a])) /
      2;
    volume += (area * (heightOf(a) + heightOf(b) + heightOf(c))) / 3;
  }
  return volume;
}

/** The parts of a slab that do not belong to the face: they stay. */
function bumpsOf(slab: TriangleMesh, tag: number) {
  const { labels, count } = connectedShells(slab);
  const isFace = new Uint8Array(count);
  for (let t = 0; t < labels.length; t++) if (slab.tags![t] === tag) isFace[labels[t]] = 1;
  const keys = new Set<string>();
  const kept: number[] = [];
  for (let t = 0; t < labels.length; t++) {
    if (isFace[labels[t]] === 1) continue;
    kept.push(t);
    if (slab.tags![t] === BEVEL_TAG)
      for (let k = 0; k < 3; k++) keys.add(pointKey(slab.positions, slab.indices[3 * t + k]));
  }
  const part = {
    positions: slab.positions,
    indices: Uint32Array.from(kept.flatMap((t) => [...slab.indices.subarray(3 * t, 3 * t + 3)])),
  };
  return {
    volumeMm3: kept.length > 0 ? signedVolume(part) : 0,
    has: (key: string) => keys.has(key),
    addTo: (draft: MeshDraft, rest: TriangleMesh) => {
      if (kept.length === 0) return;
      const shared = new Map<string, number>();
      for (let t = 0; t < rest.tags!.length; t++)
        if (rest.tags![t] === BEVEL_TAG)
          for (let k = 0; k < 3; k++) {
            const vertex = rest.indices[3 * t + k];
            shared.set(pointKey(rest.positions, vertex), vertex);
          }
      const numbers = new Map<number, number>();
      const numberOf = (vertex: number) => {
        const known = numbers.get(vertex) ?? shared.get(pointKey(slab.positions, vertex));
        const number = known ?? draft.addPoint(slab.positions.subarray(3 * vertex, 3 * vertex + 3));
        numbers.set(vertex, number);
        return number;
      };
      for (const t of kept) {
        if (slab.tags![t] === BEVEL_TAG) continue;
        const [a, b, c] = [0, 1, 2].map((k) => numberOf(slab.indices[3 * t + k]));
        draft.addTriangle(a, b, c, slab.tags![t]);
      }
    },
  };
}

function pointKey(positions: Float64Array, vertex: number): string {
  return `${positions[3 * vertex]},${positions[3 * vertex + 1]},${positions[3 * vertex + 2]}`;
}

function flat(loop: readonly number[], positions: Float64Array, frame: CapFrame): Float64Array {
  const xy = new Float64Array(2 * loop.length);
  for (const [i, vertex] of loop.entries()) xy.set(toPlane(frame, positions, 3 * vertex), 2 * i);
  return xy;
}

function areaOf(loops: readonly Float64Array[]): number {
  return loops.reduce((sum, loop) => sum + loopArea(loop), 0);
}
