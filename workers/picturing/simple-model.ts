import type { MeshBVH } from 'three-mesh-bvh';
import { dropUnusedVertices } from '../../shared/geometry/mesh/compact.js';
import { matesOf } from '../../shared/geometry/mesh/edge-mates.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { Deviation } from '../../shared/jobs/model-inspect.js';
import { surfaceDeviation } from '../measuring/surface-deviation.js';
import { buildBvh } from '../measuring/triangle-bvh.js';
import { mendTopology } from '../mending/mend-topology.js';
import { simplifyForView } from './simplify-for-view.js';
import { drawThumbnail } from './thumbnail.js';
import { wallsOfVertices } from './vertex-walls.js';

/** Triangles of the mesh that is planned and looked at. */
export const mostTriangles = 60_000;
/** Points at which a deviation is measured, each way. */
export const deviationSamples = 4000;

/** A mesh of at most about 60 000 triangles in place of a larger one. Plain data: it crosses threads. */
export interface SimpleModel {
  readonly mesh: TriangleMesh;
  /** Whether every edge of it is used once each way. */
  readonly isClosed: boolean;
  /** How far the larger mesh lies from this one; null when it has no area. */
  readonly deviation: Deviation | null;
  /** PNG. */
  readonly thumbnail: Uint8Array;
}

/** What is measured on a simple model against the solid that it stands for. Plain data, too. */
export interface SimpleMeasures {
  /** How far the simple model lies from the solid; null when it has no area. */
  readonly deviation: Deviation | null;
  /** Thickness of the solid at every vertex, in its unit; 0 where no wall was met. */
  readonly walls: Float32Array;
}

/** Simplifies a mesh of more than 60 000 triangles. The same mesh gives the same one; it is not changed. */
export async function makeSimpleModel(mesh: TriangleMesh): Promise<SimpleModel> {
  const view = await simplifyForView(mesh, mostTriangles);
  const simple = dropUnusedVertices({
    positions: new Float64Array(view.positions),
    indices: view.indices.slice(),
  });
  // The simplifier folds a few triangles onto each other now and then.
  const made = matesOf(simple).closed ? simple : mendTopology(simple).mesh;
  return {
    mesh: made,
    isClosed: matesOf(made).closed,
    deviation: surfaceDeviation(mesh, buildBvh(made), deviationSamples),
    thumbnail: drawThumbnail(made),
  };
}

/** Measures a simple model. @param bvh over the mesh that it was made of, closed and facing outward */
export function measureSimpleModel(simple: TriangleMesh, bvh: MeshBVH): SimpleMeasures {
  return {
    deviation: surfaceDeviation(simple, bvh, deviationSamples),
    walls: wallsOfVertices(simple, bvh),
  };
}
