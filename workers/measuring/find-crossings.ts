import type { MeshBVH } from 'three-mesh-bvh';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type JobContext, silentContext } from '../runtime/job-context.js';
import { boxesTouch, bytesOfTree, TreePairs } from './tree-pairs.js';
import { trianglesCross, writePlane } from './triangle-crossing.js';
import { Workspace } from './workspace.js';

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
  const workspace = new Workspace(bytesATriangle * count + bytesOfTree(count));
  const { order, corners, boxes, planes } = inTreeOrder(mesh, bvh, workspace);
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
  const tree = new TreePairs(bvh, count, workspace);
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
    const near = collectTouching(boxes, from2, count2, nodes, box1, nearby);
    if (near === 0) return false;
    const lowX = nodes[box2];
    const lowY = nodes[box2 + 1];
    const lowZ = nodes[box2 + 2];
    const highX = nodes[box2 + 3];
    const highY = nodes[box2 + 4];
    const highZ = nodes[box2 + 5];
    for (let i = from1; i < from1 + count1; i++) {
      const x0 = boxes[6 * i];
      const y0 = boxes[6 * i + 1];
      const z0 = boxes[6 * i + 2];
      const x1 = boxes[6 * i + 3];
      const y1 = boxes[6 * i + 4];
      const z1 = boxes[6 * i + 5];
      if (x0 > highX || x1 < lowX || y0 > highY || y1 < lowY || z0 > highZ || z1 < lowZ) continue;
      for (let k = 0; k < near; k++) {
        const j = nearby[k];
        const box = 6 * j;
        if (x0 > boxes[box + 3] || x1 < boxes[box] || y0 > boxes[box + 4]) continue;
        if (y1 < boxes[box + 1] || z0 > boxes[box + 5] || z1 < boxes[box + 2]) continue;
        tests++;
        compare(i, j);
      }
    }
    return tests > mostTests;
  });
  return { pairs, complete: tests <= mostTests, triangles: Uint32Array.from(found) };
}

/** What `inTreeOrder` takes of a workspace: number, corners, plane and box. */
const bytesATriangle = 4 + 12 + 32 + 24;

/**
 * Everything that is asked of a triangle, in the order of the tree's leaves: neighbours lie close.
 * Rounding keeps the order of numbers, so boxes that touch still do in single precision.
 */
function inTreeOrder({ positions: p, indices }: TriangleMesh, bvh: MeshBVH, workspace: Workspace) {
  const count = indices.length / 3;
  const order = workspace.naturals(count);
  const corners = workspace.naturals(3 * count);
  const planes = workspace.doubles(4 * count);
  const boxes = workspace.floats(6 * count);
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
    writeBox(p, 3 * a, 3 * b, 3 * c, boxes, 6 * i);
  }
  return { order, corners, planes, boxes };
}

/** Writes least and greatest xyz of three corners, given by where they stand in `p`. */
function writeBox(
  p: Float64Array,
  a: number,
  b: number,
  c: number,
  boxes: Float32Array,
  to: number,
): void {
  for (let axis = 0; axis < 3; axis++) {
    const x = p[a + axis];
    const y = p[b + axis];
    const z = p[c + axis];
    boxes[to + axis] = x < y ? (x < z ? x : z) : y < z ? y : z;
    boxes[to + 3 + axis] = x > y ? (x > z ? x : z) : y > z ? y : z;
  }
}

/** Lists the triangles of a leaf whose boxes touch a node's; returns how many. */
function collectTouching(
  boxes: Float32Array,
  from: number,
  count: number,
  nodes: Float32Array,
  node: number,
  found: Uint32Array,
): number {
  let touching = 0;
  for (let j = from; j < from + count; j++)
    if (boxesTouch(boxes, 6 * j, nodes, node)) found[touching++] = j;
  return touching;
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
