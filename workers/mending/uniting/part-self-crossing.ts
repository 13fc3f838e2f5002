import { cutMesh } from '../../../shared/geometry/cutting/cut-mesh.js';
import { surfacesOf } from '../../../shared/geometry/mesh/edge-mates.js';
import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import { listByShell, shellVolumes } from '../../../shared/geometry/mesh/shells.js';
import { edgeReport } from '../../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { findCrossings } from '../../measuring/find-crossings.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import type { JobContext } from '../../runtime/job-context.js';
import type { Solids } from '../../solids/solid-kernel.js';
import { joinMeshes, pickTriangles } from './mesh-parts.js';

/** Bounds of the search for cuts; beyond them a re-mesh is quicker. Own choice. */
const mostCuts = 60;
const mostTriangles = 400_000;
const gapsAnAxis = 3;

/** A solid with the triangles in it that cross others of the same shell. */
interface Part {
  readonly mesh: TriangleMesh;
  readonly crossing: Uint32Array;
}

/**
 * Cuts a solid that crosses itself by planes that keep clear of the crossings, until the surfaces that
 * cross belong to different parts. United, the parts give the solid back with its overlaps counted
 * once. Null when no such cuts are found within bounds.
 */
export function partSelfCrossing(
  solid: TriangleMesh,
  solids: Solids,
  context: JobContext,
): TriangleMesh[] | null {
  if (solid.indices.length / 3 > mostTriangles) return null;
  const done: TriangleMesh[] = [];
  const open: Part[] = [partOf(solid)];
  let cuts = 0;
  for (let part = open.pop(); part; part = open.pop()) {
    if (part.crossing.length === 0) {
      done.push(part.mesh);
      continue;
    }
    let best: Part[] | null = null;
    let least = part.crossing.length;
    for (const plane of clearPlanes(part)) {
      if (++cuts > mostCuts) return null;
      context.progress('Uniting', cuts / mostCuts);
      const parts = cutInTwo(part.mesh, plane, solids);
      if (!parts) continue;
      const left = parts.reduce((sum, one) => sum + one.crossing.length, 0);
      if (left >= least) continue;
      least = left;
      best = parts;
      if (left === 0) break;
    }
    if (!best) return null;
    open.push(...best);
  }
  return done;
}

function cutInTwo(
  mesh: TriangleMesh,
  plane: { axis: number; offset: number },
  { triangulate }: Solids,
): Part[] | null {
  const normal = [0, 1, 2].map((axis) => (axis === plane.axis ? 1 : 0)) as [number, number, number];
  const { above, below } = cutMesh(
    mesh,
    { normal, offset: plane.offset },
    { triangulate, capTag: 1 },
  );
  if (above.indices.length === 0 || below.indices.length === 0) return null;
  if (!edgeReport(above).closed || !edgeReport(below).closed) return null;
  return [...connectedSolids(above), ...connectedSolids(below)].map(partOf);
}

/** Outer shells, each with the cavities whose boxes lie in its own and in no smaller one's. */
function connectedSolids(mesh: TriangleMesh): TriangleMesh[] {
  const surfaces = surfacesOf(mesh);
  if (surfaces.count === 1) return [mesh];
  const volumes = shellVolumes(mesh, surfaces);
  const { triangles, start } = listByShell(surfaces);
  const shells = Array.from(volumes, (volume, i) => {
    const shell = pickTriangles(mesh, triangles.subarray(start[i], start[i + 1]));
    return {
      volume,
      mesh: shell,
      box: boundingBox(shell.positions),
      cavities: [] as TriangleMesh[],
    };
  });
  const outers = shells.filter((shell) => shell.volume > 0).sort((a, b) => a.volume - b.volume);
  for (const cavity of shells.filter((shell) => shell.volume <= 0))
    outers
      .find(({ box }) =>
        [0, 1, 2].every(
          (axis) => box.min[axis] <= cavity.box.min[axis] && cavity.box.max[axis] <= box.max[axis],
        ),
      )
      ?.cavities.push(cavity.mesh);
  return outers.map((outer) => joinMeshes([outer.mesh, ...outer.cavities]));
}

function partOf(mesh: TriangleMesh): Part {
  const { triangles } = findCrossings(mesh, buildBvh(mesh));
  const { labels } = surfacesOf(mesh);
  const own: number[] = [];
  for (let i = 0; i < triangles.length; i += 2)
    if (labels[triangles[i]] === labels[triangles[i + 1]]) own.push(triangles[i], triangles[i + 1]);
  return { mesh, crossing: Uint32Array.from(own) };
}

/** Planes across the axes that pass between the crossing triangles, in the widest gaps first. */
function clearPlanes({ mesh, crossing }: Part): { axis: number; offset: number }[] {
  const { min, max } = boundingBox(mesh.positions);
  const planes: { axis: number; offset: number; gap: number }[] = [];
  for (let axis = 0; axis < 3; axis++) {
    const spans = Array.from(new Set(crossing), (triangle) => {
      const values = [0, 1, 2].map(
        (corner) => mesh.positions[3 * mesh.indices[3 * triangle + corner] + axis],
      );
      return [Math.min(...values), Math.max(...values)] as const;
    }).sort((a, b) => a[0] - b[0]);
    const gaps: { offset: number; gap: number }[] = [];
    let end = min[axis];
    for (const [from, to] of [...spans, [max[axis], max[axis]] as const]) {
      if (from > end) gaps.push({ offset: (from + end) / 2, gap: from - end });
      end = Math.max(end, to);
    }
    gaps.sort((a, b) => b.gap - a.gap);
    // Right beside the crossing the parts that cross are most likely apart already.
    const first = spans[0][0];
    const last = Math.max(...spans.map((span) => span[1]));
    const beside = 1e-3 * (max[axis] - min[axis]);
    for (const offset of [first - beside, last + beside])
      if (offset > min[axis] && offset < max[axis]) planes.push({ axis, offset, gap: Infinity });
    for (const gap of gaps.slice(0, gapsAnAxis)) planes.push({ axis, ...gap });
  }
  return planes.sort((a, b) => b.gap - a.gap);
}
