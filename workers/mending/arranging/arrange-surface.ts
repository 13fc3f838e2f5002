import { DoubleSide, Ray, Vector3 } from 'three';
import type { MeshBVH } from 'three-mesh-bvh';
import { dropUnusedVertices } from '../../../shared/geometry/mesh/compact.js';
import { groupByMates, mateEdges } from '../../../shared/geometry/mesh/edge-mates.js';
import { facetNormal } from '../../../shared/geometry/mesh/facet-normal.js';
import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { seededRandom } from '../../runtime/seeded-random.js';
import { findCrossings } from '../../measuring/find-crossings.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import { type CrossedTriangles, listCrossed } from './crossed-triangles.js';
import { splitTriangle } from './split-triangle.js';
import { type Segment, type SurfacePoints, TieError } from './surface-points.js';

/**
 * How far vertices are moved to break ties, shares of the box's diagonal: the first try moves none.
 * The largest is a ten-thousandth of a millimetre on a model of a metre.
 */
const moves = [0, 1e-10, 1e-9, 1e-8, 1e-7];
/** Facets of a patch that are asked on which side of the rest they lie. */
const votes = 3;

/**
 * The boundary of what a closed surface winds around at least once: triangles that cross are divided
 * along their crossings, the surface falls into patches there, and a patch stays when nothing lies
 * around its outer side and something around its inner one. Folds through itself, overlapping shells
 * and pockets turned inside out are dealt with alike. Vertices away from crossings keep their places;
 * where exact tests meet a tie the vertices of the crossing triangles move by up to 1e-7 of the box.
 * @param crossing triangles that cross others, any order, copies allowed
 * @returns closed and without crossings, or null when that was not reached
 */
export function arrangeSurface(mesh: TriangleMesh, crossing: Uint32Array): TriangleMesh | null {
  if (crossing.length === 0) return mesh;
  const diagonal = Math.hypot(...boundingBox(mesh.positions).size);
  for (const [attempt, share] of moves.entries()) {
    const moved = share === 0 ? mesh : moveVertices(mesh, crossing, share * diagonal, attempt);
    try {
      const arranged = arrange(moved, crossing);
      if (arranged) return arranged;
    } catch (error) {
      if (!(error instanceof TieError)) throw error;
    }
  }
  return null;
}

function arrange(mesh: TriangleMesh, crossing: Uint32Array): TriangleMesh | null {
  const bvh = buildBvh(mesh);
  const crossed = listCrossed(mesh, bvh, crossing);
  const { indices, parents } = divide(mesh, crossed);
  const positions = Float64Array.from(crossed.points.xyz);
  const { mates } = mateEdges(indices);
  const patches = groupByMates(mates);
  const kept = keptPatches({ positions, indices }, parents, patches, mesh, bvh);
  const chosen: number[] = [];
  for (let facet = 0; facet < parents.length; facet++)
    if (kept[patches.labels[facet]])
      chosen.push(indices[3 * facet], indices[3 * facet + 1], indices[3 * facet + 2]);
  if (chosen.length === 0) return null;
  const result = dropUnusedVertices({ positions, indices: Uint32Array.from(chosen) });
  if (!mateEdges(result.indices).closed) return null;
  return findCrossings(result, buildBvh(result)).pairs === 0 ? result : null;
}

/** All triangles, the crossed ones divided; for each the triangle that it is part of. */
function divide(mesh: TriangleMesh, { points, segments, ofTriangle }: CrossedTriangles) {
  const { indices } = mesh;
  const corners: number[] = [];
  const parents: number[] = [];
  for (let triangle = 0; triangle < indices.length / 3; triangle++) {
    const own = [
      indices[3 * triangle],
      indices[3 * triangle + 1],
      indices[3 * triangle + 2],
    ] as const;
    const onEdges = [0, 1, 2].map(
      (side) => points.onEdges.get(points.edgeKey(own[side], own[(side + 1) % 3])) ?? [],
    );
    const others = ofTriangle.get(triangle);
    const parts =
      others || onEdges.some((found) => found.length > 0)
        ? splitTriangle(
            points,
            own,
            onEdges,
            dividedSegments(triangle, others ?? [], segments, points),
          )
        : own;
    for (let k = 0; k < parts.length; k++) corners.push(parts[k]);
    for (let k = 0; k < parts.length; k += 3) parents.push(triangle);
  }
  return { indices: Uint32Array.from(corners), parents: Uint32Array.from(parents) };
}

