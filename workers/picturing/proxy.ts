import type { MeshBVH } from 'three-mesh-bvh';
import { matesOf } from '../../shared/geometry/mesh/edge-mates.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { Deviation } from '../../shared/jobs/model-inspect.js';
import { deviationSamples, mostTriangles } from './simple-model.js';
import { measuresOf, simpleModelOf } from './simplify-beside.js';
import { drawThumbnail } from './thumbnail.js';
import { wallsOfVertices } from './vertex-walls.js';

export interface Proxy {
  readonly mesh: TriangleMesh;
  /** Whether every edge of it is used once each way. */
  readonly isClosed: boolean;
  /** The larger of the distances both ways; zeros when nothing was simplified, null when not measured. */
  readonly deviation: Deviation | null;
  /** Thickness of the model at every vertex of `mesh`; 0 where no wall was met, null when not measured. */
  readonly walls: Float32Array | null;
  /** PNG. */
  readonly thumbnail: Uint8Array;
}

/**
 * A simplified mesh of at most 60 000 triangles with its measured distance from the model and the
 * model's walls. A mesh within that stays as it is. @param bvh over `mesh`; without it nothing is measured
 */
export async function makeProxy(mesh: TriangleMesh, bvh: MeshBVH | null): Promise<Proxy> {
  if (mesh.indices.length / 3 <= mostTriangles) {
    const isClosed = matesOf(mesh).closed;
    const deviation = { mean: 0, p95: 0, max: 0, samples: deviationSamples };
    const walls = bvh && wallsOfVertices(mesh, bvh);
    return { mesh, isClosed, deviation, walls, thumbnail: drawThumbnail(mesh) };
  }
  const simple = await simpleModelOf(mesh);
  const measures = bvh && (await measuresOf(simple, bvh));
  return {
    mesh: simple.mesh,
    isClosed: simple.isClosed,
    thumbnail: simple.thumbnail,
    deviation: measures && larger(measures.deviation, simple.deviation),
    walls: measures?.walls ?? null,
  };
}

function larger(there: Deviation | null, back: Deviation | null): Deviation | null {
  if (!there || !back) return null;
  return {
    mean: Math.max(there.mean, back.mean),
    p95: Math.max(there.p95, back.p95),
    max: Math.max(there.max, back.max),
    samples: 2 * deviationSamples,
  };
}
