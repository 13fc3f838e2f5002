import { MeshoptSimplifier } from 'meshoptimizer/simplifier';
import { dropUnusedVertices } from '../../shared/geometry/mesh/compact.js';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import { triangleCount, type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

// The simplifier is WASM; waiting for it here keeps planning itself synchronous.
await MeshoptSimplifier.ready;

/** Trial cuts cost time per triangle: more than this are simplified away first. */
export const PROXY_TRIANGLES = 4_000;
/** The proxy may lie off the model by this share of its size, and no more. */
const MOST_DEVIATION = 0.002;

export interface Proxy {
  readonly mesh: TriangleMesh;
  /** Estimated distance between the proxy's and the model's surfaces, mm; 0 for the model itself. */
  readonly deviationMm: number;
}

/** When simplifying that far opens the surface, this many times more triangles are tried. */
const MILDER = [1, 2.5, 6, 15];

/**
 * A light stand-in for a model to search on: closed like the model, its vertices a subset of the
 * model's, at most about `triangles` triangles when the deviation allows. The model itself when it
 * is light already or when simplifying would open it.
 * Method: quadric edge collapse of meshoptimizer; its error is an estimate.
 */
export function makeProxy(mesh: TriangleMesh, triangles = PROXY_TRIANGLES): Proxy {
  if (triangleCount(mesh) <= triangles) return { mesh, deviationMm: 0 };
  const { min, size } = boundingBox(mesh.positions);
  const positions = new Float32Array(mesh.positions.length);
  for (let k = 0; k < positions.length; k++) positions[k] = mesh.positions[k] - min[k % 3];
  for (const times of MILDER) {
    const target = Math.round(triangles * times);
    if (target >= triangleCount(mesh)) break;
    const [indices, error] = MeshoptSimplifier.simplify(
      new Uint32Array(mesh.indices),
      positions,
      3,
      3 * target,
      MOST_DEVIATION,
    );
    const simpler = dropUnusedVertices({ positions: mesh.positions, indices });
    if (indices.length > 0 && edgeReport(simpler).closed)
      return { mesh: simpler, deviationMm: error * Math.max(...size) };
  }
  return { mesh, deviationMm: 0 };
}
