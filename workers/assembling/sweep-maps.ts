import { ColumnCrossings } from '../../shared/geometry/support/column-crossings.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { planeFrame } from '../../shared/geometry/vectors/plane-frame.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';

/** Where a piece begins and ends in each column along one direction, mm. */
interface SweepMap {
  readonly columns: Int32Array;
  readonly lowest: Float64Array;
  readonly highest: Float64Array;
}

/** Pieces that meet in a plane touch; rounding lets them overlap by this, mm. */
const TOUCH_MM = 0.02;

/**
 * Pieces looked at along directions, in columns that all of them share: whether one can be drawn
 * away along a direction past others. Maps are made when first asked for.
 */
export class SweepMaps {
  private readonly grids = new Map<string, ColumnCrossings>();
  private readonly maps = new Map<string, SweepMap>();
  /** Where what stands ends in each column; filled anew for every question. */
  private tops = new Float64Array(0);

  constructor(
    private readonly pieces: ReadonlyMap<string, TriangleMesh>,
    private readonly pitchMm: number,
  ) {}

  /**
   * Whether everything in `moved` can be taken straight away along `direction`, however far,
   * without passing through anything of `standing`.
   */
  isFree(moved: Iterable<string>, standing: Iterable<string>, direction: Vector3): boolean {
    return this.overlapMm(moved, standing, direction) <= TOUCH_MM;
  }

  /** The most by which something standing is in the way, mm; −Infinity when they share no column. */
  overlapMm(moved: Iterable<string>, standing: Iterable<string>, direction: Vector3): number {
    const { across, along } = this.gridFor(direction);
    if (this.tops.length < across * along) this.tops = new Float64Array(across * along);
    const { tops } = this;
    tops.fill(-Infinity);
    for (const name of standing) {
      const { columns, highest } = this.mapOf(name, direction);
      for (let k = 0; k < columns.length; k++)
        if (highest[k] > tops[columns[k]]) tops[columns[k]] = highest[k];
    }
    let most = -Infinity;
    for (const name of moved) {
      const { columns, lowest } = this.mapOf(name, direction);
      for (let k = 0; k < columns.length; k++) {
        const over = tops[columns[k]] - lowest[k];
        if (over > most) most = over;
      }
    }
    return most;
  }

  private mapOf(name: string, direction: Vector3): SweepMap {
    const key = `${name} ${direction.join(' ')}`;
    let map = this.maps.get(key);
    if (!map) {
      map = this.make(this.pieces.get(name)!, direction);
      this.maps.set(key, map);
    }
    return map;
  }

  private make(mesh: TriangleMesh, direction: Vector3): SweepMap {
    const { x, y, z } = project(mesh.positions, direction);
    const grid = this.gridFor(direction).emptied();
    grid.addSurface(mesh.indices, x, y, z, 2);
    const columns: number[] = [];
    const lowest: number[] = [];
    const highest: number[] = [];
    grid.visit(({ count, heights }, column) => {
      columns.push(column);
      lowest.push(heights[0]);
      highest.push(heights[count - 1]);
    });
    return {
      columns: Int32Array.from(columns),
      lowest: Float64Array.from(lowest),
      highest: Float64Array.from(highest),
    };
  }

  private gridFor(direction: Vector3): ColumnCrossings {
    const key = direction.join(' ');
    let grid = this.grids.get(key);
    if (!grid) {
      const xs: number[] = [];
      const ys: number[] = [];
      for (const mesh of this.pieces.values()) {
        const { x, y } = project(mesh.positions, direction);
        for (const [values, into] of [
          [x, xs],
          [y, ys],
        ] as const)
          into.push(...extremes(values));
      }
      grid = ColumnCrossings.over(Float64Array.from(xs), Float64Array.from(ys), this.pitchMm);
      this.grids.set(key, grid);
    }
    return grid;
  }
}

function extremes(values: Float64Array): [number, number] {
  let [low, high] = [Infinity, -Infinity];
  for (let k = 0; k < values.length; k++) {
    if (values[k] < low) low = values[k];
    if (values[k] > high) high = values[k];
  }
  return [low, high];
}

function project(positions: Float64Array, direction: Vector3) {
  const { u, v } = planeFrame(direction);
  const count = positions.length / 3;
  const x = new Float64Array(count);
  const y = new Float64Array(count);
  const z = new Float64Array(count);
  for (let k = 0, at = 0; k < count; k++, at += 3) {
    const [px, py, pz] = [positions[at], positions[at + 1], positions[at + 2]];
    x[k] = u[0] * px + u[1] * py + u[2] * pz;
    y[k] = v[0] * px + v[1] * py + v[2] * pz;
    z[k] = direction[0] * px + direction[1] * py + direction[2] * pz;
  }
  return { x, y, z };
}
