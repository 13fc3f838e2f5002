import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type BodyNodes } from './body-nodes.js';
import { type FitFrames } from './fit-frames.js';

/** Cells of the look-up from a height to its place among the offsets. */
const LOOKUP = 512;
/** Faces steeper than 45° below the horizon need support. */
const OVERHANG = Math.SQRT1_2;

/**
 * All that a sweep of one body along one direction knows about its offsets. Offset j is the plane
 * normal·p = offsets[j]; tables have one row, or one number, per offset.
 */
export interface SweepTables {
  readonly normal: Vector3;
  readonly low: number;
  readonly high: number;
  readonly offsets: Float64Array;
  /** Extents of the side below each offset: rows of axisCount. */
  readonly belowLow: Float32Array;
  readonly belowHigh: Float32Array;
  readonly aboveLow: Float32Array;
  readonly aboveHigh: Float32Array;
  /** Area of the section, mm². */
  readonly seamMm2: Float64Array;
  readonly volumeAboveMm3: Float64Array;
  /** Overhanging area of a side that stands on its cut face, mm². */
  readonly overhangAboveMm2: Float64Array;
  readonly overhangBelowMm2: Float64Array;
}

/** Least and greatest projection of flat xyz points on a direction, mm. */
export function rangeAlong(points: Float64Array, [x, y, z]: Vector3): [number, number] {
  let low = Infinity;
  let high = -Infinity;
  for (let k = 0; k < points.length; k += 3) {
    const along = x * points[k] + y * points[k + 1] + z * points[k + 2];
    if (along < low) low = along;
    if (along > high) high = along;
  }
  return [low, high];
}

/**
 * One sweep: a single pass over nodes and triangles fills the tables of every offset. Nodes go
 * into the slot between two offsets, extents run over the slots from both ends. Section area and
 * volume follow from the divergence theorem: the flux of the direction, and of the height above
 * the cut, through the surface above. Cost O(nodes × axes + triangles + offsets × axes).
 */
export function sweepTables(
  mesh: TriangleMesh,
  nodes: BodyNodes,
  fit: FitFrames,
  normal: Vector3,
  offsets: Float64Array,
): SweepTables {
  const [low, high] = rangeAlong(mesh.positions, normal);
  const place = new OffsetPlace(offsets, low, high);
  const extents = runExtents(nodes, fit, normal, place);
  const fluxes = runFluxes(mesh, normal, place);
  return { normal, low, high, offsets, ...extents, ...fluxes };
}

/** Finds how many offsets lie at or below a height. */
class OffsetPlace {
  readonly count: number;
  private readonly first: Uint16Array;
  private readonly scale: number;

  constructor(
    readonly offsets: Float64Array,
    private readonly low: number,
    high: number,
  ) {
    this.count = offsets.length;
    this.scale = high > low ? LOOKUP / (high - low) : 0;
    this.first = new Uint16Array(LOOKUP + 1);
    for (let cell = 0, at = 0; cell <= LOOKUP; cell++) {
      while (at < this.count && (offsets[at] - low) * this.scale < cell) at++;
      this.first[cell] = at;
    }
  }

  of(height: number): number {
    const cell = (height - this.low) * this.scale;
    let at = this.first[cell <= 0 ? 0 : cell >= LOOKUP ? LOOKUP : cell | 0];
    while (at < this.count && this.offsets[at] <= height) at++;
    while (at > 0 && this.offsets[at - 1] > height) at--;
    return at;
  }
}

