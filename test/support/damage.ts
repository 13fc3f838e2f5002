import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { randomDirection, randomInteger } from './random.js';

/** Ways to break a sound mesh by code. Each returns a new mesh or soup and leaves its input alone. */

/** Without `count` triangles drawn at random. */
export function removeFacets(
  mesh: TriangleMesh,
  count: number,
  random: () => number,
): TriangleMesh {
  const triangles = mesh.indices.length / 3;
  const gone = new Set<number>();
  while (gone.size < Math.min(count, triangles - 1)) gone.add(randomInteger(random, triangles));
  return keepFacets(mesh, (triangle) => !gone.has(triangle));
}

/** Without the triangles whose middle lies within a distance of a point: a window. */
export function cutWindow(
  mesh: TriangleMesh,
  at: readonly [number, number, number],
  radius: number,
): TriangleMesh {
  return keepFacets(mesh, (triangle) => {
    const middle = [0, 1, 2].map((axis) =>
      [0, 1, 2].reduce(
        (sum, k) => sum + mesh.positions[3 * mesh.indices[3 * triangle + k]! + axis]! / 3,
        0,
      ),
    );
    return Math.hypot(middle[0]! - at[0], middle[1]! - at[1], middle[2]! - at[2]) > radius;
  });
}

function keepFacets(mesh: TriangleMesh, isKept: (triangle: number) => boolean): TriangleMesh {
  const kept: number[] = [];
  for (let triangle = 0; triangle < mesh.indices.length / 3; triangle++)
    if (isKept(triangle)) kept.push(...mesh.indices.subarray(3 * triangle, 3 * triangle + 3));
  return { positions: mesh.positions, indices: Uint32Array.from(kept) };
}

/** With a share of the triangles turned round. */
export function flipFacets(mesh: TriangleMesh, share: number, random: () => number): TriangleMesh {
  const indices = mesh.indices.slice();
  for (let i = 0; i < indices.length; i += 3) {
    if (random() >= share) continue;
    const second = indices[i + 1]!;
    indices[i + 1] = indices[i + 2]!;
    indices[i + 2] = second;
  }
  return { positions: mesh.positions, indices };
}

/** With a share of the triangles given again, at the end; the copies may face the other way. */
export function duplicateFacets(
  mesh: TriangleMesh,
  share: number,
  random: () => number,
  isReversed = false,
): TriangleMesh {
  const indices = [...mesh.indices];
  for (let i = 0; i < mesh.indices.length; i += 3) {
    if (random() >= share) continue;
    const [a, b, c] = mesh.indices.subarray(i, i + 3);
    indices.push(...(isReversed ? [a!, c!, b!] : [a!, b!, c!]));
  }
  return { positions: mesh.positions, indices: Uint32Array.from(indices) };
}

/** A soup whose corners are moved by up to `distance` each, every facet on its own: cracks everywhere. */
export function jitterCorners(
  mesh: TriangleMesh,
  distance: number,
  random: () => number,
): Float64Array {
  const soup = Float64Array.from(mesh.indices, () => 0);
  const corners = new Float64Array(3 * soup.length);
  for (let corner = 0; corner < mesh.indices.length; corner++) {
    const direction = randomDirection(random);
    const step = distance * random();
    for (let axis = 0; axis < 3; axis++)
      corners[3 * corner + axis] =
        mesh.positions[3 * mesh.indices[corner]! + axis]! + step * direction[axis]!;
  }
  return corners;
}

/** Splits a share of the triangles at the middle of one side, but not the neighbour: T-junctions. */
export function makeTJunctions(
  mesh: TriangleMesh,
  share: number,
  random: () => number,
): TriangleMesh {
  const positions = [...mesh.positions];
  const indices: number[] = [];
  for (let i = 0; i < mesh.indices.length; i += 3) {
    const [a, b, c] = mesh.indices.subarray(i, i + 3) as unknown as [number, number, number];
    if (random() >= share) {
      indices.push(a, b, c);
      continue;
    }
    const middle = positions.length / 3;
    for (let axis = 0; axis < 3; axis++)
      positions.push((mesh.positions[3 * a + axis]! + mesh.positions[3 * b + axis]!) / 2);
    indices.push(a, middle, c, middle, b, c);
  }
  return { positions: Float64Array.from(positions), indices: Uint32Array.from(indices) };
}

/** With fins: a triangle and its back on some of the edges, sticking out of the surface. */
export function addFins(
  mesh: TriangleMesh,
  count: number,
  height: number,
  random: () => number,
): TriangleMesh {
  const positions = [...mesh.positions];
  const indices = [...mesh.indices];
  for (let i = 0; i < count; i++) {
    const side = 3 * randomInteger(random, mesh.indices.length / 3);
    const [a, b] = [mesh.indices[side]!, mesh.indices[side + 1]!];
    const tip = positions.length / 3;
    const direction = randomDirection(random);
    for (let axis = 0; axis < 3; axis++)
      positions.push(mesh.positions[3 * a + axis]! + height * direction[axis]!);
    indices.push(a, b, tip, b, a, tip);
  }
  return { positions: Float64Array.from(positions), indices: Uint32Array.from(indices) };
}

/** Puts a vertex on the middle of some sides and a triangle without area there: closed, but with slivers. */
export function addSlivers(mesh: TriangleMesh, share: number, random: () => number): TriangleMesh {
  const split = makeTJunctions(mesh, share, random);
  const added: number[] = [];
  for (let vertex = mesh.positions.length / 3; vertex < split.positions.length / 3; vertex++) {
    const at = split.indices.indexOf(vertex);
    // The two halves come one after the other: (a, m, c), (m, b, c).
    added.push(split.indices[at - 1]!, split.indices[at + 3]!, vertex);
  }
  return {
    positions: split.positions,
    indices: Uint32Array.from([...split.indices, ...added]),
  };
}
