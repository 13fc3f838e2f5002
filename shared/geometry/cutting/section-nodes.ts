import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { type Plane } from '../vectors/plane.js';
import { ABOVE, BELOW, ON, type Sides } from './plane-sides.js';

/**
 * The vertices of the section: first the mesh's own vertices on the plane, then one new vertex for
 * every edge that crosses it.
 */
export interface SectionNodes {
  readonly count: number;
  /** Flat xyz, mm, length at least 3 × count. */
  readonly positions: Float64Array;
  /** Node of each mesh vertex, valid where the vertex is ON; null when none is. */
  readonly nodeOfVertex: Int32Array | null;
  /** Crossing triangles in the mesh's order. */
  readonly crossing: Uint32Array;
  /** Node on each directed edge of each crossing triangle, -1 where the edge does not cross. */
  readonly edgeNodes: Int32Array;
}

/**
 * Numbers and places the nodes. A new vertex is always interpolated from the end above to the end
 * below and then put onto the plane, so both its triangles, and both sides, see the same bits.
 * O(vertices on the plane + crossing triangles) beyond one scan of the codes.
 */
export function placeSectionNodes(mesh: TriangleMesh, plane: Plane, sides: Sides): SectionNodes {
  const crossing = listCrossing(sides);
  const positions = new Float64Array(3 * (sides.onVertices + 2 * crossing.length));
  const nodeOfVertex = placeOnVertices(mesh, sides, positions);
  const edgeNodes = new Int32Array(3 * crossing.length).fill(-1);
  const edges = new CrossingEdges(crossing.length);
  let count = sides.onVertices;
  for (let k = 0; k < crossing.length; k++) {
    const first = 3 * crossing[k];
    for (let corner = 0; corner < 3; corner++) {
      const from = mesh.indices[first + corner];
      const to = mesh.indices[corner === 2 ? first : first + corner + 1];
      const sideFrom = sides.vertices[from];
      if ((sideFrom | sides.vertices[to]) !== (ABOVE | BELOW)) continue;
      const above = sideFrom === ABOVE ? from : to;
      const below = sideFrom === ABOVE ? to : from;
      const node = edges.nodeOf(above, below, count);
      if (node === count) interpolate(mesh.positions, above, below, plane, positions, count++);
      edgeNodes[3 * k + corner] = node;
    }
  }
  return { count, positions, nodeOfVertex, crossing, edgeNodes };
}

function listCrossing(sides: Sides): Uint32Array {
  const both = ABOVE | BELOW;
  const crossing = new Uint32Array(sides.counts[both] + sides.counts[both | ON]);
  if (crossing.length === 0) return crossing;
  const codes = sides.triangles;
  let k = 0;
  for (let triangle = 0; triangle < codes.length; triangle++) {
    if ((codes[triangle] & both) === both) crossing[k++] = triangle;
  }
  return crossing;
}

function placeOnVertices(
  mesh: TriangleMesh,
  sides: Sides,
  positions: Float64Array,
): Int32Array | null {
  if (sides.onVertices === 0) return null;
  const nodeOfVertex = new Int32Array(sides.vertices.length);
  let node = 0;
  for (let vertex = 0; vertex < nodeOfVertex.length; vertex++) {
    if (sides.vertices[vertex] !== ON) continue;
    positions[3 * node] = mesh.positions[3 * vertex];
    positions[3 * node + 1] = mesh.positions[3 * vertex + 1];
    positions[3 * node + 2] = mesh.positions[3 * vertex + 2];
    nodeOfVertex[vertex] = node++;
  }
  return nodeOfVertex;
}

function interpolate(
  from: Float64Array,
  above: number,
  below: number,
  plane: Plane,
  to: Float64Array,
  node: number,
): void {
  const [nx, ny, nz] = plane.normal;
  const a = 3 * above;
  const b = 3 * below;
  const da = nx * from[a] + ny * from[a + 1] + nz * from[a + 2] - plane.offset;
  const db = nx * from[b] + ny * from[b + 1] + nz * from[b + 2] - plane.offset;
  const t = da / (da - db);
  const x = from[a] + t * (from[b] - from[a]);
  const y = from[a + 1] + t * (from[b + 1] - from[a + 1]);
  const z = from[a + 2] + t * (from[b + 2] - from[a + 2]);
  // What rounding left over is taken off: across an axis the coordinate becomes the offset itself.
  const rest = nx * x + ny * y + nz * z - plane.offset;
  to[3 * node] = x - rest * nx;
  to[3 * node + 1] = y - rest * ny;
  to[3 * node + 2] = z - rest * nz;
}

/** Finds the node of a crossing edge by its two ends; open addressing, sized once. */
class CrossingEdges {
  private readonly mask: number;
  private readonly above: Int32Array;
  private readonly below: Int32Array;
  private readonly node: Int32Array;

  constructor(crossingTriangles: number) {
    let size = 16;
    // A closed mesh has one crossing edge a triangle, an open one at most two.
    while (size < 4 * crossingTriangles) size *= 2;
    this.mask = size - 1;
    this.above = new Int32Array(size);
    this.below = new Int32Array(size);
    this.node = new Int32Array(size).fill(-1);
  }

  /** The edge's node, or `fresh`, which it then keeps. */
  nodeOf(above: number, below: number, fresh: number): number {
    let hash = Math.imul(above, 0x9e3779b1) ^ Math.imul(below, 0x85ebca6b);
    hash ^= hash >>> 15;
    let slot = hash & this.mask;
    while (this.node[slot] >= 0) {
      if (this.above[slot] === above && this.below[slot] === below) return this.node[slot];
      slot = (slot + 1) & this.mask;
    }
    this.above[slot] = above;
    this.below[slot] = below;
    this.node[slot] = fresh;
    return fresh;
  }
}
