import manifoldModule from 'manifold-3d';
import { type PolygonTriangulator } from '../../shared/geometry/cutting/cut-mesh.js';

/** The WASM package itself, for comparisons; `workers/solids` is the product's own door to it. */
export async function loadManifold() {
  const module = await manifoldModule();
  module.setup();
  return module;
}

export type ManifoldModule = Awaited<ReturnType<typeof loadManifold>>;

/** manifold-3d's triangulation of polygons behind the kernel's interface. */
export function manifoldTriangulator(module: ManifoldModule): PolygonTriangulator {
  return (loops) => {
    const polygons = loops.map((loop) => {
      const points: [number, number][] = [];
      for (let i = 0; i < loop.length; i += 2) points.push([loop[i]!, loop[i + 1]!]);
      return points;
    });
    return Uint32Array.from(module.triangulate(polygons).flat());
  };
}
