import type { MeshBVH } from 'three-mesh-bvh';
import { matesOf } from '../../shared/geometry/mesh/edge-mates.js';
import { dropUnusedVertices } from '../../shared/geometry/mesh/compact.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { Deviation } from '../../shared/jobs/model-inspect.js';
import { surfaceDeviation } from '../measuring/surface-deviation.js';
import { mendTopology } from '../mending/mend-topology.js';
import { buildBvh } from '../measuring/triangle-bvh.js';
import { simplifyForView } from './simplify-for-view.js';

/** Triangles of the mesh that is planned and looked at. */
const mostTriangles = 60_000;
const samples = 4000;

export interface Proxy {
  readonly mesh: TriangleMesh;
  /** Whether every edge of it is used once each way. */
  readonly isClosed: boolean;
  /** The larger of the distances both ways; zeros when nothing was simplified, null when not measured. */
  readonly deviation: Deviation | null;
}

/**
 * A simplified mesh of at most 60 000 triangles with its measured distance from the model. A mesh
 * within that stays as it is. @param bvh over `mesh`; without it nothing is measured
 */
export async function makeProxy(mesh: TriangleMesh, bvh: MeshBVH | null): Promise<Proxy> {
  if (mesh.indices.length / 3 <= mostTriangles) {
    const isClosed = matesOf(mesh).closed;
    return { mesh, isClosed, deviation: { mean: 0, p95: 0, max: 0, samples } };
  }
  const view = await simplifyForView(mesh, mostTriangles);
  const simple = dropUnusedVertices({
    positions: new Float64Array(view.positions),
    indices: view.indices.slice(),
  });
  // The simplifier folds a few triangles onto each other now and then.
  const proxy = matesOf(simple).closed ? simple : mendTopology(simple).mesh;
  return {
    mesh: proxy,
    isClosed: matesOf(proxy).closed,
    deviation: bvh && largerDeviation(mesh, bvh, proxy),
  };
}

function largerDeviation(mesh: TriangleMesh, bvh: MeshBVH, proxy: TriangleMesh): Deviation | null {
  const there = surfaceDeviation(proxy, bvh, samples);
  const back = surfaceDeviation(mesh, buildBvh(proxy), samples);
  if (!there || !back) return null;
  return {
    mean: Math.max(there.mean, back.mean),
    p95: Math.max(there.p95, back.p95),
    max: Math.max(there.max, back.max),
    samples: 2 * samples,
  };
}
