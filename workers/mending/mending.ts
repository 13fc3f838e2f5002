import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { HoleReport, MendingStep, ProblemPlace } from '../../shared/jobs/model-inspect.js';

/** A rim of open edges with its points, for the report and for the picture. */
export interface Hole extends HoleReport {
  /** The rim's points in order, flat xyz, the first not repeated; they run as the open sides do. */
  readonly rim: Float64Array;
  /** Their numbers in the mesh. */
  readonly vertices: Uint32Array;
}

/** What one part of the mending made of a mesh. A step that had nothing to do is not listed. */
export interface Mended {
  readonly mesh: TriangleMesh;
  readonly steps: readonly MendingStep[];
  readonly places: readonly ProblemPlace[];
}
