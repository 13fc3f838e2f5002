import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { boundingBox } from '../mesh/measure.js';
import { type Plane } from '../vectors/plane.js';

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

/** Tells the sides of every vertex and triangle. O(vertices + triangles). */
export function tellSides(mesh: TriangleMesh, plane: Plane, snapMm: number): Sides {
  const { positions, indices } = mesh;
  const [nx, ny, nz] = plane.normal;
  const { offset } = plane;
  const vertices = new Uint8Array(positions.length / 3);
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
  const triangles = new Uint8Array(indices.length / 3);
  const counts = new Uint32Array(8);
  for (let triangle = 0, i = 0; triangle < triangles.length; triangle++, i += 3) {
    let code = vertices[indices[i]] | vertices[indices[i + 1]] | vertices[indices[i + 2]];
    if (code === ON) code |= facesAlong(mesh, i, plane) ? BELOW : ABOVE;
    triangles[triangle] = code;
    counts[code]++;
  }
  return { vertices, triangles, onVertices, counts };
}

/** Whether the triangle at index i faces along the plane's normal, so that its solid lies below. */
function facesAlong(mesh: TriangleMesh, i: number, plane: Plane): boolean {
  const { positions, indices } = mesh;
  const a = 3 * indices[i];
  const b = 3 * indices[i + 1];
  const c = 3 * indices[i + 2];
  const ux = positions[b] - positions[a];
  const uy = positions[b + 1] - positions[a + 1];
  const uz = positions[b + 2] - positions[a + 2];
  const vx = positions[c] - positions[a];
  const vy = positions[c + 1] - positions[a + 1];
  const vz = positions[c + 2] - positions[a + 2];
  const along =
    plane.normal[0] * (uy * vz - uz * vy) +
    plane.normal[1] * (uz * vx - ux * vz) +
    plane.normal[2] * (ux * vy - uy * vx);
  return along > 0;
}
