import { type Loops } from '../sections/chain-loops.js';
import { type PlaneFrame } from '../vectors/plane-frame.js';
import { type SectionNodes } from './section-nodes.js';

/**
 * Fills a region of the plane given by its outline.
 * @param loops flat xy of each loop, mm; outer loops run counter-clockwise, holes clockwise (so the
 *   non-zero and the even-odd rule agree); loops may touch in points
 * @returns triples of vertex numbers into the concatenated loops, counter-clockwise; every loop edge
 *   must appear exactly once as a border
 */
export type PolygonTriangulator = (loops: readonly Float64Array[]) => Uint32Array;

export interface Cap {
  /** Node triples, counter-clockwise seen from above: the cap of the side below. */
  readonly triangles: Uint32Array;
  readonly areaMm2: number;
}

/** Coordinates of the nodes in the plane's frame, from the first node: flat xy, mm. */
export function flattenNodes(nodes: SectionNodes, frame: PlaneFrame): Float64Array {
  const { positions } = nodes;
  const [ux, uy, uz] = frame.u;
  const [vx, vy, vz] = frame.v;
  const xy = new Float64Array(2 * nodes.count);
  for (let node = 0; node < nodes.count; node++) {
    const x = positions[3 * node] - positions[0];
    const y = positions[3 * node + 1] - positions[1];
    const z = positions[3 * node + 2] - positions[2];
    xy[2 * node] = ux * x + uy * y + uz * z;
    xy[2 * node + 1] = vx * x + vy * y + vz * z;
  }
  return xy;
}

/**
 * Triangulates the section. A triangle that names a node twice (two loops touch there) is empty
 * and left out; its other two edges lie on each other, so the cap stays closed.
 */
export function capSection(loops: Loops, xy: Float64Array, triangulate: PolygonTriangulator): Cap {
  if (loops.count === 0) return { triangles: new Uint32Array(0), areaMm2: 0 };
  const polygons: Float64Array[] = [];
  let areaMm2 = 0;
  for (let loop = 0; loop < loops.count; loop++) {
    const polygon = gather(loops.nodes, loops.start[loop], loops.start[loop + 1], xy);
    areaMm2 += loopArea(polygon);
    polygons.push(polygon);
  }
  const corners = triangulate(polygons);
  const triangles = new Uint32Array(corners.length);
  let filled = 0;
  for (let i = 0; i < corners.length; i += 3) {
    const a = loops.nodes[corners[i]];
    const b = loops.nodes[corners[i + 1]];
    const c = loops.nodes[corners[i + 2]];
    if (a === b || b === c || c === a) continue;
    triangles[filled] = a;
    triangles[filled + 1] = b;
    triangles[filled + 2] = c;
    filled += 3;
  }
  return { triangles: triangles.subarray(0, filled), areaMm2 };
}

function gather(nodes: Int32Array, start: number, end: number, xy: Float64Array): Float64Array {
  const polygon = new Float64Array(2 * (end - start));
  for (let i = start, k = 0; i < end; i++, k += 2) {
    polygon[k] = xy[2 * nodes[i]];
    polygon[k + 1] = xy[2 * nodes[i] + 1];
  }
  return polygon;
}

/** Signed area of a loop, mm²: the shoelace formula from its first point. */
export function loopArea(polygon: Float64Array): number {
  const x0 = polygon[0];
  const y0 = polygon[1];
  let twofold = 0;
  for (let i = 2; i + 3 < polygon.length; i += 2) {
    twofold +=
      (polygon[i] - x0) * (polygon[i + 3] - y0) - (polygon[i + 2] - x0) * (polygon[i + 1] - y0);
  }
  return twofold / 2;
}
