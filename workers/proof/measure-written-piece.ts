import { readWrittenStl } from './read-written-stl.js';
import { identifyCorners, writtenTopology } from './written-topology.js';

/** What was measured on the bytes of one written piece. Lengths in mm. */
export interface WrittenPiece {
  name: string;
  facets: number;
  sizeMatches: boolean;
  finite: boolean;
  openEdges: number;
  repeatedEdges: number;
  collapsedFacets: number;
  /** Surfaces that enclose material (positive volume). */
  bodies: number;
  /** Surfaces that enclose a hollow (negative volume), each inside the box of a body. */
  hollows: number;
  /** Negative surfaces that lie outside every body: a piece turned inside out. */
  strayHollows: number;
  /** Hollows taken off. */
  volumeMm3: number;
  surfaceMm2: number;
  min: [number, number, number];
  max: [number, number, number];
  /** Largest distance of a corner from the given vertical axis, mm. */
  radiusMm: number;
}

/**
 * Measures one written file: shape of the file, closedness, orientation, bodies, volume, box.
 * @param axis x and y (mm) of the vertical axis that `radiusMm` is measured from
 */
export function measureWrittenPiece(
  name: string,
  bytes: Uint8Array,
  axis: readonly [number, number],
): WrittenPiece {
  const file = readWrittenStl(bytes);
  const { ids } = identifyCorners(file.corners);
  const topology = writtenTopology(ids);
  const box = boxOf(file.corners);
  const surfaces = measureSurfaces(file.corners, topology.surfaceOf, topology.surfaces, box.middle);
  const bodies = surfaces.filter((surface) => surface.volumeMm3 > 0);
  const hollows = surfaces.filter((surface) => surface.volumeMm3 <= 0);
  return {
    name,
    facets: file.facets,
    sizeMatches: file.sizeMatches,
    finite: file.finite,
    openEdges: topology.open,
    repeatedEdges: topology.repeated,
    collapsedFacets: topology.collapsed,
    bodies: bodies.length,
    hollows: hollows.length,
    strayHollows: hollows.filter((hollow) => !bodies.some((body) => boxInside(hollow, body)))
      .length,
    volumeMm3: surfaces.reduce((sum, surface) => sum + surface.volumeMm3, 0),
    surfaceMm2: facetAreas(file.corners),
    min: box.min,
    max: box.max,
    radiusMm: largestRadius(file.corners, axis),
  };
}

interface Surface {
  volumeMm3: number;
  min: Float64Array;
  max: Float64Array;
}

/** Volumes by the divergence theorem about the piece's own middle, which keeps the terms small. */
function measureSurfaces(
  corners: Float32Array,
  surfaceOf: Int32Array,
  count: number,
  middle: readonly [number, number, number],
): Surface[] {
  const volumes = new Float64Array(count);
  const boxes = Array.from({ length: count }, () => ({
    min: new Float64Array(3).fill(Infinity),
    max: new Float64Array(3).fill(-Infinity),
  }));
  const [ox, oy, oz] = middle;
  for (let facet = 0; facet < surfaceOf.length; facet++) {
    const at = 9 * facet;
    const ax = corners[at] - ox;
    const ay = corners[at + 1] - oy;
    const az = corners[at + 2] - oz;
    const bx = corners[at + 3] - ox;
    const by = corners[at + 4] - oy;
    const bz = corners[at + 5] - oz;
    const cx = corners[at + 6] - ox;
    const cy = corners[at + 7] - oy;
    const cz = corners[at + 8] - oz;
    const surface = surfaceOf[facet];
    volumes[surface] +=
      ax * (by * cz - bz * cy) + ay * (bz * cx - bx * cz) + az * (bx * cy - by * cx);
    const { min, max } = boxes[surface];
    for (let k = 0; k < 9; k++) {
      const value = corners[at + k];
      const component = k % 3;
      if (value < min[component]) min[component] = value;
      if (value > max[component]) max[component] = value;
    }
  }
  return boxes.map((box, surface) => ({ ...box, volumeMm3: volumes[surface] / 6 }));
}

function facetAreas(corners: Float32Array): number {
  let twice = 0;
  for (let at = 0; at < corners.length; at += 9) {
    const ux = corners[at + 3] - corners[at];
    const uy = corners[at + 4] - corners[at + 1];
    const uz = corners[at + 5] - corners[at + 2];
    const vx = corners[at + 6] - corners[at];
    const vy = corners[at + 7] - corners[at + 1];
    const vz = corners[at + 8] - corners[at + 2];
    twice += Math.hypot(uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx);
  }
  return twice / 2;
}

function boxInside(inner: Surface, outer: Surface): boolean {
  for (let k = 0; k < 3; k++)
    if (inner.min[k] < outer.min[k] || inner.max[k] > outer.max[k]) return false;
  return true;
}

function boxOf(corners: Float32Array): {
  min: [number, number, number];
  max: [number, number, number];
  middle: [number, number, number];
} {
  if (corners.length === 0) return { min: [0, 0, 0], max: [0, 0, 0], middle: [0, 0, 0] };
  const min: [number, number, number] = [Infinity, Infinity, Infinity];
  const max: [number, number, number] = [-Infinity, -Infinity, -Infinity];
  for (let i = 0; i < corners.length; i++) {
    const component = i % 3;
    if (corners[i] < min[component]) min[component] = corners[i];
    if (corners[i] > max[component]) max[component] = corners[i];
  }
  return {
    min,
    max,
    middle: [(min[0] + max[0]) / 2, (min[1] + max[1]) / 2, (min[2] + max[2]) / 2],
  };
}

function largestRadius(corners: Float32Array, axis: readonly [number, number]): number {
  const [axisX, axisY] = axis;
  let largest = 0;
  for (let i = 0; i < corners.length; i += 3) {
    const dx = corners[i] - axisX;
    const dy = corners[i + 1] - axisY;
    const squared = dx * dx + dy * dy;
    if (squared > largest) largest = squared;
  }
  return Math.sqrt(largest);
}
