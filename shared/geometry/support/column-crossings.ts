/** The crossings of one column, from the lowest up. Valid during one visit. */
export interface Crossings {
  readonly count: number;
  readonly heights: Float64Array;
  /**
   * −1 leaves the solid, 1 enters it, 2 enters it through a face that needs support, 3 through one
   * that is level as well.
   */
  readonly steps: Int8Array;
}

/** Faces nearer to level than this (cosine) are level: half a degree. */
const LEVEL_COS = 0.99996;
/** More columns than this are not made: the pitch is made coarser by the caller. */
const MOST_COLUMNS = 1 << 26;

/**
 * Vertical columns over the xy plane and where a closed surface crosses their middles. A crossing
 * belongs to exactly one of the triangles that share an edge, so that every column enters as often
 * as it leaves.
 */
export class ColumnCrossings {
  private readonly heads: Int32Array;
  private heights = new Float64Array(1024);
  private steps = new Int8Array(1024);
  private next = new Int32Array(1024);
  private filled = 0;

  private constructor(
    /** Middle of the first column, mm. */
    readonly x0: number,
    readonly y0: number,
    readonly pitch: number,
    /** Columns along x, and along y. */
    readonly across: number,
    readonly along: number,
  ) {
    this.heads = new Int32Array(across * along).fill(-1);
  }

  /** Columns of a side of `pitchMm` over all points. Throws a RangeError when they are too many. */
  static over(x: Float64Array, y: Float64Array, pitchMm: number): ColumnCrossings {
    const [xLow, xHigh] = range(x);
    const [yLow, yHigh] = range(y);
    // Off the middle by an odd share, so that no middle lies on the edges of a model on a grid.
    const x0 = xLow - 0.4871 * pitchMm;
    const y0 = yLow - 0.4733 * pitchMm;
    const across = Math.max(1, Math.ceil((xHigh - x0) / pitchMm));
    const along = Math.max(1, Math.ceil((yHigh - y0) / pitchMm));
    if (!(across * along <= MOST_COLUMNS)) throw new RangeError('Too many columns.');
    return new ColumnCrossings(x0 + pitchMm / 2, y0 + pitchMm / 2, pitchMm, across, along);
  }

  /** The same columns with nothing in them. */
  emptied(): ColumnCrossings {
    return new ColumnCrossings(this.x0, this.y0, this.pitch, this.across, this.along);
  }

  /** @param leanSin sine of the lean from the vertical beyond which a face needs support */
  addSurface(
    indices: Uint32Array,
    x: Float64Array,
    y: Float64Array,
    z: Float64Array,
    leanSin: number,
  ): void {
    for (let t = 0; t < indices.length; t += 3) {
      const a = indices[t];
      const b = indices[t + 1];
      const c = indices[t + 2];
      if (!this.hasMiddle(x[a], x[b], x[c], this.x0) || !this.hasMiddle(y[a], y[b], y[c], this.y0))
        continue;
      const ux = x[b] - x[a];
      const uy = y[b] - y[a];
      const uz = z[b] - z[a];
      const vx = x[c] - x[a];
      const vy = y[c] - y[a];
      const vz = z[c] - z[a];
      const nz = ux * vy - uy * vx;
      if (nz === 0) continue;
      let step = -1;
      if (nz < 0) {
        const nx = uy * vz - uz * vy;
        const ny = uz * vx - ux * vz;
        const size = Math.sqrt(nx * nx + ny * ny + nz * nz);
        step = -nz <= leanSin * size ? 1 : -nz > LEVEL_COS * size ? 3 : 2;
      }
      const slopeX = (uz * vy - vz * uy) / nz;
      const slopeY = (vz * ux - uz * vx) / nz;
      this.addTriangle(a, b, c, x, y, z[a], slopeX, slopeY, step);
    }
  }

  /** Whether the middle of any column lies between three coordinates. */
  private hasMiddle(a: number, b: number, c: number, first: number): boolean {
    const low = a < b ? (a < c ? a : c) : b < c ? b : c;
    const high = a > b ? (a > c ? a : c) : b > c ? b : c;
    return Math.ceil((low - first) / this.pitch) <= Math.floor((high - first) / this.pitch);
  }

