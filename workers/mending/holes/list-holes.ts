import { matesOf, nextSide, OPEN } from '../../../shared/geometry/mesh/edge-mates.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import type { Hole } from '../mending.js';
import { rimPlane } from './rim-plane.js';

/**
 * The rims of open edges of a mesh whose triangles agree on the outside, each a simple loop: where
 * several rims meet in a vertex they are parted there. The longest first, numbered from 1.
 * @param tolerance largest distance from its plane of a rim that is flat
 */
export function listHoles(mesh: TriangleMesh, tolerance: number): Hole[] {
  return simpleLoops(mesh)
    .map((vertices) => describe(mesh, vertices, tolerance))
    .sort((a, b) => b.perimeter - a.perimeter || a.vertices[0] - b.vertices[0])
    .map((hole, i) => ({ ...hole, id: i + 1 }));
}

/** Loops of open sides as vertex lists. Sides that lead to no loop, which only a surface that
 *  contradicts itself has, are left out. */
function simpleLoops(mesh: TriangleMesh): number[][] {
  const { indices } = mesh;
  const { mates } = matesOf(mesh);
  const leaving = new Map<number, number[]>();
  for (let side = mates.length - 1; side >= 0; side--) {
    if (mates[side] !== OPEN) continue;
    const sides = leaving.get(indices[side]);
    if (sides) sides.push(side);
    else leaving.set(indices[side], [side]);
  }
  const loops: number[][] = [];
  for (let first = 0; first < mates.length; first++) {
    if (mates[first] !== OPEN) continue;
    const path: number[] = [];
    const placeOf = new Map<number, number>();
    let vertex = indices[first];
    for (;;) {
      const before = placeOf.get(vertex);
      if (before !== undefined) {
        // Back at a vertex of the path: the way since then is a loop of its own.
        const loop = path.splice(before);
        for (const one of loop) placeOf.delete(one);
        loops.push(loop);
      }
      const side = leaving.get(vertex)?.pop();
      if (side === undefined) break;
      placeOf.set(vertex, path.length);
      path.push(vertex);
      vertex = indices[nextSide(side)];
    }
  }
  return loops;
}

function describe({ positions }: TriangleMesh, loop: readonly number[], tolerance: number): Hole {
  const vertices = Uint32Array.from(loop);
  const rim = new Float64Array(3 * loop.length);
  const centre: [number, number, number] = [0, 0, 0];
  loop.forEach((vertex, i) => {
    for (let axis = 0; axis < 3; axis++) {
      rim[3 * i + axis] = positions[3 * vertex + axis];
      centre[axis] += positions[3 * vertex + axis] / loop.length;
    }
  });
  let perimeter = 0;
  let reach = 0;
  for (let i = 0; i < rim.length; i += 3) {
    const j = (i + 3) % rim.length;
    perimeter += Math.hypot(rim[j] - rim[i], rim[j + 1] - rim[i + 1], rim[j + 2] - rim[i + 2]);
    reach = Math.max(
      reach,
      Math.hypot(rim[i] - centre[0], rim[i + 1] - centre[1], rim[i + 2] - centre[2]),
    );
  }
  const isFlat = rimPlane(rim, tolerance) !== null;
  return {
    id: 0,
    perimeter,
    edges: loop.length,
    centre,
    reach,
    isFlat,
    isFilled: false,
    rim,
    vertices,
  };
}
