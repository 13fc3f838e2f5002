import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { ABOVE, BELOW, ON, type Sides } from './plane-sides.js';
import { type SectionNodes } from './section-nodes.js';

/** Directed edges of the cap of the side below, between nodes; solid lies to the left. */
export interface SectionLinks {
  readonly count: number;
  readonly from: Int32Array;
  readonly to: Int32Array;
}

/**
 * The edges the cap must have: what the surface below leaves open, turned round. Each crossing
 * triangle gives one. Triangles that lie below and touch the plane along an edge give one for it,
 * unless their neighbour across it lies below too: then the two cancel.
 * O(crossing triangles + triangles that touch the plane).
 */
export function linkSection(mesh: TriangleMesh, sides: Sides, nodes: SectionNodes): SectionLinks {
  const touching = sides.counts[BELOW | ON];
  const room = nodes.crossing.length + (sides.onVertices > 1 ? 3 * touching : 0);
  const from = new Int32Array(room);
  const to = new Int32Array(room);
  let count = 0;
  for (let k = 0; k < nodes.crossing.length; k++) {
    from[count] = entryNode(mesh, sides, nodes, k);
    to[count] = exitNode(mesh, sides, nodes, k);
    count++;
  }
  if (room > count && nodes.nodeOfVertex !== null) {
    count = linkTouchingEdges(mesh, sides, nodes.nodeOfVertex, from, to, count);
  }
  return { count, from, to };
}

/** Node where the border of crossing triangle k, walked in its winding, goes from below to above. */
function exitNode(mesh: TriangleMesh, sides: Sides, nodes: SectionNodes, k: number): number {
  return nodeBefore(mesh, sides, nodes, k, ABOVE);
}

/** Node where it comes back below. */
function entryNode(mesh: TriangleMesh, sides: Sides, nodes: SectionNodes, k: number): number {
  return nodeBefore(mesh, sides, nodes, k, BELOW);
}

/** Node right before the triangle's border enters a side. */
function nodeBefore(
  mesh: TriangleMesh,
  sides: Sides,
  nodes: SectionNodes,
  k: number,
  side: number,
): number {
  const first = 3 * nodes.crossing[k];
  for (let corner = 0; corner < 3; corner++) {
    const from = mesh.indices[first + corner];
    const to = mesh.indices[corner === 2 ? first : first + corner + 1];
    if (sides.vertices[to] !== side) continue;
    if (nodes.edgeNodes[3 * k + corner] >= 0) return nodes.edgeNodes[3 * k + corner];
    if (sides.vertices[from] === ON && nodes.nodeOfVertex !== null) return nodes.nodeOfVertex[from];
  }
  return -1;
}

function linkTouchingEdges(
  mesh: TriangleMesh,
  sides: Sides,
  nodeOfVertex: Int32Array,
  from: Int32Array,
  to: Int32Array,
  first: number,
): number {
  const { indices } = mesh;
  let size = 16;
  while (size < 2 * (from.length - first)) size *= 2;
  const mask = size - 1;
  /** Number of the link last put on an edge between two nodes, + 1. */
  const table = new Int32Array(size);
  let count = first;
  for (let triangle = 0; triangle < sides.triangles.length; triangle++) {
    if (sides.triangles[triangle] !== (BELOW | ON)) continue;
    for (let corner = 0; corner < 3; corner++) {
      const start = indices[3 * triangle + corner];
      const end = indices[corner === 2 ? 3 * triangle : 3 * triangle + corner + 1];
      if (sides.vertices[start] !== ON || sides.vertices[end] !== ON) continue;
      const a = nodeOfVertex[start];
      const b = nodeOfVertex[end];
      let hash = Math.imul(a < b ? a : b, 0x9e3779b1) ^ Math.imul(a < b ? b : a, 0x85ebca6b);
      hash ^= hash >>> 15;
      let slot = hash & mask;
      while (table[slot] > 0) {
        const link = table[slot] - 1;
        // An opposite link on the same edge: both triangles lie below, nothing is open here.
        if (from[link] === a && to[link] === b) break;
        slot = (slot + 1) & mask;
      }
      if (table[slot] > 0) {
        const link = table[slot] - 1;
        from[link] = -1;
        to[link] = -1;
        continue;
      }
      from[count] = b;
      to[count] = a;
      table[slot] = ++count;
    }
  }
  return packLinks(from, to, first, count);
}

function packLinks(from: Int32Array, to: Int32Array, first: number, end: number): number {
  let count = first;
  for (let link = first; link < end; link++) {
    if (from[link] < 0) continue;
    from[count] = from[link];
    to[count] = to[link];
    count++;
  }
  return count;
}
