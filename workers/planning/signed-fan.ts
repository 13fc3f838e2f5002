import { type PolygonTriangulator } from '../../shared/geometry/cutting/cut-mesh.js';

/**
 * A cap for trial cuts: every loop becomes a fan of signed triangles from its first point. Fans of
 * dented loops overlap themselves, yet every loop edge is a border exactly once and signed areas
 * add up, so volumes, extents and closedness of a trial part are right at almost no cost. Never
 * for a file that is printed.
 */
export const signedFan: PolygonTriangulator = (loops) => {
  let triangles = 0;
  for (const loop of loops) triangles += Math.max(0, loop.length / 2 - 2);
  const corners = new Uint32Array(3 * triangles);
  let at = 0;
  let first = 0;
  for (const loop of loops) {
    const points = loop.length / 2;
    for (let k = 1; k + 1 < points; k++) {
      corners[at++] = first;
      corners[at++] = first + k;
      corners[at++] = first + k + 1;
    }
    first += points;
  }
  return corners;
};
