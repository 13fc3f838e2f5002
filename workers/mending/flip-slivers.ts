import { mateEdges, nextSide } from '../../shared/geometry/mesh/edge-mates.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** More rounds bring nothing: a chain of slivers is undone a link a round. */
const mostRounds = 4;

/**
 * Removes the slivers of a mesh without opening it: a triangle whose third corner lies on its longest
 * side is flipped with its neighbour across that side, so that both get an area. Leaves alone what
 * cannot be flipped: open or crowded sides, a new side that is there already, neighbours on the same
 * line. Changes no vertex. @param leastHeight triangles lower than this are slivers
 * @returns the mesh itself when nothing was flipped
 */
export function flipSlivers(
  mesh: TriangleMesh,
  leastHeight: number,
): { mesh: TriangleMesh; flipped: number } {
  let flipped = 0;
  let indices = mesh.indices;
  for (let round = 0; round < mostRounds; round++) {
    const slivers = findSlivers(mesh.positions, indices, leastHeight);
    if (slivers.length === 0) break;
    if (indices === mesh.indices) indices = mesh.indices.slice();
    const before = flipped;
    flipped += flipRound(mesh.positions, indices, slivers, leastHeight);
    if (flipped === before) break;
  }
  return flipped === 0
    ? { mesh, flipped }
    : { mesh: { positions: mesh.positions, indices }, flipped };
}

/** Longest sides of slivers. */
function findSlivers(positions: Float64Array, indices: Uint32Array, leastHeight: number): number[] {
  const found: number[] = [];
  for (let side = 0; side < indices.length; side += 3) {
    const longest = longestSide(positions, indices, side);
    if (heightOver(positions, indices, longest) < leastHeight) found.push(longest);
  }
  return found;
}

function flipRound(
  positions: Float64Array,
  indices: Uint32Array,
  slivers: readonly number[],
  leastHeight: number,
): number {
  const { mates } = mateEdges(indices);
  const edges = new Set<string>();
  for (let side = 0; side < indices.length; side++)
    edges.add(edgeKey(indices[side], indices[nextSide(side)]));
  const touched = new Set<number>();
  let flipped = 0;
  for (const side of slivers) {
    const mate = mates[side];
    const triangle = Math.floor(side / 3);
    const neighbour = Math.floor(mate / 3);
    if (mate < 0 || touched.has(triangle) || touched.has(neighbour)) continue;
    if (indices[side] !== indices[nextSide(mate)]) continue;
    const [u, v] = [indices[side], indices[nextSide(side)]];
    const w = indices[nextSide(nextSide(side))];
    const x = indices[nextSide(nextSide(mate))];
    if (w === x || edges.has(edgeKey(w, x))) continue;
    const both = [u, x, w, x, v, w];
    if (Math.min(height(positions, both, 0), height(positions, both, 3)) < leastHeight) continue;
    indices.set([u, x, w], 3 * triangle);
    indices.set([x, v, w], 3 * neighbour);
    edges.add(edgeKey(w, x));
    touched.add(triangle).add(neighbour);
    flipped++;
  }
  return flipped;
}

function edgeKey(a: number, b: number): string {
  return a < b ? `${a} ${b}` : `${b} ${a}`;
}

function longestSide(positions: Float64Array, indices: Uint32Array, first: number): number {
  let longest = first;
  let most = -1;
  for (let side = first; side < first + 3; side++) {
    const length = squaredLength(positions, indices[side], indices[nextSide(side)]);
    if (length > most) {
      most = length;
      longest = side;
    }
  }
  return longest;
}

/** Height of the triangle at `at` over its longest side. */
function height(positions: Float64Array, corners: readonly number[], at: number): number {
  const triangle = Uint32Array.from(corners.slice(at, at + 3));
  return heightOver(positions, triangle, longestSide(positions, triangle, 0));
}

/** Height of a triangle over one of its sides; 0 for a side without length. */
function heightOver(positions: Float64Array, indices: Uint32Array, side: number): number {
  const a = 3 * indices[side];
  const b = 3 * indices[nextSide(side)];
  const c = 3 * indices[nextSide(nextSide(side))];
  const ux = positions[b] - positions[a];
  const uy = positions[b + 1] - positions[a + 1];
  const uz = positions[b + 2] - positions[a + 2];
  const vx = positions[c] - positions[a];
  const vy = positions[c + 1] - positions[a + 1];
  const vz = positions[c + 2] - positions[a + 2];
  const length = Math.sqrt(ux * ux + uy * uy + uz * uz);
  if (length === 0) return 0;
  const nx = uy * vz - uz * vy;
  const ny = uz * vx - ux * vz;
  const nz = ux * vy - uy * vx;
  return Math.sqrt(nx * nx + ny * ny + nz * nz) / length;
}

function squaredLength(positions: Float64Array, a: number, b: number): number {
  const x = positions[3 * a] - positions[3 * b];
  const y = positions[3 * a + 1] - positions[3 * b + 1];
  const z = positions[3 * a + 2] - positions[3 * b + 2];
  return x * x + y * y + z * z;
}
