import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type BodyFaces } from './body-faces.js';
import { type BodyNodes } from './body-nodes.js';
import { type FitFrames } from './fit-frames.js';

/** Cells of the look-up from a height to its place among the offsets. */
const LOOKUP = 512;
/** Faces this square to the sweep may be a wall that a cut would run along (cosine). */
const SQUARE = 0.9;
/** A wall is at most this thick on either side of the cut, mm. */
const WALL_MM = 10;
/** Heights at which such faces are gathered. */
const WALL_BINS = 1024;

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
  /** Surface above, faces counted by their middles, mm². */
  readonly surfaceAboveMm2: Float64Array;
  /** Volume under the leaning faces of a side that stands on its cut face, mm³. */
  readonly supportAboveMm3: Float64Array;
  readonly supportBelowMm3: Float64Array;
  /** Length of the section's outline, by the worth of the surface, mm. */
  readonly sightMm: Float64Array;
  /** Area of faces that close a wall on both sides of the cut, mm². */
  readonly wallMm2: Float64Array;
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

/** What a sweep is over. */
export type Sweep = Pick<SweepTables, 'normal' | 'low' | 'high' | 'offsets'>;

/**
 * One sweep: a single pass over nodes and faces fills the tables of every offset. Nodes go into
 * the slot between two offsets, extents run over the slots from both ends. Section area and
 * volume follow from the divergence theorem: the flux of the direction, and of the height above
 * the cut, through the surface above. Cost O(nodes × axes + faces + offsets × axes).
 */
