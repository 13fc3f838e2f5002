/**
 * An indexed triangle mesh. Lengths in mm unless a function says otherwise; triangles wind
 * counter-clockwise seen from outside.
 */
export interface TriangleMesh {
  /** Flat xyz, length 3 × vertex count. */
  readonly positions: Float64Array;
  /** Vertex indices, length 3 × triangle count. */
  readonly indices: Uint32Array;
  /**
   * Where each triangle comes from, length = triangle count: 0 is the model's own surface,
   * n > 0 is the cap left by cut n. Absent means all 0.
   */
  readonly tags?: Int32Array;
}

export function triangleCount(mesh: TriangleMesh): number {
  return mesh.indices.length / 3;
}

export function vertexCount(mesh: TriangleMesh): number {
  return mesh.positions.length / 3;
}
