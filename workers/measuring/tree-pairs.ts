import type { MeshBVH } from 'three-mesh-bvh';
import type { Workspace } from './workspace.js';

/** A tree's nodes in flat arrays, the first child right behind its parent. */
interface FlatTree {
  /** Least and greatest xyz a node. */
  readonly boxes: Float32Array;
  /** The second child; 0 in a leaf. */
  readonly second: Uint32Array;
  /** First triangle of a leaf, in the tree's order. */
  readonly from: Uint32Array;
  readonly count: Uint32Array;
  /** Sum of a box's sides. */
  readonly girth: Float32Array;
}

/** Two leaves whose boxes touch, or the same leaf twice. */
export type VisitLeaves = (
  from1: number,
  count1: number,
  box1: number,
  from2: number,
  count2: number,
  box2: number,
) => boolean;

/**
 * Visits every pair of leaves of one tree whose boxes touch once, and every leaf with itself. Reads the
 * tree through three-mesh-bvh's `traverse` only. `visit` may return true to stop.
 * @param boxes receives the node boxes that `box1` and `box2` point into
 */
export class TreePairs {
  private readonly tree: FlatTree;

  constructor(bvh: MeshBVH, triangles: number, workspace: Workspace) {
    this.tree = flatten(bvh, triangles, workspace);
  }

  get boxes(): Float32Array {
    return this.tree.boxes;
  }

  visit(visit: VisitLeaves): void {
    const { boxes, second, from, count, girth } = this.tree;
    let stack = new Int32Array(1024);
    let height = 0;
    const push = (a: number, b: number) => {
      if (height + 2 > stack.length) {
        const larger = new Int32Array(2 * stack.length);
        larger.set(stack);
        stack = larger;
      }
      stack[height++] = a;
      stack[height++] = b;
    };
    push(0, 0);
    while (height > 0) {
      const b = stack[--height];
      const a = stack[--height];
      if (a === b) {
        if (second[a] === 0) {
          if (visit(from[a], count[a], 6 * a, from[a], count[a], 6 * a)) return;
          continue;
        }
        push(a + 1, second[a]);
        push(second[a], second[a]);
        push(a + 1, a + 1);
        continue;
      }
      if (!boxesTouch(boxes, 6 * a, boxes, 6 * b)) continue;
      if (second[a] === 0 && second[b] === 0) {
        if (visit(from[a], count[a], 6 * a, from[b], count[b], 6 * b)) return;
      } else if (second[b] === 0 || (second[a] !== 0 && girth[a] >= girth[b])) {
        push(second[a], b);
        push(a + 1, b);
      } else {
        push(a, second[b]);
        push(a, b + 1);
      }
    }
  }
}

/** The most that the flat tree of so many triangles takes of a workspace, bytes. */
export function bytesOfTree(triangles: number): number {
  return bytesANode * mostNodes(triangles) + 64;
}

const bytesANode = 24 + 4 + 4 + 4 + 4;

function mostNodes(triangles: number): number {
  return 2 * triangles + 1;
}

function flatten(bvh: MeshBVH, triangles: number, workspace: Workspace): FlatTree {
  const most = mostNodes(triangles);
  const boxes = workspace.floats(6 * most);
  const second = workspace.naturals(most);
  const from = workspace.naturals(most);
  const count = workspace.naturals(most);
  const girth = workspace.floats(most);
  /** The last node seen at each depth, and how many children it has had. */
  const last: number[] = [];
  const children: number[] = [];
  let nodes = 0;
  const add = (
    depth: number,
    isLeaf: boolean,
    box: ArrayLike<number>,
    offset: number,
    size: number,
  ) => {
    const node = nodes++;
    for (let k = 0; k < 6; k++) boxes[6 * node + k] = box[k];
    second[node] = 0;
    girth[node] = box[3] - box[0] + box[4] - box[1] + box[5] - box[2];
    if (isLeaf) {
      from[node] = offset;
      count[node] = size;
    }
    if (depth > 0 && ++children[depth - 1] === 2) second[last[depth - 1]] = node;
    last[depth] = node;
    children[depth] = 0;
    return false;
  };
  bvh.traverse(add as never);
  return { boxes, second, from, count, girth };
}

/** Whether two boxes, six numbers each, have a point in common. */
export function boxesTouch(a: Float32Array, i: number, b: Float32Array, j: number): boolean {
  return (
    a[i] <= b[j + 3] &&
    b[j] <= a[i + 3] &&
    a[i + 1] <= b[j + 4] &&
    b[j + 1] <= a[i + 4] &&
    a[i + 2] <= b[j + 5] &&
    b[j + 2] <= a[i + 5]
  );
}
