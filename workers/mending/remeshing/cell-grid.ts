import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { IntegerTable } from './integer-table.js';

/** Triangles are parted until none spans more cells than this a side: their boxes then hug them. */
const widestSpan = 2;

/** A regular grid of cubes over a mesh, with a margin of two cells, of which few are kept. */
export class CellGrid {
  /** Side of a cube. */
  readonly step: number;
  readonly origin: readonly [number, number, number];
  /** Cubes along x, y, z. */
  readonly counts: readonly [number, number, number];
  /** Kept cubes by their number; the value is their place in `cells`. */
  private readonly places: IntegerTable;
  /** Numbers of the kept cubes in the order in which they came. */
  readonly cells: number[] = [];
  /** For each kept cube its first entry in `triangles` and the next ones, linked; -1 ends. */
  private readonly first: number[] = [];
  private readonly triangleOf: number[] = [];
  private readonly nextOf: number[] = [];

  constructor(
    private readonly mesh: TriangleMesh,
    cellsAlongLongest: number,
  ) {
    const { min, size } = boundingBox(mesh.positions);
    this.step = Math.max(...size) / cellsAlongLongest;
    // A fraction of a step off, so that faces along the axes do not lie in grid planes.
    const shift = (axis: number) => min[axis] - (2 + [0.137, 0.241, 0.193][axis]) * this.step;
    this.origin = [shift(0), shift(1), shift(2)];
    const count = (axis: number) => Math.ceil(size[axis] / this.step) + 5;
    this.counts = [count(0), count(1), count(2)];
    this.places = new IntegerTable(Math.max(1024, mesh.indices.length));
  }

  /** Number of a cube or node; nodes need one more along each side, so all use the node count. */
  number(i: number, j: number, k: number): number {
    const [nx, ny] = this.counts;
    return (k * (ny + 1) + j) * (nx + 1) + i;
  }

  /** i, j, k of a number, written to the target. */
  locate(number: number, target: Int32Array): void {
    const [nx, ny] = this.counts;
    target[0] = number % (nx + 1);
    const rest = (number - target[0]) / (nx + 1);
    target[1] = rest % (ny + 1);
    target[2] = (rest - target[1]) / (ny + 1);
  }

  isInside(i: number, j: number, k: number): boolean {
    const [nx, ny, nz] = this.counts;
    return i >= 0 && j >= 0 && k >= 0 && i < nx && j < ny && k < nz;
  }

  /** Keeps a cube; returns its place. */
  keep(number: number): number {
    const known = this.places.get(number);
    if (known >= 0) return known;
    const place = this.cells.length;
    this.places.set(number, place);
    this.cells.push(number);
    this.first.push(-1);
    return place;
  }

  isKept(number: number): boolean {
    return this.places.get(number) >= 0;
  }

  /** Calls `visit` with the triangles that touch a kept cube. */
  trianglesAt(place: number, visit: (triangle: number) => void): void {
    for (let entry = this.first[place]; entry >= 0; entry = this.nextOf[entry])
      visit(this.triangleOf[entry]);
  }

  /** Keeps the cubes that a triangle touches, and lists it there. */
  addTriangle(triangle: number): void {
    const { positions, indices } = this.mesh;
    const corners = new Float64Array(9);
    for (let corner = 0; corner < 3; corner++)
      for (let axis = 0; axis < 3; axis++)
        corners[3 * corner + axis] =
          (positions[3 * indices[3 * triangle + corner] + axis] - this.origin[axis]) / this.step;
    this.addPart(triangle, corners);
  }

  private addPart(triangle: number, p: Float64Array): void {
    let longest = 0;
    let side = 0;
    for (let k = 0; k < 3; k++) {
      const a = 3 * k;
      const b = 3 * ((k + 1) % 3);
      const span = Math.max(
        Math.abs(p[a] - p[b]),
        Math.abs(p[a + 1] - p[b + 1]),
        Math.abs(p[a + 2] - p[b + 2]),
      );
      if (span <= longest) continue;
      longest = span;
      side = k;
    }
    if (longest > widestSpan) {
      const a = 3 * side;
      const b = 3 * ((side + 1) % 3);
      const one = p.slice();
      const other = p.slice();
      for (let axis = 0; axis < 3; axis++) {
        const middle = (p[a + axis] + p[b + axis]) / 2;
        one[b + axis] = middle;
        other[a + axis] = middle;
      }
      this.addPart(triangle, one);
      this.addPart(triangle, other);
      return;
    }
    const low = (axis: number) => Math.floor(Math.min(p[axis], p[3 + axis], p[6 + axis]) - 1e-9);
    const high = (axis: number) => Math.floor(Math.max(p[axis], p[3 + axis], p[6 + axis]) + 1e-9);
    const [i1, j1, k1] = [high(0), high(1), high(2)];
    for (let k = low(2); k <= k1; k++)
      for (let j = low(1); j <= j1; j++)
        for (let i = low(0); i <= i1; i++) this.list(this.keep(this.number(i, j, k)), triangle);
  }

  private list(place: number, triangle: number): void {
    const first = this.first[place];
    if (first >= 0 && this.triangleOf[first] === triangle) return;
    this.first[place] = this.triangleOf.length;
    this.triangleOf.push(triangle);
    this.nextOf.push(first);
  }
}
