import type { JobContext } from '../../runtime/job-context.js';
import type { GridCrossings } from './grid-crossings.js';
import type { SampleGrid } from './sample-grid.js';

/** Cells that the surface runs through. */
export interface SurfaceCells {
  readonly count: number;
  /** Lowest node of each cell; longer than used. */
  readonly node: Uint32Array;
  /** Bit c is set when corner c lies inside; longer than used. */
  readonly inside: Uint8Array;
}

const OUTSIDE = 1;
const INSIDE = 2;
const SEEN = 4;
const reportEvery = 1 << 11;

/**
 * Finds all cells whose corners differ in side: from every edge that a triangle crosses, then on through
 * the faces whose corners differ, so that the surface is followed across holes where no triangle is. Asks
 * for the side of a node once, and of no node far from the surface. One byte a node.
 */
export function findSurfaceCells(
  grid: SampleGrid,
  { edges }: GridCrossings,
  isInside: (x: number, y: number, z: number) => boolean,
  context: JobContext,
): SurfaceCells {
  const { nodes, step, origin, spacing } = grid;
  const state = new Uint8Array(nodes[0] * nodes[1] * nodes[2]);
  let asked = 0;
  let share = 0;
  const sideOf = (node: number): number => {
    const known = state[node] & 3;
    if (known !== 0) return known;
    if ((++asked & (reportEvery - 1)) === 0) context.progress('Telling inside from outside', share);
    const z = Math.floor(node / step[2]);
    const y = Math.floor((node - z * step[2]) / step[1]);
    const x = node - z * step[2] - y * step[1];
    const isRim =
      x === 0 ||
      y === 0 ||
      z === 0 ||
      x === nodes[0] - 1 ||
      y === nodes[1] - 1 ||
      z === nodes[2] - 1;
    const side =
      !isRim && isInside(origin[0] + x * spacing, origin[1] + y * spacing, origin[2] + z * spacing)
        ? INSIDE
        : OUTSIDE;
    state[node] |= side;
    return side;
  };
  const cells = new CellList();
  const see = (node: number): void => {
    if ((state[node] & SEEN) !== 0) return;
    state[node] |= SEEN;
    cells.push(node);
  };
  const corner = Array.from(
    { length: 8 },
    (_, c) => (c & 1) * step[0] + ((c >> 1) & 1) * step[1] + (c >> 2) * step[2],
  );
  const follow = (at: number): void => {
    const node = cells.node[at];
    let inside = 0;
    for (let c = 0; c < 8; c++) if (sideOf(node + corner[c]) === INSIDE) inside |= 1 << c;
    cells.inside[at] = inside;
    for (let axis = 0; axis < 3; axis++) {
      const near = inside & lowFace[axis];
      if (near !== 0 && near !== lowFace[axis]) see(node - step[axis]);
      const far = (inside >> (1 << axis)) & lowFace[axis];
      if (far !== 0 && far !== lowFace[axis]) see(node + step[axis]);
    }
  };
  let done = 0;
  for (let edge = 0; edge < edges.count; edge++) {
    share = edge / edges.count;
    const key = edges.keys[edge];
    const node = Math.floor(key / 3);
    const axis = key - 3 * node;
    if (sideOf(node) === sideOf(node + step[axis])) continue;
    const [u, v] = [step[(axis + 1) % 3], step[(axis + 2) % 3]];
    see(node);
    see(node - u);
    see(node - v);
    see(node - u - v);
    for (; done < cells.count; done++) follow(done);
  }
  return cells;
}

/** Corners of the face at the lower end of each axis. */
const lowFace = [0b01010101, 0b00110011, 0b00001111];

class CellList {
  node = new Uint32Array(1 << 12);
  inside = new Uint8Array(1 << 12);
  count = 0;

  push(node: number): void {
    if (this.count === this.node.length) {
      const nodes = new Uint32Array(2 * this.count);
      nodes.set(this.node);
      this.node = nodes;
      const inside = new Uint8Array(2 * this.count);
      inside.set(this.inside);
      this.inside = inside;
    }
    this.node[this.count++] = node;
  }
}
