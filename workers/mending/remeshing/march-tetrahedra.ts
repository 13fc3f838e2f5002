import { growingFloats, growingIndices } from '../../intake/growing-list.js';
import type { CellGrid } from './cell-grid.js';
import { IntegerTable } from './integer-table.js';

/** Corners of a cube: bit 0 is x, bit 1 y, bit 2 z. Six tetrahedra round the diagonal from 0 to 7
 *  (H. Kuhn's triangulation of the cube): the faces of neighbouring cubes are parted alike. */
const tetrahedra = [
  [0, 1, 3, 7],
  [0, 3, 2, 7],
  [0, 2, 6, 7],
  [0, 6, 4, 7],
  [0, 4, 5, 7],
  [0, 5, 1, 7],
] as const;

/** Where the surface crosses the edge from the inner to the outer node, as a share of the edge. */
export type FindCrossing = (inner: Node, outer: Node, place: number) => number;

export interface Node {
  readonly x: number;
  readonly y: number;
  readonly z: number;
}

/** A crossing keeps this share of an edge from its ends, so that no two vertices fall together. */
const nearestShare = 0.02;

/**
 * Draws the surface between inner and outer nodes of the kept cubes by marching tetrahedra (A. Doi,
 * A. Koide, IEICE Trans. E74(1), 1991): closed and manifold by construction wherever every cube with
 * nodes of both kinds is kept. Triangles face from inside to outside.
 * @param isInner of a node by its number
 */
export function marchTetrahedra(
  grid: CellGrid,
  isInner: (node: number) => boolean,
  crossingAt: FindCrossing,
  onProgress: (fraction: number) => void,
): { positions: Float64Array; indices: Uint32Array } {
  const positions = growingFloats();
  const indices = growingIndices();
  const vertices = new IntegerTable(4 * grid.cells.length);
  const at = new Int32Array(3);
  const inner = new Uint8Array(8);
  const numbers = new Float64Array(8);
  const pointOf = (corner: number): Node => ({
    x: grid.origin[0] + grid.step * (at[0] + (corner & 1)),
    y: grid.origin[1] + grid.step * (at[1] + ((corner >> 1) & 1)),
    z: grid.origin[2] + grid.step * (at[2] + (corner >> 2)),
  });
  const vertexOn = (a: number, b: number, place: number): number => {
    // An edge is known by its lower node and the direction, one of seven, to the upper one.
    const [low, high] = a < b ? [a, b] : [b, a];
    const key = numbers[low] * 8 + (high ^ low);
    const known = vertices.get(key);
    if (known >= 0) return known;
    const vertex = positions.length / 3;
    vertices.set(key, vertex);
    const [from, to] = inner[a] === 1 ? [a, b] : [b, a];
    const [p, q] = [pointOf(from), pointOf(to)];
    const share = Math.min(1 - nearestShare, Math.max(nearestShare, crossingAt(p, q, place)));
    positions.push(p.x + share * (q.x - p.x));
    positions.push(p.y + share * (q.y - p.y));
    positions.push(p.z + share * (q.z - p.z));
    return vertex;
  };
  const push = (a: number, b: number, c: number) => {
    indices.push(a);
    indices.push(b);
    indices.push(c);
  };
  for (let place = 0; place < grid.cells.length; place++) {
    if ((place & 8191) === 0) onProgress(place / grid.cells.length);
    grid.locate(grid.cells[place], at);
    let count = 0;
    for (let corner = 0; corner < 8; corner++) {
      numbers[corner] = grid.number(
        at[0] + (corner & 1),
        at[1] + ((corner >> 1) & 1),
        at[2] + (corner >> 2),
      );
      inner[corner] = isInner(numbers[corner]) ? 1 : 0;
      count += inner[corner];
    }
    if (count === 0 || count === 8) continue;
    for (const [a, b, c, d] of tetrahedra)
      march(a, b, c, d, inner, (one, other) => vertexOn(one, other, place), push);
  }
  return { positions: positions.view().slice(), indices: indices.view().slice() };
}

/** The piece of surface in one tetrahedron; its corners a, b, c, d are right-handed. */
function march(
  a: number,
  b: number,
  c: number,
  d: number,
  inner: Uint8Array,
  on: (one: number, other: number) => number,
  push: (a: number, b: number, c: number) => void,
): void {
  const which = inner[a] | (inner[b] << 1) | (inner[c] << 2) | (inner[d] << 3);
  if (which === 0 || which === 15) return;
  if (which === 1) return push(on(a, b), on(a, c), on(a, d));
  if (which === 14) return push(on(a, b), on(a, d), on(a, c));
  if (which === 2) return push(on(b, a), on(b, d), on(b, c));
  if (which === 13) return push(on(b, a), on(b, c), on(b, d));
  if (which === 4) return push(on(c, a), on(c, b), on(c, d));
  if (which === 11) return push(on(c, a), on(c, d), on(c, b));
  if (which === 8) return push(on(d, a), on(d, c), on(d, b));
  if (which === 7) return push(on(d, a), on(d, b), on(d, c));
  const quad = (p: number, q: number, r: number, s: number) => {
    push(p, q, r);
    push(p, r, s);
  };
  if (which === 3) return quad(on(a, c), on(a, d), on(b, d), on(b, c));
  if (which === 12) return quad(on(a, c), on(b, c), on(b, d), on(a, d));
  if (which === 5) return quad(on(a, b), on(c, b), on(c, d), on(a, d));
  if (which === 10) return quad(on(a, b), on(a, d), on(c, d), on(c, b));
  if (which === 9) return quad(on(a, b), on(a, c), on(d, c), on(d, b));
  return quad(on(a, b), on(d, b), on(d, c), on(a, c));
}
