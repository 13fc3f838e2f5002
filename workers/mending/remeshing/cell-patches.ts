/**
 * How the surface runs through a cell whose corners lie inside or outside. Corner c has x in bit 0, y in
 * bit 1, z in bit 2. Edge 4·axis + k runs along the axis from the corner that `edgeStart` names.
 */
export interface CellPatches {
  /** For each of the 256 patterns of corners inside (bit c for corner c): edges, three a triangle. */
  readonly triangles: readonly Uint8Array[];
  /** Lower corner of each of the 12 edges. */
  readonly edgeStart: Uint8Array;
}

const axes = [0, 1, 2] as const;

/**
 * Makes the table of marching cubes (W. Lorensen and H. Cline, SIGGRAPH 1987) such that the surface is
 * always a closed manifold: on a face with two opposite corners inside these are always kept apart, from
 * both of its cells alike, and no triangle has a side in a face that its cell's outline does not have
 * there, so that no edge is made twice.
 */
export function makeCellPatches(): CellPatches {
  const edgeStart = Uint8Array.from(
    axes.flatMap((axis) => [0, 1, 2, 3, 4, 5, 6, 7].filter((corner) => !(corner & (1 << axis)))),
  );
  const triangles = Array.from({ length: 256 }, (_, inside) =>
    Uint8Array.from(outlines(inside, edgeStart).flatMap((loop) => triangulate(loop, edgeStart))),
  );
  return { triangles, edgeStart };
}

/** Number of the edge between two corners that differ in one axis. */
function edgeBetween(one: number, other: number, edgeStart: Uint8Array): number {
  const axis = Math.log2(one ^ other);
  const start = Math.min(one, other);
  return edgeStart.findIndex((corner, edge) => edge >> 2 === axis && corner === start);
}

/** Corners of a face in turn, counter-clockwise seen from outside the cell. */
function faceCorners(axis: number, side: number): number[] {
  const [b, c] = [1 << ((axis + 1) % 3), 1 << ((axis + 2) % 3)];
  const corners = [0, b, b | c, c].map((corner) => corner | (side << axis));
  return side === 1 ? corners : corners.reverse();
}

/** Closed loops of cut edges, counter-clockwise seen from outside the solid. */
function outlines(inside: number, edgeStart: Uint8Array): number[][] {
  const isInside = (corner: number) => ((inside >> corner) & 1) === 1;
  const next = new Map<number, number>();
  for (const axis of axes)
    for (const side of [0, 1]) {
      const corners = faceCorners(axis, side);
      for (let i = 0; i < 4; i++) {
        if (isInside(corners[i]) || !isInside(corners[(i + 1) % 4])) continue;
        let last = i + 1;
        while (isInside(corners[(last + 1) % 4])) last++;
        const entry = edgeBetween(corners[i], corners[(i + 1) % 4], edgeStart);
        next.set(entry, edgeBetween(corners[last % 4], corners[(last + 1) % 4], edgeStart));
      }
    }
  const loops: number[][] = [];
  while (next.size > 0) {
    const loop: number[] = [];
    let edge = [...next.keys()][0];
    for (let to = next.get(edge); to !== undefined; to = next.get(edge)) {
      loop.push(edge);
      next.delete(edge);
      edge = to;
    }
    loops.push(loop);
  }
  return loops;
}

/** The triangulation of least area, with cuts in the middles of the edges, without sides within faces. */
function triangulate(loop: readonly number[], edgeStart: Uint8Array): number[] {
  const points = loop.map((edge) => middleOf(edge, edgeStart));
  const count = loop.length;
  const solve = (i: number, j: number): { area: number; triangles: number[] } => {
    if (j - i < 2) return { area: 0, triangles: [] };
    let best = { area: Infinity, triangles: [] as number[] };
    for (let m = i + 1; m < j; m++) {
      if (!mayJoin(points, i, m, count) || !mayJoin(points, m, j, count)) continue;
      const [left, right] = [solve(i, m), solve(m, j)];
      const area = left.area + right.area + areaOf(points[i], points[m], points[j]);
      // Equal areas are told apart by order only when they really differ.
      if (area > best.area - 1e-9) continue;
      best = {
        area,
        triangles: [loop[i], loop[m], loop[j], ...left.triangles, ...right.triangles],
      };
    }
    return best;
  };
  const { area, triangles } = solve(0, count - 1);
  if (!(area < Infinity)) throw new Error('A cell of the grid has no patch.');
  return triangles;
}

function middleOf(edge: number, edgeStart: Uint8Array): number[] {
  return axes.map((axis) => (edge >> 2 === axis ? 0.5 : (edgeStart[edge] >> axis) & 1));
}

/** Neighbours in the loop, or cuts that no face holds both of. */
function mayJoin(points: readonly number[][], i: number, j: number, count: number): boolean {
  if (j - i === 1 || j - i === count - 1) return true;
  return axes.every((axis) => points[i][axis] !== points[j][axis] || points[i][axis] === 0.5);
}

function areaOf(a: readonly number[], b: readonly number[], c: readonly number[]): number {
  const [ux, uy, uz] = axes.map((axis) => b[axis] - a[axis]);
  const [vx, vy, vz] = axes.map((axis) => c[axis] - a[axis]);
  return Math.hypot(uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx) / 2;
}
