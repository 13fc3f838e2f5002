import { Box3, Vector3 } from 'three';
import type { MeshBVH } from 'three-mesh-bvh';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Segment, SurfacePoints, TieError } from './surface-points.js';

/** More pairs than this are better served by a re-mesh. Own choice. */
const mostPairs = 200_000;

/** Which triangles cross, and in what. */
export interface CrossedTriangles {
  readonly points: SurfacePoints;
  readonly segments: { readonly of: (one: number, other: number) => Segment | undefined };
  /** For each crossed triangle those that cross it. */
  readonly ofTriangle: ReadonlyMap<number, readonly number[]>;
}

/**
 * All crossings that hang together with the given ones, found by exact tests: what only touches
 * within a tolerance elsewhere counts here too, for a crossing line has to close.
 * @param seeds triangles to begin with. Throws a TieError where exact tests meet a tie.
 */
export function listCrossed(
  mesh: TriangleMesh,
  bvh: MeshBVH,
  seeds: Uint32Array,
): CrossedTriangles {
  const points = new SurfacePoints(mesh);
  const triangles = mesh.indices.length / 3;
  const found = new Map<number, Segment>();
  const keyOf = (one: number, other: number) =>
    one < other ? one * triangles + other : other * triangles + one;
  const ofTriangle = new Map<number, number[]>();
  const queue = [...new Set(seeds)];
  const seen = new Set(queue);
  const tested = new Set<number>();
  const box = new Box3();
  for (let next = queue.pop(); next !== undefined; next = queue.pop()) {
    const triangle = next;
    boxOf(mesh, triangle, box);
    bvh.shapecast({
      intersectsBounds: (bounds) => bounds.intersectsBox(box),
      intersectsTriangle: (_, other) => {
        if (other === triangle) return false;
        const key = keyOf(triangle, other);
        if (tested.has(key)) return false;
        tested.add(key);
        const segment = points.segmentOf(triangle, other);
        if (!segment) return false;
        found.set(key, segment);
        if (found.size > mostPairs) throw new TieError('Too many crossings.');
        for (const [one, its] of [
          [triangle, other],
          [other, triangle],
        ]) {
          const list = ofTriangle.get(one);
          if (list) list.push(its);
          else ofTriangle.set(one, [its]);
        }
        if (!seen.has(other)) {
          seen.add(other);
          queue.push(other);
        }
        return false;
      },
    });
  }
  return { points, segments: { of: (one, other) => found.get(keyOf(one, other)) }, ofTriangle };
}

const corner = new Vector3();

function boxOf({ positions, indices }: TriangleMesh, triangle: number, box: Box3): void {
  box.makeEmpty();
  for (let k = 0; k < 3; k++)
    box.expandByPoint(corner.fromArray(positions, 3 * indices[3 * triangle + k]));
}
