import { BufferAttribute, BufferGeometry } from 'three';
import { MeshBVH } from 'three-mesh-bvh';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/**
 * A bounding volume hierarchy over a mesh's triangles. Indirect: the triangles keep their numbers.
 * Coordinates are kept in double precision, so distances are not rounded to float32; the boxes of
 * the tree are float32, padded by three-mesh-bvh. At least one triangle.
 */
export function buildBvh(mesh: TriangleMesh): MeshBVH {
  const geometry = new BufferGeometry();
  geometry.setAttribute('position', new BufferAttribute(mesh.positions, 3));
  geometry.setIndex(new BufferAttribute(mesh.indices, 1));
  return new MeshBVH(geometry, { indirect: true, targetLeafSize: 8 } as never);
}