export function sweepTables(
  sweep: Sweep,
  nodes: BodyNodes,
  faces: BodyFaces,
  fit: FitFrames,
  overhangDegrees: number,
): SweepTables {
  const place = new OffsetPlace(sweep.offsets, sweep.low, sweep.high);
  const extents = runExtents(nodes, fit, sweep.normal, place);
  const fluxes = runFluxes(faces, sweep.normal, place, overhangDegrees);
  const wallMm2 = wallsAlong(faces, sweep);
  return { ...sweep, ...extents, ...fluxes, wallMm2 };
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

function runFluxes(
  { corners, halfNormals, areas, sides, worth }: BodyFaces,
  [x, y, z]: Vector3,
  place: OffsetPlace,
  overhangDegrees: number,
) {
  const rows = place.count;
  const offsets = place.offsets;
  const lean = Math.sin((overhangDegrees * Math.PI) / 180);
  const seam = new Float64Array(rows);
  const volume = new Float64Array(rows);
  const sight = new Float64Array(rows);
  // Sums over triangles wholly above, by the number of offsets below them.
  const flux = new Float64Array(rows + 1);
  const moment = new Float64Array(rows + 1);
  // Shadows of leaning faces, and shadow times height, by where their middle lies.
  const down = new Float64Array(rows + 1);
  const downMoment = new Float64Array(rows + 1);
  const up = new Float64Array(rows + 1);
  const upMoment = new Float64Array(rows + 1);
  const surface = new Float64Array(rows + 1);
  for (let t = 0, n = 0, c = 0; t < areas.length; t++, n += 3, c += 9) {
    const weight = x * halfNormals[n] + y * halfNormals[n + 1] + z * halfNormals[n + 2];
    const area = areas[t];
    const ha = x * corners[c] + y * corners[c + 1] + z * corners[c + 2];
    const hb = x * corners[c + 3] + y * corners[c + 4] + z * corners[c + 5];
    const hc = x * corners[c + 6] + y * corners[c + 7] + z * corners[c + 8];
    const z0 = Math.min(ha, hb, hc);
    const z2 = Math.max(ha, hb, hc);
    const z1 = ha + hb + hc - z0 - z2;
    const middle = (z0 + z1 + z2) / 3;
    const whole = place.of(z0);
    flux[whole] += weight;
    moment[whole] += weight * middle;
    const at = place.of(middle);
    surface[at] += area;
    const facing = sides[t] * weight;
    if (facing < -lean * area) {
      down[at] -= weight;
      downMoment[at] -= weight * middle;
    } else if (facing > lean * area) {
      up[at] += weight;
      upMoment[at] += weight * middle;
    }
    if (whole === rows || offsets[whole] > z2) continue;
    // A slice is longest at the middle corner: there it is twice the area over the slant height.
    const level = Math.sqrt(Math.max(0, area * area - weight * weight));
    const longest = (2 * level) / (z2 - z0 || 1);
    for (let j = whole; j < rows && offsets[j] <= z2; j++) {
      const cut = offsets[j];
      if (cut > z1) {
        const share = (z2 - cut) ** 2 / ((z2 - z0) * (z2 - z1) || 1);
        seam[j] += weight * share;
        volume[j] += (weight * share * (z2 - cut)) / 3;
        sight[j] += worth[t] * longest * ((z2 - cut) / (z2 - z1 || 1));
      } else {
        const share = (cut - z0) ** 2 / ((z1 - z0) * (z2 - z0) || 1);
        seam[j] += weight * (1 - share);
        volume[j] += weight * (middle - cut + (share * (cut - z0)) / 3);
        sight[j] += worth[t] * longest * (z1 > z0 ? (cut - z0) / (z1 - z0) : 1);
      }
    }
  }
  const supportAbove = new Float64Array(rows);
  const surfaceAbove = new Float64Array(rows);
  let wholeFlux = 0;
  let wholeMoment = 0;
  let hanging = 0;
  let hangingMoment = 0;
  let covered = 0;
  for (let j = rows - 1; j >= 0; j--) {
    wholeFlux += flux[j + 1];
    wholeMoment += moment[j + 1];
    seam[j] = Math.max(0, seam[j] + wholeFlux);
    volume[j] += wholeMoment - offsets[j] * wholeFlux;
    hanging += down[j + 1];
    hangingMoment += downMoment[j + 1];
    supportAbove[j] = Math.max(0, hangingMoment - offsets[j] * hanging);
    covered += surface[j + 1];
    surfaceAbove[j] = covered;
  }
  const supportBelow = new Float64Array(rows);
  let standing = 0;
  let standingMoment = 0;
  for (let j = 0; j < rows; j++) {
    standing += up[j];
    standingMoment += upMoment[j];
    supportBelow[j] = Math.max(0, offsets[j] * standing - standingMoment);
  }
  return {
    seamMm2: seam,
    volumeAboveMm3: volume,
    surfaceAboveMm2: surfaceAbove,
    supportAboveMm3: supportAbove,
    supportBelowMm3: supportBelow,
    sightMm: sight,
  };
}

/** For each offset the lesser of the faces that look up close above it and down close below it. */
function wallsAlong({ corners, halfNormals, areas, sides }: BodyFaces, sweep: Sweep): Float64Array {
  const { normal, low, high, offsets } = sweep;
  const [x, y, z] = normal;
  const scale = high > low ? WALL_BINS / (high - low) : 0;
  const bin = (height: number) =>
    Math.max(0, Math.min(WALL_BINS, Math.floor((height - low) * scale)));
  // Sums from the lowest bin on: entry b holds all below bin b.
  const up = new Float64Array(WALL_BINS + 2);
  const down = new Float64Array(WALL_BINS + 2);
  for (let t = 0, n = 0, c = 0; t < areas.length; t++, n += 3, c += 9) {
    const weight = x * halfNormals[n] + y * halfNormals[n + 1] + z * halfNormals[n + 2];
    if (Math.abs(weight) < SQUARE * areas[t]) continue;
    const middle =
      (x * (corners[c] + corners[c + 3] + corners[c + 6]) +
        y * (corners[c + 1] + corners[c + 4] + corners[c + 7]) +
        z * (corners[c + 2] + corners[c + 5] + corners[c + 8])) /
      3;
    (sides[t] * weight > 0 ? up : down)[bin(middle) + 1] += sides[t] * Math.abs(weight);
  }
  for (let b = 1; b < up.length; b++) {
    up[b] += up[b - 1];
    down[b] += down[b - 1];
  }
  return offsets.map((offset) => {
    const at = bin(offset);
    const above = up[Math.min(WALL_BINS + 1, bin(offset + WALL_MM) + 1)] - up[at];
    const below = down[Math.min(WALL_BINS + 1, at + 1)] - down[bin(offset - WALL_MM)];
    return Math.max(0, Math.min(above, below));
  });
}
