import { Matrix4 } from 'three';
import type { MeshBVH } from 'three-mesh-bvh';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type JobContext, silentContext } from '../runtime/job-context.js';
import { trianglesCross, writePlane } from './triangle-crossing.js';

export interface FoundCrossings {
  /** Pairs of triangles that cross. */
  readonly pairs: number;
  /** Whether all were counted; false when the work was stopped at its limit. */
  readonly complete: boolean;
  /** Numbers of the triangles, two a pair; at most `mostPairs` pairs. */
  readonly triangles: Uint32Array;
}

const usualMostPairs = 100_000;
/** Bounds the work on input in which everything crosses everything: pairs of boxes that touch. */
const mostTests = 200_000_000;
const reportEvery = 1 << 16;
/** Surfaces that reach less than this share of the diagonal into each other touch: float32 rounding. */
const touchShare = 1e-7;

/**
 * Counts the pairs of triangles that cross each other, each pair once, by walking three-mesh-bvh's
 * tree against itself. See `trianglesCross` for what counts. Calls `progress` about 20 times a second.
 */
export function findCrossings(
  mesh: TriangleMesh,
  bvh: MeshBVH,
  {
    mostPairs = usualMostPairs,
    context = silentContext,
  }: { mostPairs?: number; context?: JobContext } = {},
): FoundCrossings {
  const { positions } = mesh;
  const count = mesh.indices.length / 3;
  const tolerance = touchShare * Math.hypot(...boundingBox(positions).size);
  const { order, corners, boxes, planes } = inTreeOrder(mesh, bvh);
  const found: number[] = [];
  let pairs = 0;
  let tests = 0;
  let visits = 0;
  const compare = (i: number, j: number): void => {
    const a0 = corners[3 * i];
    const a1 = corners[3 * i + 1];
    const a2 = corners[3 * i + 2];
    const b0 = corners[3 * j];
    const b1 = corners[3 * j + 1];
    const b2 = corners[3 * j + 2];
    const shared =
      (a0 === b0 || a0 === b1 || a0 === b2 ? 1 : 0) +
      (a1 === b0 || a1 === b1 || a1 === b2 ? 1 : 0) +
      (a2 === b0 || a2 === b1 || a2 === b2 ? 1 : 0);
    if (shared === 2 && !mayFold(planes, 4 * i, 4 * j)) return;
    if (!trianglesCross(positions, planes, a0, a1, a2, 4 * i, b0, b1, b2, 4 * j, tolerance)) return;
    pairs++;
    if (pairs <= mostPairs) found.push(order[i], order[j]);
  };
  bvh.bvhcast(bvh, new Matrix4(), {
    intersectsRanges: (from1: number, count1: number, from2: number, count2: number): boolean => {
      // Every pair of leaves is met both ways round.
      if (from2 < from1) return false;
      if ((++visits & (reportEvery - 1)) === 0)
        context.progress('Looking for crossings', Math.min(0.99, visits / count));
      for (let i = from1; i < from1 + count1; i++)
        for (let j = from1 === from2 ? i + 1 : from2; j < from2 + count2; j++)
          if (boxesTouch(boxes, 6 * i, 6 * j)) {
            tests++;
            compare(i, j);
          }
      return tests > mostTests;
    },
  } as never);
  return { pairs, complete: tests <= mostTests, triangles: Uint32Array.from(found) };
}

/** Everything that is asked of a triangle, in the order of the tree's leaves: neighbours lie close. */
function inTreeOrder({ positions, indices }: TriangleMesh, bvh: MeshBVH) {
  const count = indices.length / 3;
  const order = new Uint32Array(count);
  const corners = new Uint32Array(3 * count);
  const planes = new Float64Array(4 * count);
  for (let i = 0; i < count; i++) {
    const triangle = bvh.resolveTriangleIndex(i);
    order[i] = triangle;
    const a = indices[3 * triangle];
    const b = indices[3 * triangle + 1];
    const c = indices[3 * triangle + 2];
    corners[3 * i] = a;
    corners[3 * i + 1] = b;
    corners[3 * i + 2] = c;
    writePlane(positions, a, b, c, planes, 4 * i);
  }
  return { order, corners, planes, boxes: boxesOf(positions, corners) };
}

/** Least and greatest xyz of each triangle. Rounding keeps the order of numbers, so that boxes that
 *  touch still do in single precision. */
function boxesOf(positions: Float64Array, corners: Uint32Array): Float32Array {
  const boxes = new Float32Array(2 * corners.length);
  for (let i = 0; i < corners.length / 3; i++) {
    const a = 3 * corners[3 * i];
    const b = 3 * corners[3 * i + 1];
    const c = 3 * corners[3 * i + 2];
    for (let axis = 0; axis < 3; axis++) {
      const x = positions[a + axis];
      const y = positions[b + axis];
      const z = positions[c + axis];
      boxes[6 * i + axis] = x < y ? (x < z ? x : z) : y < z ? y : z;
      boxes[6 * i + 3 + axis] = x > y ? (x > z ? x : z) : y > z ? y : z;
    }
  }
  return boxes;
}

function boxesTouch(boxes: Float32Array, i: number, j: number): boolean {
  return (
    boxes[i] <= boxes[j + 3] &&
    boxes[j] <= boxes[i + 3] &&
    boxes[i + 1] <= boxes[j + 4] &&
    boxes[j + 1] <= boxes[i + 4] &&
    boxes[i + 2] <= boxes[j + 5] &&
    boxes[j + 2] <= boxes[i + 5]
  );
}

/** Triangles with a common side can only cross by lying on each other: their normals are opposed. */
function mayFold(planes: Float64Array, one: number, other: number): boolean {
  const cosine =
    planes[one] * planes[other] +
    planes[one + 1] * planes[other + 1] +
    planes[one + 2] * planes[other + 2];
  // Without a normal nothing can be said.
  return cosine < -0.995 || cosine === 0;
}
