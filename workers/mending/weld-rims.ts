import { dropUnusedVertices } from '../../shared/geometry/mesh/compact.js';
import { mateEdges, nextSide, OPEN } from '../../shared/geometry/mesh/edge-mates.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { PointGrid } from './point-grid.js';

/** How bad a surface is: its open edges, crowded ones counted double. */
export function faultsOf(indices: Uint32Array): number {
  const { openEdges, nonManifoldEdges } = mateEdges(indices);
  return openEdges + 2 * nonManifoldEdges;
}

/**
 * Joins vertices on open edges that lie within a tolerance of each other; the first one stays where
 * it is. Vertices inside the surface are not touched, so a sound region keeps its shape. Triangles
 * that collapse are dropped. Several tolerances are tried and the one that leaves the fewest faults is
 * taken, the smallest among equals; null when none helps.
 */
export function weldRims(
  mesh: TriangleMesh,
  tolerances: readonly number[],
): { mesh: TriangleMesh; joined: number } | null {
  let fewest = faultsOf(mesh.indices);
  if (fewest === 0) return null;
  const rim = rimVertices(mesh.indices);
  let best: { mesh: TriangleMesh; joined: number } | null = null;
  for (const tolerance of tolerances) {
    const welded = weldWithin(mesh, rim, tolerance);
    if (welded.joined === 0) continue;
    const faults = faultsOf(welded.mesh.indices);
    if (faults >= fewest) continue;
    fewest = faults;
    best = welded;
    if (faults === 0) break;
  }
  return best;
}

/** Vertices of open edges, in ascending order. */
export function rimVertices(indices: Uint32Array): Uint32Array {
  const { mates } = mateEdges(indices);
  const found = new Set<number>();
  for (let side = 0; side < mates.length; side++)
    if (mates[side] === OPEN) found.add(indices[side]).add(indices[nextSide(side)]);
  return Uint32Array.from(found).sort();
}

function weldWithin(mesh: TriangleMesh, rim: Uint32Array, tolerance: number) {
  const { positions, indices } = mesh;
  const target = Uint32Array.from({ length: positions.length / 3 }, (_, vertex) => vertex);
  const grid = new PointGrid(positions, tolerance);
  let joined = 0;
  for (const vertex of rim) {
    const [x, y, z] = positions.subarray(3 * vertex, 3 * vertex + 3);
    let nearest = -1;
    let least = tolerance * tolerance;
    grid.around(x, y, z, (other) => {
      const dx = positions[3 * other] - x;
      const dy = positions[3 * other + 1] - y;
      const dz = positions[3 * other + 2] - z;
      const distance = dx * dx + dy * dy + dz * dz;
      if (distance > least || (distance === least && nearest >= 0)) return;
      least = distance;
      nearest = other;
    });
    if (nearest < 0) grid.add(vertex);
    else {
      target[vertex] = nearest;
      joined++;
    }
  }
  return { mesh: renumbered(mesh, target, indices), joined };
}

function renumbered(mesh: TriangleMesh, target: Uint32Array, indices: Uint32Array): TriangleMesh {
  const kept = new Uint32Array(indices.length);
  let filled = 0;
  for (let i = 0; i < indices.length; i += 3) {
    const a = target[indices[i]];
    const b = target[indices[i + 1]];
    const c = target[indices[i + 2]];
    if (a === b || b === c || c === a) continue;
    kept[filled] = a;
    kept[filled + 1] = b;
    kept[filled + 2] = c;
    filled += 3;
  }
  return dropUnusedVertices({ positions: mesh.positions, indices: kept.slice(0, filled) });
}
