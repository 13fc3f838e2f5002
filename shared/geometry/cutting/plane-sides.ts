import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { boundingBox } from '../mesh/measure.js';
import { type Plane, type Vector3 } from '../vectors/plane.js';
import { bytes, Scratch } from './scratch.js';

/** Side of a vertex. A triangle's code is its vertices' sides joined by "or". */
export const BELOW = 1;
export const ABOVE = 2;
export const ON = 4;

/** Share of the box's largest side within which a vertex counts as on the plane. */
export const SNAP_SHARE = 1e-9;

export interface Sides {
  /** BELOW, ABOVE or ON, one a vertex. */
  readonly vertices: Uint8Array;
  /**
   * One a triangle: BELOW or ABOVE, with ON when it touches the plane; BELOW | ABOVE, perhaps with
   * ON, when it crosses. A triangle in the plane belongs to the side where its solid lies.
   */
  readonly triangles: Uint8Array;
  readonly onVertices: number;
  /** Number of triangles of each code, length 8. */
  readonly counts: Uint32Array;
}

/** The default half-width, mm, of the band that counts as the plane itself. */
export function defaultSnapMm(positions: Float64Array): number {
  const { size } = boundingBox(positions);
  return SNAP_SHARE * Math.max(size[0], size[1], size[2]);
}

const vertexSides = new Scratch(bytes);
const triangleCodes = new Scratch(bytes);

/**
 * Tells the sides of every vertex and triangle. O(vertices + triangles). The result is valid until
 * the next call.
 */
export function tellSides(mesh: TriangleMesh, plane: Plane, snapMm: number): Sides {
  const { positions, indices } = mesh;
  const [nx, ny, nz] = plane.normal;
  const { offset } = plane;
  const vertices = vertexSides.take(positions.length / 3);
  let onVertices = 0;
  for (let vertex = 0, i = 0; vertex < vertices.length; vertex++, i += 3) {
    const distance = nx * positions[i] + ny * positions[i + 1] + nz * positions[i + 2] - offset;
    if (distance > snapMm) vertices[vertex] = ABOVE;
    else if (distance < -snapMm) vertices[vertex] = BELOW;
    else {
      vertices[vertex] = ON;
      onVertices++;
    }
  }
  const triangles = triangleCodes.take(indices.length / 3);
  const counts = new Uint32Array(8);
  for (let triangle = 0, i = 0; triangle < triangles.length; triangle++, i += 3) {
    let code = vertices[indices[i]] | vertices[indices[i + 1]] | vertices[indices[i + 2]];
    if (code === ON) code |= projectedArea(mesh, triangle, plane.normal) > 0 ? BELOW : ABOVE;
    triangles[triangle] = code;
    counts[code]++;
  }
  return { vertices, triangles, onVertices, counts };
}

/** Signed area, mm², of a triangle projected along a unit normal; above 0 when it looks that way. */
export function projectedArea(mesh: TriangleMesh, triangle: number, normal: Vector3): number {
  const { positions, indices } = mesh;
  const a = 3 * indices[3 * triangle];
  const b = 3 * indices[3 * triangle + 1];
  const c = 3 * indices[3 * triangle + 2];
  const ux = positions[b] - positions[a];
  const uy = positions[b + 1] - positions[a + 1];
  const uz = positions[b + 2] - positions[a + 2];
  const vx = positions[c] - positions[a];
  const vy = positions[c + 1] - positions[a + 1];
  const vz = positions[c + 2] - positions[a + 2];
  return (
    (normal[0] * (uy * vz - uz * vy) +
      normal[1] * (uz * vx - ux * vz) +
      normal[2] * (ux * vy - uy * vx)) /
    2
  );
}
