import { bucketEdges } from '../../../shared/geometry/mesh/edge-buckets.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';

/** With more triangles than this share of the mesh's the cones save nothing. */
const mostShare = 1;

/**
 * Triangles that close any set of triangles: with them every edge is used as often one way as the other,
 * so that the winding number is whole everywhere. Rims that hang together get one new vertex, their
 * middle, and a triangle from it to each open side. Null when there would be too many of them.
 */
export function closingCones(mesh: TriangleMesh): TriangleMesh | null {
  const most = (mostShare * mesh.indices.length) / 3;
  const excess = excessSides(mesh, most);
  if (!excess) return null;
  const middleOf = rimMiddles(mesh, excess);
  const positions: number[] = [];
  const numberOf = new Map<number, number>();
  const take = (key: number, x: number, y: number, z: number): number => {
    let number = numberOf.get(key);
    if (number === undefined) {
      numberOf.set(key, (number = positions.length / 3));
      positions.push(x, y, z);
    }
    return number;
  };
  const corner = (vertex: number) =>
    take(
      vertex,
      mesh.positions[3 * vertex],
      mesh.positions[3 * vertex + 1],
      mesh.positions[3 * vertex + 2],
    );
  const indices = new Uint32Array((3 * excess.length) / 2);
  for (let i = 0; i < excess.length; i += 2) {
    const { root, middle } = middleOf(excess[i]);
    const at = (3 * i) / 2;
    indices[at] = corner(excess[i + 1]);
    indices[at + 1] = corner(excess[i]);
    // Middles are told from corners by their sign.
    indices[at + 2] = take(-1 - root, middle[0], middle[1], middle[2]);
  }
  return { positions: Float64Array.from(positions), indices };
}

/** Ends of the sides that are used more often one way, once for each time too often. */
function excessSides(mesh: TriangleMesh, most: number): number[] | null {
  const { start, far, vertexCount } = bucketEdges(mesh.indices, false);
  const net = new Int32Array(vertexCount);
  const excess: number[] = [];
  for (let vertex = 0; vertex < vertexCount; vertex++) {
    for (let i = start[vertex]; i < start[vertex + 1]; i++)
      net[far[i] >>> 1] += (far[i] & 1) === 0 ? 1 : -1;
    for (let i = start[vertex]; i < start[vertex + 1]; i++) {
      const other = far[i] >>> 1;
      for (; net[other] > 0; net[other]--) excess.push(vertex, other);
      for (; net[other] < 0; net[other]++) excess.push(other, vertex);
    }
    if (excess.length / 2 > most) return null;
  }
  return excess;
}

/** For each vertex of a rim the lowest vertex and the middle of all rims that hang together with it. */
function rimMiddles({ positions }: TriangleMesh, excess: readonly number[]) {
  const link = new Map<number, number>();
  const rootOf = (vertex: number): number => {
    let root = vertex;
    for (let up = link.get(root); up !== undefined; up = link.get(root)) root = up;
    for (let at = vertex; at !== root;) {
      const up = link.get(at)!;
      link.set(at, root);
      at = up;
    }
    return root;
  };
  for (let i = 0; i < excess.length; i += 2) {
    const [a, b] = [rootOf(excess[i]), rootOf(excess[i + 1])];
    if (a !== b) link.set(Math.max(a, b), Math.min(a, b));
  }
  const sums = new Map<number, [x: number, y: number, z: number, count: number]>();
  for (const vertex of excess) {
    const root = rootOf(vertex);
    const sum = sums.get(root) ?? [0, 0, 0, 0];
    for (let axis = 0; axis < 3; axis++) sum[axis] += positions[3 * vertex + axis];
    sum[3]++;
    sums.set(root, sum);
  }
  return (vertex: number): { root: number; middle: [number, number, number] } => {
    const root = rootOf(vertex);
    const [x, y, z, count] = sums.get(root)!;
    return { root, middle: [x / count, y / count, z / count] };
  };
}
