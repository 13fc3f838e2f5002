import { MeshoptSimplifier } from 'meshoptimizer/simplifier';
import { dropUnusedVertices } from '../../shared/geometry/mesh/compact.js';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import { triangleCount, type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

// The simplifier is WASM; waiting for it here keeps planning itself synchronous.
await MeshoptSimplifier.ready;

/** Trial cuts cost time per triangle: more than this are simplified away first. */
export const PROXY_TRIANGLES = 6_000;
/** The proxy may lie off the model by this share of its size, and no more. */
const MOST_DEVIATION = 0.002;

export interface Proxy {
  readonly mesh: TriangleMesh;
  /** Estimated distance between the proxy's and the model's surfaces, mm; 0 for the model itself. */
  readonly deviationMm: number;
}

/**
 * A light stand-in for a model to search on: closed like the model, its vertices a subset of the
 * model's, at most about PROXY_TRIANGLES triangles when the deviation allows. The model itself
 * when it is light already or when simplifying would open it.
 * Method: quadric edge collapse of meshoptimizer; its error is an estimate.
 */
export function makeProxy(mesh: TriangleMesh, triangles = PROXY_TRIANGLES): Proxy {
  if (triangleCount(mesh) <= triangles) return { mesh, deviationMm: 0 };
  const { min, size } = boundingBox(mesh.positions);
  const positions = new Float32Array(mesh.positions.length);
  for (let k = 0; k < positions.length; k++) positions[k] = mesh.positions[k] - min[k % 3];
  const [indices, error] = MeshoptSimplifier.simplify(
    new Uint32Array(mesh.indices),
    positions,
    3,
    3 * triangles,
    MOST_DEVIATION,
  );
  const simpler = dropUnusedVertices({ positions: mesh.positions, indices });
  if (indices.length === 0 || !edgeReport(simpler).closed) return { mesh, deviationMm: 0 };
  return { mesh: simpler, deviationMm: error * Math.max(...size) };
}
