/**
 * Points in cubic cells, to find those near a place. Cells are hashed, so the grid may be as fine as
 * it likes. Holds numbers of points, not points.
 */
export class PointGrid {
  private readonly cells = new Map<number, number[]>();

  constructor(
    private readonly positions: Float64Array,
    private readonly cell: number,
  ) {}

  add(point: number): void {
    const key = this.keyAt(
      this.cellOf(this.positions[3 * point]),
      this.cellOf(this.positions[3 * point + 1]),
      this.cellOf(this.positions[3 * point + 2]),
    );
    const found = this.cells.get(key);
    if (found) found.push(point);
    else this.cells.set(key, [point]);
  }

  /** Calls `visit` for each point in the cells around a place: all within one cell, and some farther. */
  around(x: number, y: number, z: number, visit: (point: number) => void): void {
    const [cx, cy, cz] = [this.cellOf(x), this.cellOf(y), this.cellOf(z)];
    for (let i = cx - 1; i <= cx + 1; i++)
      for (let j = cy - 1; j <= cy + 1; j++)
        for (let k = cz - 1; k <= cz + 1; k++) this.cells.get(this.keyAt(i, j, k))?.forEach(visit);
  }

  private cellOf(value: number): number {
    return Math.floor(value / this.cell);
  }

  /** Different cells may share a key: then a few points too many are visited. */
  private keyAt(i: number, j: number, k: number): number {
    return (Math.imul(i, 73856093) ^ Math.imul(j, 19349663) ^ Math.imul(k, 83492791)) | 0;
  }
}