/** A triangle's segments, each cut where it meets another one of them. */
function dividedSegments(
  triangle: number,
  others: readonly number[],
  segments: CrossedTriangles['segments'],
  points: SurfacePoints,
): Segment[] {
  const found: Segment[] = [];
  for (const other of others) {
    const own = segments.of(triangle, other)!;
    const inside: { point: number; share: number }[] = [];
    for (const third of others) {
      if (third === other) continue;
      const across = segments.of(other, third);
      if (!across) continue;
      const beside = segments.of(triangle, third)!;
      const point = points.triplePoint([triangle, other, third], [own, beside, across]);
      if (point !== null) inside.push({ point, share: points.share(own, points.at(point)) });
    }
    inside.sort((a, b) => a.share - b.share);
    let last = own[0];
    for (const { point } of inside) {
      found.push([last, point]);
      last = point;
    }
    found.push([last, own[1]]);
  }
  return found;
}

/** For each patch whether it bounds the solid: it winds around nothing outside it and once inside. */
function keptPatches(
  { positions, indices }: TriangleMesh,
  parents: Uint32Array,
  { labels, count }: { labels: Int32Array; count: number },
  mesh: TriangleMesh,
  bvh: MeshBVH,
): boolean[] {
  const largest: { facet: number; area: number }[][] = Array.from({ length: count }, () => []);
  const normal = new Float64Array(3);
  for (let facet = 0; facet < parents.length; facet++) {
    const area = facetNormal(positions, indices, 3 * facet, normal, 0);
    const best = largest[labels[facet]];
    if (best.length === votes && area <= best[votes - 1].area) continue;
    best.push({ facet, area });
    best.sort((a, b) => b.area - a.area);
    best.length = Math.min(votes, best.length);
  }
  return largest.map((facets) => {
    const kept = facets.filter(({ facet }) => {
      facetNormal(mesh.positions, mesh.indices, 3 * parents[facet], normal, 0);
      const middle = [0, 1, 2].map(
        (axis) =>
          (positions[3 * indices[3 * facet] + axis] +
            positions[3 * indices[3 * facet + 1] + axis] +
            positions[3 * indices[3 * facet + 2] + axis]) /
          3,
      );
      return windingOutside(middle, normal, parents[facet], mesh, bvh) === 0;
    });
    return 2 * kept.length > facets.length;
  });
}

const ray = new Ray();
const hitNormal = new Float64Array(3);
/** Rays lean a little, so that they run along no face of a box. */
const lean = [0.0137, -0.0091, 0.0173];

/** How often the mesh winds around the space just outside a point of one of its triangles. */
function windingOutside(
  at: readonly number[],
  normal: Float64Array,
  triangle: number,
  mesh: TriangleMesh,
  bvh: MeshBVH,
): number {
  ray.origin.set(at[0], at[1], at[2]);
  ray.direction
    .copy(new Vector3(normal[0] + lean[0], normal[1] + lean[1], normal[2] + lean[2]))
    .normalize();
  let winding = 0;
  for (const hit of bvh.raycast(ray, DoubleSide)) {
    if (hit.faceIndex === triangle) continue;
    facetNormal(mesh.positions, mesh.indices, 3 * hit.faceIndex!, hitNormal, 0);
    const leaving =
      hitNormal[0] * ray.direction.x +
      hitNormal[1] * ray.direction.y +
      hitNormal[2] * ray.direction.z;
    winding += leaving > 0 ? 1 : -1;
  }
  return winding;
}

function moveVertices(
  { positions, indices }: TriangleMesh,
  crossing: Uint32Array,
  reach: number,
  seed: number,
): TriangleMesh {
  const moved = positions.slice();
  const random = seededRandom(seed);
  const seen = new Set<number>();
  for (const triangle of crossing)
    for (let corner = 0; corner < 3; corner++) {
      const vertex = indices[3 * triangle + corner];
      if (seen.has(vertex)) continue;
      seen.add(vertex);
      for (let axis = 0; axis < 3; axis++) moved[3 * vertex + axis] += reach * (2 * random() - 1);
    }
  return { positions: moved, indices };
}
