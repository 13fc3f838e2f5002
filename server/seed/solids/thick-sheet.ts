import type { Solid } from './binary-stl.js';

export type Point = readonly [x: number, y: number, z: number];

/** A sheet with two faces over a grid of cells that closes round in its columns. */
export interface ThickSheet {
  /** Cells along the sheet. */
  readonly rows: number;
  /** Cells round the sheet; the last column's neighbour is the first. */
  readonly columns: number;
  /**
   * The face that looks outward: seen from outside, columns run counter-clockwise round the
   * direction in which rows grow.
   */
  readonly outer: (row: number, column: number) => Point;
  /** The face that looks inward, at the same grid points. */
  readonly inner: (row: number, column: number) => Point;
  /** Whether a cell is left out. Openings must be blocks that do not touch at corners. */
  readonly isOpen?: (row: number, column: number) => boolean;
}

/**
 * One closed surface: both faces of every cell, and a wall wherever a cell has no neighbour. With
 * openings that meet nowhere it is a manifold.
 */
export function thickSheetSolid(sheet: ThickSheet): Solid {
  const { rows, columns, isOpen = () => false } = sheet;
  const positions: number[] = [];
  const indices: number[] = [];
  for (const face of [sheet.outer, sheet.inner])
    for (let row = 0; row <= rows; row++)
      for (let column = 0; column < columns; column++) positions.push(...face(row, column));

  const outer = (row: number, column: number) => row * columns + (column % columns);
  const inner = (row: number, column: number) => (rows + 1) * columns + outer(row, column);
  const isSolid = (row: number, column: number) =>
    row >= 0 && row < rows && !isOpen(row, (column + columns) % columns);
  const quad = (a: number, b: number, c: number, d: number) => indices.push(a, b, c, a, c, d);

  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      if (!isSolid(row, column)) continue;
      const [nextRow, nextColumn] = [row + 1, column + 1];
      const corners = [
        [row, column],
        [row, nextColumn],
        [nextRow, nextColumn],
        [nextRow, column],
      ] as const;
      const [o0, o1, o2, o3] = corners.map(([r, c]) => outer(r, c)) as Four;
      const [i0, i1, i2, i3] = corners.map(([r, c]) => inner(r, c)) as Four;
      quad(o0, o1, o2, o3);
      quad(i0, i3, i2, i1);
      if (!isSolid(row - 1, column)) quad(o1, o0, i0, i1);
      if (!isSolid(nextRow, column)) quad(o3, o2, i2, i3);
      if (!isSolid(row, column - 1)) quad(o0, o3, i3, i0);
      if (!isSolid(row, nextColumn)) quad(o2, o1, i1, i2);
    }
  }
  return dropUnused({ positions, indices });
}

type Four = [number, number, number, number];

/** Grid points inside an opening belong to no triangle. */
function dropUnused({ positions, indices }: Solid): Solid {
  const numberOf = new Map<number, number>();
  const kept: number[] = [];
  const renumbered = indices.map((vertex) => {
    let number = numberOf.get(vertex);
    if (number === undefined) {
      number = numberOf.size;
      numberOf.set(vertex, number);
      kept.push(...positions.slice(3 * vertex, 3 * vertex + 3));
    }
    return number;
  });
  return { positions: kept, indices: renumbered };
}
