import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import type { Solids } from '../../solids/solid-kernel.js';
import { joinMeshes } from './mesh-parts.js';

/** A closed solid, which may hold hollows, and solids to be taken away from it. */
export interface UnionPart {
  readonly mesh: TriangleMesh;
  readonly without: readonly TriangleMesh[];
}

/**
 * The union of closed solids that do not cross themselves, by manifold-3d. Its coordinates are float32,
 * so the solids are moved to the middle of their common box: the error is at most 6e-8 of the box. Null
 * when it does not take one of them or the union is empty.
 */
export function uniteMeshes(parts: readonly UnionPart[], solids: Solids): TriangleMesh | null {
  const { min, size } = boundingBox(joinMeshes(parts.map(({ mesh }) => mesh)).positions);
  const middle = [0, 1, 2].map((axis) => min[axis] + size[axis] / 2);
  return solids.withSolids(({ Manifold, Mesh, keep }) => {
    const take = ({ positions, indices }: TriangleMesh) => {
      const vertProperties = Float32Array.from(positions, (value, i) => value - middle[i % 3]);
      return keep(new Manifold(new Mesh({ numProp: 3, vertProperties, triVerts: indices })));
    };
    try {
      const taken = parts.map(({ mesh, without }) =>
        without.reduce((solid, hollow) => keep(solid.subtract(take(hollow))), take(mesh)),
      );
      const united = keep(Manifold.union(taken));
      if (united.isEmpty()) return null;
      const { vertProperties, triVerts, numProp } = united.getMesh();
      const positions = new Float64Array((vertProperties.length / numProp) * 3);
      for (let vertex = 0; vertex < positions.length / 3; vertex++)
        for (let axis = 0; axis < 3; axis++)
          positions[3 * vertex + axis] = vertProperties[vertex * numProp + axis] + middle[axis];
      return { positions, indices: Uint32Array.from(triVerts) };
    } catch {
      // It throws on what is no manifold to it.
      return null;
    }
  });
}
