/** Points this close to a facet count as on it, relative to the size of the point set. */
const ON_FACET = 1e-11;

export interface ConvexHull {
  /** Point numbers of the hull's corners, ascending. */
  readonly corners: Uint32Array;
  /** Point numbers of the triangular facets, counter-clockwise seen from outside. */
  readonly facets: Uint32Array;
}

/**
 * Convex hull of points in space: quickhull (Barber, Dobkin, Huhdanpaa, ACM TOMS 22(4), 1996)
 * without merging of facets. Points within 1e-11 of the set's size of a facet may be left out.
 * @param points flat xyz, mm, length 3 × count; not mutated
 * @returns null when the points are (nearly) in one plane or rounding upset the facets' topology:
 *   then every point has to be taken as a corner. Cost O(n log n) expected.
 */
export function convexHull3d(points: Float64Array): ConvexHull | null {
  return new HullBuilder(points).build();
}

/**
 * Coordinates of the points that decide every extent: the hull's corners, or all points when there
 * is no hull of positive volume. Flat xyz, mm.
 */
export function supportPoints(points: Float64Array): Float64Array {
  return cornerPoints(points, points.length > 12 ? convexHull3d(points) : null);
}

/** Coordinates of a hull's corners; all the points without a hull. Flat xyz. */
export function cornerPoints(points: Float64Array, hull: ConvexHull | null): Float64Array {
  if (!hull) return points;
  const support = new Float64Array(3 * hull.corners.length);
  for (let k = 0; k < hull.corners.length; k++) {
    const from = 3 * hull.corners[k];
    support[3 * k] = points[from];
    support[3 * k + 1] = points[from + 1];
    support[3 * k + 2] = points[from + 2];
  }
  return support;
}

/** Growing arrays of facets; facet f has corners 3f…3f+2 and across its edge k neighbour 3f+k. */
class HullBuilder {
  private readonly corner: number[] = [];
  private readonly neighbour: number[] = [];
  private readonly normal: number[] = [];
  private readonly offset: number[] = [];
  private readonly alive: boolean[] = [];
  /** First point of the facet's list of points outside it, -1 when none. */
  private readonly outside: number[] = [];
  private readonly nextOutside: Int32Array;
  private tolerance = 0;

  constructor(private readonly points: Float64Array) {
    this.nextOutside = new Int32Array(points.length / 3).fill(-1);
  }

  build(): ConvexHull | null {
    if (!this.start()) return null;
    for (let facet = 0; facet < this.alive.length; facet++) {
      while (this.alive[facet] && this.outside[facet] >= 0) {
        if (!this.grow(facet)) return null;
      }
    }
    return this.result();
  }

  /** A tetrahedron of far points; false when there is none of positive volume. */
  private start(): boolean {
    const p = this.points;
    const count = p.length / 3;
    if (count < 4) return false;
    const low = [0, 0, 0];
    const high = [0, 0, 0];
    for (let k = 1; k < count; k++) {
      for (let axis = 0; axis < 3; axis++) {
        if (p[3 * k + axis] < p[3 * low[axis] + axis]) low[axis] = k;
        if (p[3 * k + axis] > p[3 * high[axis] + axis]) high[axis] = k;
      }
    }
    const extent = [0, 1, 2].map((axis) => p[3 * high[axis] + axis] - p[3 * low[axis] + axis]);
    const axis = extent.indexOf(Math.max(...extent));
    const size = extent[axis];
    if (!(size > 0)) return false;
    const magnitude = Math.max(...[...low, ...high].map((k) => Math.abs(p[3 * k + axis])));
    this.tolerance = ON_FACET * size + 4e-16 * magnitude;
    const a = low[axis];
    const b = high[axis];
    const c = this.farthest((k) => this.distanceFromLine(a, b, k));
    if (this.distanceFromLine(a, b, c) <= this.tolerance) return false;
    this.addFacet(a, b, c);
    const d = this.farthest((k) => Math.abs(this.height(0, k)));
    const height = this.height(0, d);
    this.alive.pop();
    this.corner.length = this.neighbour.length = this.normal.length = 0;
    this.offset.length = this.outside.length = 0;
    if (Math.abs(height) <= this.tolerance) return false;
    const [u, v, w] = height > 0 ? [a, c, b] : [a, b, c];
    this.addFacet(u, v, w);
    this.addFacet(u, d, v);
    this.addFacet(v, d, w);
    this.addFacet(w, d, u);
    this.neighbour.splice(0, 12, 1, 2, 3, 3, 2, 0, 1, 3, 0, 2, 1, 0);
    for (let k = 0; k < count; k++) this.assign(k, 0, 4);
    return true;
  }

  private farthest(distance: (k: number) => number): number {
    let best = 0;
    let most = -1;
    for (let k = 0; k < this.points.length / 3; k++) {
      const far = distance(k);
      if (far > most) {
        most = far;
        best = k;
      }
    }
    return best;
  }