function runExtents(
  { points, count, onAxes }: BodyNodes,
  { axisCount }: FitFrames,
  [x, y, z]: Vector3,
  place: OffsetPlace,
) {
  const rows = place.count;
  // Slot j lies below offset j; the last slot lies above all.
  const low = new Float32Array((rows + 1) * axisCount).fill(Infinity);
  const high = new Float32Array((rows + 1) * axisCount).fill(-Infinity);
  for (let k = 0, node = 0; k < count; k++, node += axisCount) {
    const height = x * points[3 * k] + y * points[3 * k + 1] + z * points[3 * k + 2];
    const slot = place.of(height) * axisCount;
    for (let a = 0; a < axisCount; a++) {
      const along = onAxes[node + a];
      if (along < low[slot + a]) low[slot + a] = along;
      if (along > high[slot + a]) high[slot + a] = along;
    }
  }
  const aboveLow = low.slice(axisCount);
  const aboveHigh = high.slice(axisCount);
  for (let k = (rows - 1) * axisCount - 1; k >= 0; k--) {
    if (aboveLow[k + axisCount] < aboveLow[k]) aboveLow[k] = aboveLow[k + axisCount];
    if (aboveHigh[k + axisCount] > aboveHigh[k]) aboveHigh[k] = aboveHigh[k + axisCount];
  }
  for (let k = axisCount; k < rows * axisCount; k++) {
    if (low[k - axisCount] < low[k]) low[k] = low[k - axisCount];
    if (high[k - axisCount] > high[k]) high[k] = high[k - axisCount];
  }
  return { belowLow: low, belowHigh: high, aboveLow, aboveHigh };
}

function runFluxes(mesh: TriangleMesh, [x, y, z]: Vector3, place: OffsetPlace) {
  const { positions: p, indices } = mesh;
  const rows = place.count;
  const offsets = place.offsets;
  const seam = new Float64Array(rows);
  const volume = new Float64Array(rows);
  // Sums over triangles wholly above, by the number of offsets below them.
  const flux = new Float64Array(rows + 1);
  const moment = new Float64Array(rows + 1);
  const down = new Float64Array(rows + 1);
  const up = new Float64Array(rows + 1);
  for (let t = 0; t < indices.length; t += 3) {
    const a = 3 * indices[t];
    const b = 3 * indices[t + 1];
    const c = 3 * indices[t + 2];
    const ux = p[b] - p[a];
    const uy = p[b + 1] - p[a + 1];
    const uz = p[b + 2] - p[a + 2];
    const vx = p[c] - p[a];
    const vy = p[c + 1] - p[a + 1];
    const vz = p[c + 2] - p[a + 2];
    const nx = uy * vz - uz * vy;
    const ny = uz * vx - ux * vz;
    const nz = ux * vy - uy * vx;
    const weight = (x * nx + y * ny + z * nz) / 2;
    const area = Math.sqrt(nx * nx + ny * ny + nz * nz) / 2;
    const ha = x * p[a] + y * p[a + 1] + z * p[a + 2];
    const hb = ha + x * ux + y * uy + z * uz;
    const hc = ha + x * vx + y * vy + z * vz;
    const z0 = Math.min(ha, hb, hc);
    const z2 = Math.max(ha, hb, hc);
    const z1 = ha + hb + hc - z0 - z2;
    const middle = (z0 + z1 + z2) / 3;
    const whole = place.of(z0);
    flux[whole] += weight;
    moment[whole] += weight * middle;
    const at = place.of(middle);
    if (weight < -OVERHANG * area) down[at] += area;
    else if (weight > OVERHANG * area) up[at] += area;
    for (let j = whole; j < rows && offsets[j] < z2; j++) {
      const cut = offsets[j];
      if (cut >= z1) {
        const share = (z2 - cut) ** 2 / ((z2 - z0) * (z2 - z1) || 1);
        seam[j] += weight * share;
        volume[j] += (weight * share * (z2 - cut)) / 3;
      } else {
        const share = (cut - z0) ** 2 / ((z1 - z0) * (z2 - z0) || 1);
        seam[j] += weight * (1 - share);
        volume[j] += weight * (middle - cut + (share * (cut - z0)) / 3);
      }
    }
  }
  const overhangAbove = new Float64Array(rows);
  const overhangBelow = new Float64Array(rows);
  let wholeFlux = 0;
  let wholeMoment = 0;
  let hanging = 0;
  for (let j = rows - 1; j >= 0; j--) {
    wholeFlux += flux[j + 1];
    wholeMoment += moment[j + 1];
    hanging += down[j + 1];
    seam[j] = Math.max(0, seam[j] + wholeFlux);
    volume[j] += wholeMoment - offsets[j] * wholeFlux;
    overhangAbove[j] = hanging;
  }
  let standing = 0;
  for (let j = 0; j < rows; j++) {
    standing += up[j];
    overhangBelow[j] = standing;
  }
  return {
    seamMm2: seam,
    volumeAboveMm3: volume,
    overhangAboveMm2: overhangAbove,
    overhangBelowMm2: overhangBelow,
  };
}
