import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { MeshFormat } from '../../shared/jobs/model-inspect.js';

/** What a file holds, whatever its format. Lengths in file units. */
export interface MeshReading {
  readonly format: MeshFormat;
  /** Corners with equal coordinates share a vertex; facets with two corners in one are left out. */
  readonly mesh: TriangleMesh;
  /** Facets as the file lists them, of the parts that were taken; polygons as their triangles. */
  readonly facetsRead: number;
  /** Facets left out because two of their corners are the same point. */
  readonly degenerateDropped: number;
  /** The unit that the file states; null when it states none. */
  readonly fileUnit: { readonly name: string; readonly millimetres: number } | null;
  /** Items or objects that a person can choose from; empty when there is at most one. */
  readonly parts: readonly {
    readonly name: string;
    readonly facets: number;
    readonly isTaken: boolean;
  }[];
  /** What was odd but harmless, in sentences. */
  readonly notes: readonly string[];
  readonly timingsMs: { readonly parse: number; readonly weld: number };
}