  private addTriangle(
    a: number,
    b: number,
    c: number,
    x: Float64Array,
    y: Float64Array,
    height: number,
    slopeX: number,
    slopeY: number,
    step: number,
  ): void {
    const { x0, y0, pitch } = this;
    const low = Math.min(y[a], y[b], y[c]);
    const high = Math.max(y[a], y[b], y[c]);
    const first = Math.max(0, Math.ceil((low - y0) / pitch));
    const last = Math.min(this.along - 1, Math.floor((high - y0) / pitch));
    for (let row = first; row <= last; row++) {
      const at = y0 + row * pitch;
      let from = Infinity;
      let to = -Infinity;
      for (let side = 0; side < 3; side++) {
        const p = side === 0 ? a : side === 1 ? b : c;
        const q = side === 0 ? b : side === 1 ? c : a;
        if (y[p] <= at === y[q] <= at) continue;
        // From the lower end, so that both triangles of an edge compute the same number.
        const l = y[p] < y[q] ? p : q;
        const h = l === p ? q : p;
        const cut = x[l] + ((at - y[l]) / (y[h] - y[l])) * (x[h] - x[l]);
        if (cut < from) from = cut;
        if (cut > to) to = cut;
      }
      if (!(from < to)) continue;
      const left = Math.max(0, Math.ceil((from - x0) / pitch));
      const right = Math.min(this.across, Math.ceil((to - x0) / pitch));
      const start = height + (at - y[a]) * slopeY - x[a] * slopeX;
      for (let column = left; column < right; column++)
        this.push(row * this.across + column, start + (x0 + column * pitch) * slopeX, step);
    }
  }

  private push(column: number, height: number, step: number): void {
    const at = this.filled++;
    if (at === this.heights.length) this.grow();
    this.heights[at] = height;
    this.steps[at] = step;
    this.next[at] = this.heads[column];
    this.heads[column] = at;
  }

  private grow(): void {
    const double = <A extends Float64Array | Int8Array | Int32Array>(from: A, to: A): A => {
      to.set(from as never);
      return to;
    };
    const size = 2 * this.heights.length;
    this.heights = double(this.heights, new Float64Array(size));
    this.steps = double(this.steps, new Int8Array(size));
    this.next = double(this.next, new Int32Array(size));
  }

  /**
   * Every column that the surface crosses, numbered along x, then y; entering comes before leaving
   * at one height.
   */
  visit(see: (crossings: Crossings, column: number) => void): void {
    let heights = new Float64Array(32);
    let steps = new Int8Array(32);
    // One object for all visits: there are tens of thousands.
    const crossings = { count: 0, heights, steps };
    for (let column = 0; column < this.heads.length; column++) {
      let count = 0;
      for (let at = this.heads[column]; at >= 0; at = this.next[at]) {
        if (count === heights.length) {
          const [more, moreSteps] = [new Float64Array(2 * count), new Int8Array(2 * count)];
          more.set(heights);
          moreSteps.set(steps);
          [heights, steps] = [more, moreSteps];
        }
        const height = this.heights[at];
        const step = this.steps[at];
        let to = count++;
        while (
          to > 0 &&
          (heights[to - 1] > height ||
            (heights[to - 1] === height && steps[to - 1] < 0 && step > 0))
        ) {
          heights[to] = heights[to - 1];
          steps[to] = steps[to - 1];
          to--;
        }
        heights[to] = height;
        steps[to] = step;
      }
      if (count === 0) continue;
      crossings.count = count;
      crossings.heights = heights;
      crossings.steps = steps;
      see(crossings, column);
    }
  }
}

function range(values: Float64Array): [number, number] {
  let low = Infinity;
  let high = -Infinity;
  for (let k = 0; k < values.length; k++) {
    if (values[k] < low) low = values[k];
    if (values[k] > high) high = values[k];
  }
  return [low, high];
}
