import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { type Plane } from '../vectors/plane.js';
import { ABOVE, BELOW, defaultSnapMm, ON, projectedArea, tellSides } from './plane-sides.js';
import { bytes, Scratch } from './scratch.js';

/**
 * Moves a plane along its normal, by at most `toleranceMm`, away from the mesh's vertices: a cut
 * close to a vertex makes edges so short that rounding to float32 can fold them. Among the places
 * that keep `toleranceMm` from every vertex the nearest is taken, else the middle of the widest
 * gap. The plane stays where it is when no vertex is within the tolerance, and when those that are
 * lie exactly on it (within `snapMm`) and the surface passes through the plane there or ends in it:
 * a cut along a face or a ring of edges is wanted as it is. Where the surface only touches the
 * plane along an edge, the plane moves too. A plane along faces that are not quite flat moves to
 * their outer side, if there is at least half the room, so that no thin sheet is cut off them; it
 * may miss the mesh there.
 * @param snapMm half-width of the band that counts as exactly on the plane
 * O(vertices) when it stays free, else O(triangles) and O(n log n) in the vertices that are near.
 */
export function placeCut(
  mesh: TriangleMesh,
  plane: Plane,
  toleranceMm: number,
  snapMm = defaultSnapMm(mesh.positions),
): Plane {
  const near = collectNear(mesh.positions, plane, toleranceMm);
  if (near.distances.length === 0 || !(toleranceMm > 0)) return plane;
  if (near.distances[0] >= -snapMm && near.distances[near.distances.length - 1] <= snapMm) {
    if (!touchesAlongEdge(mesh, plane, snapMm)) return plane;
  }
  const outwards = Math.sign(shadowOfFaces(mesh, plane, near.isNear));
  const move = findPlace(near, toleranceMm, outwards);
  return { normal: plane.normal, offset: plane.offset + move };
}

interface NearVertices {
  /** 1 for each vertex within the tolerance. */
  readonly isNear: Uint8Array;
  /** Signed distances within the tolerance, rising, mm. */
  readonly distances: Float64Array;
  /** The next distances on either side of the tolerance; infinite when the mesh ends before. */
  readonly before: number;
  readonly after: number;
}

const nearFlags = new Scratch(bytes);

function collectNear(positions: Float64Array, plane: Plane, toleranceMm: number): NearVertices {
  const [nx, ny, nz] = plane.normal;
  const { offset } = plane;
  const isNear = nearFlags.take(positions.length / 3).fill(0);
  let near = new Float64Array(256);
  let count = 0;
  let before = -Infinity;
  let after = Infinity;
  for (let i = 0; i < positions.length; i += 3) {
    const distance = nx * positions[i] + ny * positions[i + 1] + nz * positions[i + 2] - offset;
    if (distance > toleranceMm) {
      if (distance < after) after = distance;
    } else if (distance < -toleranceMm) {
      if (distance > before) before = distance;
    } else {
      if (count === near.length) {
        const larger = new Float64Array(2 * count);
        larger.set(near);
        near = larger;
      }
      near[count++] = distance;
      isNear[i / 3] = 1;
    }
  }
  return { isNear, distances: near.subarray(0, count).sort(), before, after };
}

/**
 * Signed area, mm², that the faces within the tolerance throw onto the plane: above 0 when most of
 * them look along its normal, with the solid below.
 */
function shadowOfFaces(mesh: TriangleMesh, plane: Plane, isNear: Uint8Array): number {
  const { indices } = mesh;
  let shadow = 0;
  for (let i = 0; i < indices.length; i += 3) {
    if (isNear[indices[i]] === 0) continue;
    if (isNear[indices[i + 1]] === 0 || isNear[indices[i + 2]] === 0) continue;
    shadow += projectedArea(mesh, i / 3, plane.normal);
  }
  return shadow;
}

/** Share of the best clearance with which a place on the outer side of faces is good enough. */
const OUTER_SHARE = 0.5;

/**
 * The best signed distance to move, mm.
 * @param outwards 1 or -1: the side to prefer; 0: none
 */
function findPlace(near: NearVertices, toleranceMm: number, outwards: number): number {
  const { distances, before, after } = near;
  let best = 0;
  let bestClearance = 0;
  let outer = 0;
  let outerClearance = 0;
  for (let gap = 0; gap <= distances.length; gap++) {
    const low = gap === 0 ? before : distances[gap - 1];
    const high = gap === distances.length ? after : distances[gap];
    const roomy = high - low >= 2 * toleranceMm;
    const middle = roomy ? clamp(0, low + toleranceMm, high - toleranceMm) : (low + high) / 2;
    const place = clamp(middle, -toleranceMm, toleranceMm);
    const clearance = Math.min(place - low, high - place);
    if (place * outwards > 0 && clearance > outerClearance) {
      outer = place;
      outerClearance = clearance;
    }
    // Past the last vertex the plane would miss the mesh.
    if (low === -Infinity || high === Infinity) continue;
    const isWider = clearance > bestClearance;
    if (isWider || (clearance === bestClearance && Math.abs(place) < Math.abs(best))) {
      best = place;
      bestClearance = clearance;
    }
  }
  return outerClearance > 0 && outerClearance >= OUTER_SHARE * bestClearance ? outer : best;
}

function clamp(value: number, low: number, high: number): number {
  return value < low ? low : value > high ? high : value;
}

/** Whether some edge lies in the plane with both its triangles going off to the same side. */
function touchesAlongEdge(mesh: TriangleMesh, plane: Plane, snapMm: number): boolean {
  const { vertices, triangles, onVertices } = tellSides(mesh, plane, snapMm);
  if (onVertices < 2) return false;
  const { indices } = mesh;
  /** Side of the first triangle seen on an edge in the plane. */
  const sideOfEdge = new Map<number, number>();
  for (let triangle = 0; triangle < triangles.length; triangle++) {
    const code = triangles[triangle];
    if ((code & ON) === 0 || code === (ABOVE | BELOW | ON)) continue;
    let edge = -1;
    let edgesInPlane = 0;
    for (let corner = 0; corner < 3; corner++) {
      const a = indices[3 * triangle + corner];
      const b = indices[corner === 2 ? 3 * triangle : 3 * triangle + corner + 1];
      if (vertices[a] !== ON || vertices[b] !== ON) continue;
      edge = Math.min(a, b) * vertices.length + Math.max(a, b);
      edgesInPlane++;
    }
    // A triangle in the plane has three: its border is a face's, not a touching edge.
    if (edgesInPlane !== 1) continue;
    if (sideOfEdge.get(edge) === code) return true;
    sideOfEdge.set(edge, code);
  }
  return false;
}
