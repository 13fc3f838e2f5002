import { type ColumnCrossings } from './column-crossings.js';

/** Heights that belong to one level face differ by no more than this, mm. */
const SAME_LEVEL_MM = 0.02;

/** What is held up in the columns of a grid, and what is solid beside it. */
export class HeldList {
  private readonly column: number[] = [];
  private readonly from: number[] = [];
  private readonly to: number[] = [];
  private readonly isLevel: boolean[] = [];
  private readonly dropped = new Set<number>();
  /** Solid stretches (from, to) by column; kept only where bridges are asked for. */
  private readonly solidHeads: Int32Array;
  private readonly solids: number[] = [];

  /** @param columns of the grid; 0 when nobody will ask for bridges */
  constructor(columns: number) {
    this.solidHeads = new Int32Array(columns).fill(-1);
  }

  add(column: number, from: number, to: number, isLevel: boolean): void {
    this.column.push(column);
    this.from.push(from);
    this.to.push(to);
    this.isLevel.push(isLevel);
  }

  addSolid(column: number, from: number, to: number): void {
    if (this.solidHeads.length === 0) return;
    this.solids.push(from, to, this.solidHeads[column]);
    this.solidHeads[column] = this.solids.length - 3;
  }

  /** Leaves out level stretches, along x or y, that end in walls no farther apart than the limit. */
  dropBridges(grid: ColumnCrossings, limitMm: number): void {
    const levels = new Map<number, number[]>();
    for (const [k, isLevel] of this.isLevel.entries())
      if (isLevel) {
        const list = levels.get(this.column[k]);
        if (list) list.push(k);
        else levels.set(this.column[k], [k]);
      }
    const most = Math.round(limitMm / grid.pitch);
    for (const [column, list] of levels)
      for (const k of list) {
        const height = this.to[k];
        const reach = (step: number, isInGrid: (column: number) => boolean): number => {
          for (let n = 1; n <= most; n++) {
            const next = column + n * step;
            if (!isInGrid(next)) return Infinity;
            if (this.hasWall(next, height)) return n;
            if (!levels.get(next)?.some((l) => Math.abs(this.to[l] - height) < SAME_LEVEL_MM))
              return Infinity;
          }
          return Infinity;
        };
        const row = Math.floor(column / grid.across);
        const inRow = (next: number) => next >= 0 && Math.floor(next / grid.across) === row;
        const inColumn = (next: number) => next >= 0 && next < grid.across * grid.along;
        const alongX = reach(-1, inRow) + reach(1, inRow) - 1;
        const alongY =
          alongX <= most
            ? alongX
            : reach(-grid.across, inColumn) + reach(grid.across, inColumn) - 1;
        if (Math.min(alongX, alongY) <= most) this.dropped.add(k);
      }
  }

  /** Whether a column is solid from below a height to above it. */
  private hasWall(column: number, height: number): boolean {
    for (let at = this.solidHeads[column]; at >= 0; at = this.solids[at + 2])
      if (this.solids[at] < height - SAME_LEVEL_MM && this.solids[at + 1] > height - SAME_LEVEL_MM)
        return true;
    return false;
  }

  figures(grid: ColumnCrossings) {
    const kept = this.column.length - this.dropped.size;
    const columns = new Float64Array(4 * kept);
    let filled = 0;
    let gaps = 0;
    for (let k = 0; k < this.column.length; k++) {
      if (this.dropped.has(k)) continue;
      const column = this.column[k];
      gaps += this.to[k] - this.from[k];
      columns[filled++] = grid.x0 + (column % grid.across) * grid.pitch;
      columns[filled++] = grid.y0 + Math.floor(column / grid.across) * grid.pitch;
      columns[filled++] = this.from[k];
      columns[filled++] = this.to[k];
    }
    const cell = grid.pitch * grid.pitch;
    return {
      columns,
      pitchMm: grid.pitch,
      volumeMm3: gaps * cell,
      areaMm2: kept * cell,
    };
  }
}
