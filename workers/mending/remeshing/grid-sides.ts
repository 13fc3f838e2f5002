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

const reportEvery = 1 << 11;

/**
 * Finds all cells whose corners differ in side: from every edge that a triangle crosses, then on through
 * the faces whose corners differ, so that the surface is followed across holes where no triangle is. Asks
 * for no node far from the surface. One bit a node.
 */
export function findSurfaceCells(
  grid: SampleGrid,
  { edges }: GridCrossings,
  isInside: (node: number) => boolean,
  context: JobContext,
): SurfaceCells {
  const { nodes, step } = grid;
  const seen = new Uint8Array(Math.ceil((nodes[0] * nodes[1] * nodes[2]) / 8));
  const cells = new CellList();
  const see = (node: number): void => {
    const bit = 1 << (node & 7);
    if ((seen[node >>> 3] & bit) !== 0) return;
    seen[node >>> 3] |= bit;
    cells.push(node);
  };
  const corner = Array.from(
    { length: 8 },
    (_, c) => (c & 1) * step[0] + ((c >> 1) & 1) * step[1] + (c >> 2) * step[2],
  );
  const follow = (at: number): void => {
    if ((at & (reportEvery - 1)) === 0) context.progress('Telling inside from outside', share);
    const node = cells.node[at];
    let inside = 0;
    for (let c = 0; c < 8; c++) if (isInside(node + corner[c])) inside |= 1 << c;
    cells.inside[at] = inside;
    for (let axis = 0; axis < 3; axis++) {
      const near = inside & lowFace[axis];
      if (near !== 0 && near !== lowFace[axis]) see(node - step[axis]);
      const far = (inside >> (1 << axis)) & lowFace[axis];
      if (far !== 0 && far !== lowFace[axis]) see(node + step[axis]);
    }
  };
  let share = 0;
  let done = 0;
  for (let edge = 0; edge < edges.count; edge++) {
    share = edge / edges.count;
    if ((edge & (reportEvery - 1)) === 0) context.progress('Telling inside from outside', share);
    const key = edges.keys[edge];
    const node = Math.floor(key / 3);
    const axis = key - 3 * node;
    if (isInside(node) === isInside(node + step[axis])) continue;
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