  private distanceFromLine(a: number, b: number, k: number): number {
    const p = this.points;
    const ux = p[3 * b] - p[3 * a];
    const uy = p[3 * b + 1] - p[3 * a + 1];
    const uz = p[3 * b + 2] - p[3 * a + 2];
    const x = p[3 * k] - p[3 * a];
    const y = p[3 * k + 1] - p[3 * a + 1];
    const z = p[3 * k + 2] - p[3 * a + 2];
    const cx = uy * z - uz * y;
    const cy = uz * x - ux * z;
    const cz = ux * y - uy * x;
    return Math.sqrt((cx * cx + cy * cy + cz * cz) / (ux * ux + uy * uy + uz * uz));
  }

  private addFacet(a: number, b: number, c: number): number {
    const p = this.points;
    const ux = p[3 * b] - p[3 * a];
    const uy = p[3 * b + 1] - p[3 * a + 1];
    const uz = p[3 * b + 2] - p[3 * a + 2];
    const vx = p[3 * c] - p[3 * a];
    const vy = p[3 * c + 1] - p[3 * a + 1];
    const vz = p[3 * c + 2] - p[3 * a + 2];
    let nx = uy * vz - uz * vy;
    let ny = uz * vx - ux * vz;
    let nz = ux * vy - uy * vx;
    const length = Math.sqrt(nx * nx + ny * ny + nz * nz) || 1;
    nx /= length;
    ny /= length;
    nz /= length;
    this.corner.push(a, b, c);
    this.neighbour.push(-1, -1, -1);
    this.normal.push(nx, ny, nz);
    this.offset.push(nx * p[3 * a] + ny * p[3 * a + 1] + nz * p[3 * a + 2]);
    this.outside.push(-1);
    return this.alive.push(true) - 1;
  }

  private height(facet: number, k: number): number {
    const p = this.points;
    const n = this.normal;
    return (
      n[3 * facet] * p[3 * k] +
      n[3 * facet + 1] * p[3 * k + 1] +
      n[3 * facet + 2] * p[3 * k + 2] -
      this.offset[facet]
    );
  }

  /** Puts a point on the list of the first facet in [from, to) that it is outside of. */
  private assign(k: number, from: number, to: number): void {
    for (let facet = from; facet < to; facet++) {
      if (this.height(facet, k) > this.tolerance) {
        this.nextOutside[k] = this.outside[facet];
        this.outside[facet] = k;
        return;
      }
    }
  }

  /** Replaces all facets that the farthest point outside `facet` sees; false on broken topology. */
  private grow(facet: number): boolean {
    let apex = -1;
    let most = -Infinity;
    for (let k = this.outside[facet]; k >= 0; k = this.nextOutside[k]) {
      const height = this.height(facet, k);
      if (height > most) {
        most = height;
        apex = k;
      }
    }
    const visible = [facet];
    this.alive[facet] = false;
    const horizon: number[] = [];
    for (let k = 0; k < visible.length; k++) {
      const f = visible[k];
      for (let edge = 0; edge < 3; edge++) {
        const other = this.neighbour[3 * f + edge];
        if (!this.alive[other]) continue;
        if (this.height(other, apex) > this.tolerance) {
          this.alive[other] = false;
          visible.push(other);
        }
      }
    }
    for (const f of visible) {
      for (let edge = 0; edge < 3; edge++) {
        const other = this.neighbour[3 * f + edge];
        if (this.alive[other])
          horizon.push(this.corner[3 * f + edge], this.corner[3 * f + ((edge + 1) % 3)], other);
      }
    }
    const first = this.alive.length;
    if (!this.fan(apex, horizon)) return false;
    const end = this.alive.length;
    for (const f of visible) {
      for (let k = this.outside[f]; k >= 0;) {
        const next = this.nextOutside[k];
        if (k !== apex) this.assign(k, first, end);
        k = next;
      }
      this.outside[f] = -1;
    }
    return true;
  }

  /** Facets from the apex to every horizon edge (from, to, facet beyond), linked to one another. */
  private fan(apex: number, horizon: readonly number[]): boolean {
    const startingAt = new Map<number, number>();
    for (let k = 0; k < horizon.length; k += 3) {
      const [from, to, beyond] = [horizon[k], horizon[k + 1], horizon[k + 2]];
      const facet = this.addFacet(from, to, apex);
      if (startingAt.has(from)) return false;
      startingAt.set(from, facet);
      this.neighbour[3 * facet] = beyond;
      for (let edge = 0; edge < 3; edge++) {
        const meets =
          this.corner[3 * beyond + edge] === to &&
          this.corner[3 * beyond + ((edge + 1) % 3)] === from;
        if (meets) this.neighbour[3 * beyond + edge] = facet;
      }
    }
    for (const facet of startingAt.values()) {
      const next = startingAt.get(this.corner[3 * facet + 1]);
      if (next === undefined) return false;
      this.neighbour[3 * facet + 1] = next;
      this.neighbour[3 * next + 2] = facet;
    }
    return true;
  }

  private result(): ConvexHull {
    const used = new Uint8Array(this.points.length / 3);
    const facets: number[] = [];
    for (let f = 0; f < this.alive.length; f++) {
      if (!this.alive[f]) continue;
      for (let k = 0; k < 3; k++) {
        used[this.corner[3 * f + k]] = 1;
        facets.push(this.corner[3 * f + k]);
      }
    }
    const corners: number[] = [];
    for (let k = 0; k < used.length; k++) if (used[k]) corners.push(k);
    return { corners: Uint32Array.from(corners), facets: Uint32Array.from(facets) };
  }
}
