import manifoldModule from 'manifold-3d';
import { type PolygonTriangulator } from '../../shared/geometry/cutting/cut-mesh.js';
import { createTriangulator } from '../../workers/solids/triangulate-loops.js';

/** The WASM package itself, for comparisons; `workers/solids` is the product's own door to it. */
export async function loadManifold() {
  const module = await manifoldModule();
  module.setup();
  return module;
}

export type ManifoldModule = Awaited<ReturnType<typeof loadManifold>>;

/** The product's cap triangulation on a module that the test has loaded. */
export function manifoldTriangulator(module: ManifoldModule): PolygonTriangulator {
  return createTriangulator(module);
}
