import { BufferAttribute, BufferGeometry } from 'three';
import { MeshBVH, type SerializedBVH } from 'three-mesh-bvh';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/**
 * A bounding volume hierarchy over a mesh's triangles. Indirect: the triangles keep their numbers.
 * Coordinates are kept in double precision, so distances are not rounded to float32; the boxes of
 * the tree are float32, padded by three-mesh-bvh. At least one triangle.
 * @param inSharedMemory whether another thread can read the tree without a copy, see `plainTree`
 */
export function buildBvh(
  mesh: TriangleMesh,
  { inSharedMemory = false }: { readonly inSharedMemory?: boolean } = {},
): MeshBVH {
  return new MeshBVH(geometryOf(mesh), {
    indirect: true,
    targetLeafSize: 8,
    useSharedArrayBuffer: inSharedMemory,
  } as never);
}

/** The tree as plain data that crosses threads, without its mesh. Its memory stays that of the tree. */
export function plainTree(bvh: MeshBVH): SerializedBVH {
  return { ...MeshBVH.serialize(bvh, { cloneBuffers: false }), index: null };
}

/** The tree that `plainTree` was made of, over the same mesh or a copy of it; nothing is built. */
export function bvhOfPlainTree(mesh: TriangleMesh, tree: SerializedBVH): MeshBVH {
  return MeshBVH.deserialize(tree, geometryOf(mesh), { setIndex: false });
}

function geometryOf({ positions, indices }: TriangleMesh): BufferGeometry {
  const geometry = new BufferGeometry();
  geometry.setAttribute('position', new BufferAttribute(positions, 3));
  geometry.setIndex(new BufferAttribute(indices, 1));
  return geometry;
}
