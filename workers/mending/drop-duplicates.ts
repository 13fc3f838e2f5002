import { dropUnusedVertices } from '../../shared/geometry/mesh/compact.js';
import { hashCorners, sameCorners } from '../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/**
 * Drops facets that repeat others on the same three vertices. Copies that face the same way become
 * one. Two that face each other have no thickness between them: both go where they form a sheet (a
 * fin, or a wall between two solids that touch), one stays where they form a closed surface (a file
 * that gives every facet once for each side).
 */
export function dropDuplicates(mesh: TriangleMesh): { mesh: TriangleMesh; dropped: number } {
  const { indices } = mesh;
  const triangles = indices.length / 3;
  const { first, balance, copies } = groupCopies(indices);
  const keep = new Uint8Array(triangles).fill(1);
  const doubleSided: number[] = [];
  let dropped = 0;
  for (let triangle = 0; triangle < triangles; triangle++) {
    if (first[triangle] !== triangle) {
      keep[triangle] = 0;
      dropped++;
    } else if (copies[triangle] > 1 && balance[triangle] === 0) doubleSided.push(triangle);
  }
  for (const triangle of sheetsOf(indices, doubleSided)) {
    keep[triangle] = 0;
    dropped++;
  }
  if (dropped === 0) return { mesh, dropped };
  // Of copies that face both ways the side with more of them stays.
  const kept = new Uint32Array(3 * (triangles - dropped));
  let filled = 0;
  for (let triangle = 0; triangle < triangles; triangle++) {
    if (keep[triangle] === 0) continue;
    const [a, b, c] = indices.subarray(3 * triangle, 3 * triangle + 3);
    kept.set(balance[triangle] < 0 ? [a, c, b] : [a, b, c], filled);
    filled += 3;
  }
  return { mesh: dropUnusedVertices({ positions: mesh.positions, indices: kept }), dropped };
}

/** For each triangle the first one on its vertices; for those how many face like it less how many do not. */
function groupCopies(indices: Uint32Array) {
  const triangles = indices.length / 3;
  const first = new Int32Array(triangles);
  const balance = new Int32Array(triangles);
  const copies = new Int32Array(triangles);
  let size = 16;
  while (size < 2 * triangles) size *= 2;
  const table = new Int32Array(size).fill(-1);
  for (let triangle = 0; triangle < triangles; triangle++) {
    let slot = hashCorners(indices, triangle) & (size - 1);
    while (table[slot] >= 0 && !sameCorners(indices, table[slot], triangle))
      slot = (slot + 1) & (size - 1);
    if (table[slot] < 0) table[slot] = triangle;
    const leader = table[slot];
    first[triangle] = leader;
    copies[leader]++;
    balance[leader] += facesLike(indices, leader, triangle) ? 1 : -1;
  }
  return { first, balance, copies };
}

/** Whether two triangles on the same vertices run round them the same way. */
function facesLike(indices: Uint32Array, one: number, other: number): boolean {
  const a = indices[3 * one];
  const b = indices[3 * one + 1];
  for (let k = 0; k < 3; k++)
    if (indices[3 * other + k] === a) return indices[3 * other + ((k + 1) % 3)] === b;
  return false;
}

/** Of triangles that stand for double-sided facets, those in groups that do not close on themselves. */
function sheetsOf(indices: Uint32Array, triangles: readonly number[]): number[] {
  const uses = new Map<string, number[]>();
  for (const triangle of triangles)
    for (let k = 0; k < 3; k++) {
      const key = edgeKey(indices[3 * triangle + k], indices[3 * triangle + ((k + 1) % 3)]);
      const users = uses.get(key);
      if (users) users.push(triangle);
      else uses.set(key, [triangle]);
    }
  const sheets: number[] = [];
  const seen = new Set<number>();
  for (const start of triangles) {
    if (seen.has(start)) continue;
    const group = [start];
    let isClosed = true;
    seen.add(start);
    for (let at = 0; at < group.length; at++)
      for (let k = 0; k < 3; k++) {
        const from = 3 * group[at];
        const users = uses.get(edgeKey(indices[from + k], indices[from + ((k + 1) % 3)]))!;
        if (users.length < 2) isClosed = false;
        for (const user of users) {
          if (seen.has(user)) continue;
          seen.add(user);
          group.push(user);
        }
      }
    if (!isClosed) sheets.push(...group);
  }
  return sheets;
}

function edgeKey(a: number, b: number): string {
  return a < b ? `${a} ${b}` : `${b} ${a}`;
}
