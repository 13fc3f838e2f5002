import { Matrix4 } from 'three';
import type { MeshBVH } from 'three-mesh-bvh';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type JobContext, silentContext } from '../runtime/job-context.js';
import { trianglesCross } from './triangle-crossing.js';

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
  const { positions, indices } = mesh;
  const count = indices.length / 3;
  const order = Uint32Array.from({ length: count }, (_, i) => bvh.resolveTriangleIndex(i));
  const boxes = boxesInOrder(mesh, order);
  const tolerance = touchShare * Math.hypot(...boundingBox(positions).size);
  const found: number[] = [];
  let pairs = 0;
  let tests = 0;
  let visits = 0;
  const compare = (i: number, j: number): void => {
    const a = 3 * order[i];
    const b = 3 * order[j];
    const [a0, a1, a2] = [indices[a], indices[a + 1], indices[a + 2]];
    const [b0, b1, b2] = [indices[b], indices[b + 1], indices[b + 2]];
    const shared =
      Number(a0 === b0 || a0 === b1 || a0 === b2) +
      Number(a1 === b0 || a1 === b1 || a1 === b2) +
      Number(a2 === b0 || a2 === b1 || a2 === b2);
    if (shared === 2 && !mayFold(positions, indices, a, b)) return;
    if (!trianglesCross(positions, a0, a1, a2, b0, b1, b2, tolerance)) return;
    pairs++;
    if (pairs <= mostPairs) found.push(order[i], order[j]);
  };
  bvh.bvhcast(bvh, new Matrix4(), {
    intersectsRanges: (from1: number, count1: number, from2: number, count2: number): boolean => {
      // Every pair of leaves is met both ways round.
      if (from2 < from1) return false;
      if ((++visits & (reportEvery - 1)) === 0)
        context.progress('Looking for crossings', Math.min(0.99, visits / (4 * count)));
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

/** Least and greatest xyz of each triangle, in the tree's order. */
function boxesInOrder({ positions, indices }: TriangleMesh, order: Uint32Array): Float64Array {
  const boxes = new Float64Array(6 * order.length);
  for (let i = 0; i < order.length; i++) {
    const at = 3 * order[i];
    const a = 3 * indices[at];
    const b = 3 * indices[at + 1];
    const c = 3 * indices[at + 2];
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

function boxesTouch(boxes: Float64Array, i: number, j: number): boolean {
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
function mayFold(p: Float64Array, indices: Uint32Array, one: number, other: number): boolean {
  const [ax, ay, az] = normalAt(p, indices, one);
  const [bx, by, bz] = normalAt(p, indices, other);
  const across = ax * bx + ay * by + az * bz;
  return across * across > 0.99 * (ax * ax + ay * ay + az * az) * (bx * bx + by * by + bz * bz);
}

function normalAt(p: Float64Array, indices: Uint32Array, at: number): [number, number, number] {
  const a = 3 * indices[at];
  const b = 3 * indices[at + 1];
  const c = 3 * indices[at + 2];
  const ux = p[b] - p[a];
  const uy = p[b + 1] - p[a + 1];
  const uz = p[b + 2] - p[a + 2];
  const vx = p[c] - p[a];
  const vy = p[c + 1] - p[a + 1];
  const vz = p[c + 2] - p[a + 2];
  return [uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx];
}
