import type { MeshBVH } from 'three-mesh-bvh';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type JobContext, silentContext } from '../runtime/job-context.js';
import { boxesTouch, TreePairs } from './tree-pairs.js';
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
  const tree = new TreePairs(bvh, count);
  const nodes = tree.boxes;
  let nearby = new Uint32Array(64);
  tree.visit((from1, count1, box1, from2, count2, box2) => {
    if ((++visits & (reportEvery - 1)) === 0)
      context.progress('Looking for crossings', Math.min(0.99, visits / count));
    if (from1 === from2) {
      for (let i = from1; i < from1 + count1; i++)
        for (let j = i + 1; j < from1 + count1; j++)
          if (boxesTouch(boxes, 6 * i, boxes, 6 * j)) {
            tests++;
            compare(i, j);
          }
      return tests > mostTests;
    }
    // Of two leaves side by side only the triangles at their border can meet.
    if (count2 > nearby.length) nearby = new Uint32Array(2 * count2);
    let near = 0;
    for (let j = from2; j < from2 + count2; j++)
      if (boxesTouch(boxes, 6 * j, nodes, box1)) nearby[near++] = j;
    if (near === 0) return false;
    for (let i = from1; i < from1 + count1; i++) {
      if (!boxesTouch(boxes, 6 * i, nodes, box2)) continue;
      for (let k = 0; k < near; k++) {
        const j = nearby[k];
        if (!boxesTouch(boxes, 6 * i, boxes, 6 * j)) continue;
        tests++;
        compare(i, j);
      }
    }
    return tests > mostTests;
  });
  return { pairs, complete: tests <= mostTests, triangles: Uint32Array.from(found) };
}

/**
 * Everything that is asked of a triangle, in the order of the tree's leaves: neighbours lie close.
 * Rounding keeps the order of numbers, so boxes that touch still do in single precision.
 */
function inTreeOrder({ positions: p, indices }: TriangleMesh, bvh: MeshBVH) {
  const count = indices.length / 3;
  const order = new Uint32Array(count);
  const corners = new Uint32Array(3 * count);
  const planes = new Float64Array(4 * count);
  const boxes = new Float32Array(6 * count);
  for (let i = 0; i < count; i++) {
    const triangle = bvh.resolveTriangleIndex(i);
    order[i] = triangle;
    const a = indices[3 * triangle];
    const b = indices[3 * triangle + 1];
    const c = indices[3 * triangle + 2];
    corners[3 * i] = a;
    corners[3 * i + 1] = b;
    corners[3 * i + 2] = c;
    writePlane(p, corners, 3 * i, planes, 4 * i);
    for (let axis = 0; axis < 3; axis++) {
      const x = p[3 * a + axis];
      const y = p[3 * b + axis];
      const z = p[3 * c + axis];
      boxes[6 * i + axis] = x < y ? (x < z ? x : z) : y < z ? y : z;
      boxes[6 * i + 3 + axis] = x > y ? (x > z ? x : z) : y > z ? y : z;
    }
  }
  return { order, corners, planes, boxes };
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
