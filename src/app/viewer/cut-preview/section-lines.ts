import { type CutPlane } from '../scene/cut-plane-layer';
import { type SurfacePart } from '../scene/view-parts';

/**
 * Where a plane meets a surface: segments, flat xyz, two points a segment, mm. A vertex on the plane
 * counts as above, so that every crossing triangle gives exactly one segment. For drawing.
 */
export function sectionLines(surface: SurfacePart, plane: CutPlane): Float32Array {
  const { positions, indices } = surface;
  const [nx, ny, nz] = plane.normal;
  const distances = new Float64Array(positions.length / 3);
  for (let vertex = 0; vertex < distances.length; vertex++) {
    const i3 = vertex * 3;
    distances[vertex] =
      positions[i3]! * nx + positions[i3 + 1]! * ny + positions[i3 + 2]! * nz - plane.offsetMm;
  }
  const lines: number[] = [];
  for (let i3 = 0; i3 < indices.length; i3 += 3) {
    for (let corner = 0; corner < 3; corner++) {
      const from = indices[i3 + corner]!;
      const to = indices[i3 + ((corner + 1) % 3)]!;
      const a = distances[from]!;
      const b = distances[to]!;
      if (a >= 0 === b >= 0) continue;
      const share = a / (a - b);
      for (let axis = 0; axis < 3; axis++) {
        const start = positions[from * 3 + axis]!;
        lines.push(start + (positions[to * 3 + axis]! - start) * share);
      }
    }
  }
  return new Float32Array(lines);
}
