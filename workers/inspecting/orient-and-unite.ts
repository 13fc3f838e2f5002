import type { MeshBVH } from 'three-mesh-bvh';
import type { Shells } from '../../shared/geometry/mesh/shells.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { findCrossings } from '../measuring/find-crossings.js';
import { buildBvh } from '../measuring/triangle-bvh.js';
import type { Mended } from '../mending/mending.js';
import { orientShells } from '../mending/orient-shells.js';
import { uniteShells } from '../mending/uniting/unite-shells.js';
import { beginMeasuring } from '../picturing/simplify-beside.js';
import { type JobContext, portionOf } from '../runtime/job-context.js';
import type { Solids } from '../solids/solid-kernel.js';

export type Crossings = ReturnType<typeof findCrossings>;

/** What is known of a closed surface that faces outward. */
export interface MadeSolid {
  readonly shells: Shells;
  readonly cavities: number;
  /** Whether it came inside out as a whole and was turned. */
  readonly turnedOutward: boolean;
  readonly bvh: MeshBVH;
  /** Those that are left. */
  readonly crossings: Crossings;
  /** Why the surfaces that cross could not be united. */
  readonly crossingRefusal: string | null;
}

/**
 * Turns the shells of a closed mesh outward by how they lie in each other, and unites what overlaps.
 * `solid` is null when no shell with a volume is left; the mesh is then the one given.
 */
export function orientAndUnite(
  mesh: TriangleMesh,
  { solids, context }: { readonly solids: Solids; readonly context: JobContext },
): Mended & { readonly solid: MadeSolid | null } {
  const oriented = orientShells(mesh);
  if (oriented.mesh.indices.length === 0)
    return { mesh, steps: oriented.steps, places: oriented.places, solid: null };
  const { shells, cavities, turnedOutward } = oriented;
  context.progress('Looking for crossings', 0.2);
  const bvh = buildBvh(oriented.mesh, { inSharedMemory: true });
  beginMeasuring(oriented.mesh, bvh);
  const crossings = findCrossings(oriented.mesh, bvh, { context: portionOf(context, 0.3, 0.6) });
  const before = { shells, cavities, turnedOutward, bvh, crossings, crossingRefusal: null };
  if (crossings.pairs === 0 && oriented.crossing === 0) return { ...oriented, solid: before };

  const united = uniteShells(oriented.mesh, {
    solids,
    crossingTriangles: crossings.triangles,
    context: portionOf(context, 0.6, 0.9),
  });
  if ('refusal' in united)
    return { ...oriented, solid: { ...before, crossingRefusal: united.refusal } };
  const whole = orientShells(united.mesh);
  const tree = buildBvh(whole.mesh);
  return {
    mesh: whole.mesh,
    steps: [...oriented.steps, ...united.steps],
    places: oriented.places,
    solid: {
      shells: whole.shells,
      cavities: whole.cavities,
      turnedOutward,
      bvh: tree,
      crossings: united.steps.length === 0 ? crossings : findCrossings(whole.mesh, tree),
      crossingRefusal: null,
    },
  };
}
