import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import { weldPoints } from '../../../shared/geometry/mesh/weld-points.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';

/** How far a touching vertex is drawn back, as a share of the diagonal: a few steps of float32. Own choice. */
const drawnBackShare = 4e-6;

/**
 * Draws vertices that lie on each other in single precision, though they belong to different places of
 * the surface, back by a few millionths of the box: those of ridges into the solid, those of grooves
 * out of it. Bodies that touch in an edge or a corner are then apart, and hollows too, and a file holds
 * them as closed. The mesh itself when nothing touches.
 * @param from only vertices from this number on are moved
 */
export function partContacts(mesh: TriangleMesh, from: number): TriangleMesh {
  const { positions, indices } = mesh;
  const { min, size } = boundingBox(positions);
  const middle = min.map((value, axis) => value + size[axis] / 2);
  const rounded = Float32Array.from(positions, (value, i) => value - middle[i % 3]);
  const { vertexOf, count } = weldPoints(new Int32Array(rounded.buffer), 3);
  if (count === vertexOf.length) return mesh;
  const uses = new Uint32Array(count);
  for (const place of vertexOf) uses[place]++;
  const back = directionsBack(mesh);
  const distance = drawnBackShare * Math.hypot(...size);
  const moved = positions.slice();
  for (let vertex = from; vertex < vertexOf.length; vertex++) {
    if (uses[vertexOf[vertex]] < 2) continue;
    const at = 3 * vertex;
    const length = Math.hypot(back[at], back[at + 1], back[at + 2]);
    if (!(length > 0)) continue;
    for (let axis = 0; axis < 3; axis++) moved[at + axis] += (distance * back[at + axis]) / length;
  }
  return { positions: moved, indices };
}

/** For each vertex its normal, by its triangles' areas, turned to the side on which its neighbours lie. */
function directionsBack({ positions: p, indices }: TriangleMesh): Float64Array {
  const normals = new Float64Array(p.length);
  const towards = new Float64Array(p.length);
  for (let i = 0; i < indices.length; i++) {
    const first = i - (i % 3);
    const [a, b, c] = [0, 1, 2].map((corner) => 3 * indices[first + ((i + corner) % 3)]);
    const u = [p[b] - p[a], p[b + 1] - p[a + 1], p[b + 2] - p[a + 2]];
    const v = [p[c] - p[a], p[c + 1] - p[a + 1], p[c + 2] - p[a + 2]];
    const [lengthU, lengthV] = [Math.hypot(...u) || 1, Math.hypot(...v) || 1];
    for (let axis = 0; axis < 3; axis++) {
      const [j, k] = [(axis + 1) % 3, (axis + 2) % 3];
      normals[a + axis] += u[j] * v[k] - u[k] * v[j];
      towards[a + axis] += u[axis] / lengthU + v[axis] / lengthV;
    }
  }
  for (let at = 0; at < p.length; at += 3) {
    const side =
      normals[at] * towards[at] +
      normals[at + 1] * towards[at + 1] +
      normals[at + 2] * towards[at + 2];
    if (side < 0) for (let axis = 0; axis < 3; axis++) normals[at + axis] *= -1;
  }
  return normals;
}
