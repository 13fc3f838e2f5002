import { bucketEdges } from './edge-buckets.js';
import { type TriangleMesh } from './triangle-mesh.js';

export interface Shells {
  /** Shell of each triangle, numbered in order of their first triangle. */
  readonly labels: Int32Array;
  readonly count: number;
}

/**
 * Groups triangles that hang together by shared edges, whichever way these run. Triangles that meet
 * in a vertex only stay apart. O(triangles), near enough (union-find with path halving).
 */
export function connectedShells(mesh: { readonly indices: Uint32Array }): Shells {
  const triangles = mesh.indices.length / 3;
  const { start, far, triangle: triangleAt, vertexCount } = bucketEdges(mesh.indices, true);
  const parent = new Int32Array(triangles);
  for (let triangle = 0; triangle < triangles; triangle++) parent[triangle] = triangle;
  /** Triangle, + 1, last seen on the edge to each larger vertex, valid within one bucket. */
  const seen = new Int32Array(vertexCount);
  if (triangleAt !== null) {
    for (let vertex = 0; vertex < vertexCount; vertex++) {
      const end = start[vertex + 1];
      for (let i = start[vertex]; i < end; i++) {
        const other = far[i] >>> 1;
        const triangle = triangleAt[i];
        if (seen[other] > 0) unite(parent, seen[other] - 1, triangle);
        else seen[other] = triangle + 1;
      }
      for (let i = start[vertex]; i < end; i++) seen[far[i] >>> 1] = 0;
    }
  }
  return numberRoots(parent);
}

/** The smaller number becomes the root, so a root is the first triangle of its shell. */
function unite(parent: Int32Array, a: number, b: number): void {
  const rootA = findRoot(parent, a);
  const rootB = findRoot(parent, b);
  if (rootA < rootB) parent[rootB] = rootA;
  else parent[rootA] = rootB;
}

function findRoot(parent: Int32Array, at: number): number {
  while (parent[at] !== at) {
    parent[at] = parent[parent[at]];
    at = parent[at];
  }
  return at;
}

function numberRoots(parent: Int32Array): Shells {
  const labels = new Int32Array(parent.length);
  let count = 0;
  for (let triangle = 0; triangle < parent.length; triangle++) {
    const root = findRoot(parent, triangle);
    labels[triangle] = root === triangle ? count++ : labels[root];
  }
  return { labels, count };
}

/** Signed volume of each shell, mm³: negative for a cavity. Taken from the mesh's first vertex. */
export function shellVolumes(mesh: TriangleMesh, shells: Shells): Float64Array {
  const { positions, indices } = mesh;
  const { labels, count } = shells;
  const volumes = new Float64Array(count);
  const ox = positions[0];
  const oy = positions[1];
  const oz = positions[2];
  for (let triangle = 0; triangle < labels.length; triangle++) {
    const a = 3 * indices[3 * triangle];
    const b = 3 * indices[3 * triangle + 1];
    const c = 3 * indices[3 * triangle + 2];
    const bx = positions[b] - ox;
    const by = positions[b + 1] - oy;
    const bz = positions[b + 2] - oz;
    const cx = positions[c] - ox;
    const cy = positions[c + 1] - oy;
    const cz = positions[c + 2] - oz;
    volumes[labels[triangle]] +=
      ((positions[a] - ox) * (by * cz - bz * cy) +
        (positions[a + 1] - oy) * (bz * cx - bx * cz) +
        (positions[a + 2] - oz) * (bx * cy - by * cx)) /
      6;
  }
  return volumes;
}

/** Triangles listed shell by shell, in their order: shell s is triangles[start[s]] .. < start[s + 1]. */
export function listByShell(shells: Shells): { triangles: Uint32Array; start: Uint32Array } {
  const { labels, count } = shells;
  const start = new Uint32Array(count + 1);
  for (let triangle = 0; triangle < labels.length; triangle++) start[labels[triangle] + 1]++;
  for (let shell = 0; shell < count; shell++) start[shell + 1] += start[shell];
  const next = start.slice(0, count);
  const triangles = new Uint32Array(labels.length);
  for (let triangle = 0; triangle < labels.length; triangle++) {
    triangles[next[labels[triangle]]++] = triangle;
  }
  return { triangles, start };
}
