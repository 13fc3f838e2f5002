import { boundingBox, signedVolume, surfaceArea } from '../../shared/geometry/mesh/measure.js';
import { matesOf, surfacesOf } from '../../shared/geometry/mesh/edge-mates.js';
import { connectedShells } from '../../shared/geometry/mesh/shells.js';
import { duplicateFacets } from '../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { SurfaceState } from '../../shared/jobs/model-inspect.js';

/**
 * Counts and measures a surface as it is. Lengths in the mesh's unit. `volume` is 0 while the surface
 * is open or contradicts itself; for one that is inside out it is positive all the same. No triangle
 * may name a vertex twice; at least one triangle. O(triangles).
 */
export function surveySurface(mesh: TriangleMesh): SurfaceState {
  const { mates, openEdges, nonManifoldEdges, misorientedEdges, closed } = matesOf(mesh);
  const { size, min } = boundingBox(mesh.positions);
  return {
    triangles: mesh.indices.length / 3,
    vertices: mesh.positions.length / 3,
    openEdges,
    nonManifoldEdges,
    misorientedEdges,
    duplicateFacets: mayHoldDuplicates(mates, nonManifoldEdges) ? duplicateFacets(mesh) : 0,
    // Without a crowded edge the mates say it all.
    shells: nonManifoldEdges === 0 ? surfacesOf(mesh).count : connectedShells(mesh).count,
    closed,
    volume: closed ? Math.abs(signedVolume(mesh)) : 0,
    area: surfaceArea(mesh),
    size: [...size],
    min: [...min],
  };
}

/** Two triangles on the same vertices crowd their edges, or share all three with each other only. */
function mayHoldDuplicates(mates: Int32Array, nonManifoldEdges: number): boolean {
  if (nonManifoldEdges > 0) return true;
  for (let side = 0; side < mates.length; side += 3) {
    if (mates[side] < 0) continue;
    const other = (mates[side] / 3) | 0;
    if (((mates[side + 1] / 3) | 0) === other && ((mates[side + 2] / 3) | 0) === other) return true;
  }
  return false;
}
