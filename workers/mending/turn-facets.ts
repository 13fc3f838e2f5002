import { mateEdges, OPEN } from '../../shared/geometry/mesh/edge-mates.js';
import { facetArea } from '../../shared/geometry/mesh/facet-normal.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

export interface TurnedFacets {
  readonly mesh: TriangleMesh;
  /** Facets that were turned to agree with their neighbours. */
  readonly turned: number;
  /** Edges at which a surface with one side only (a Möbius band) contradicts itself. */
  readonly contradictions: readonly number[];
  /** Some of the turned facets. */
  readonly examples: readonly number[];
}

const mostExamples = 20;

/**
 * Makes the facets of every connected surface agree on which side is outside: the smaller area is
 * turned. Facets that meet in an open or crowded edge do not have to agree. Surfaces are not turned as
 * a whole. Returns the mesh itself when all agree.
 */
export function turnFacets(mesh: TriangleMesh): TurnedFacets {
  const { mates, misorientedEdges } = mateEdges(mesh.indices);
  if (misorientedEdges === 0) return { mesh, turned: 0, contradictions: [], examples: [] };
  const { isTurned, contradictions } = agree(mesh, mates);
  const indices = mesh.indices.slice();
  const examples: number[] = [];
  let turned = 0;
  for (let triangle = 0; triangle < isTurned.length; triangle++) {
    if (isTurned[triangle] === 0) continue;
    turned++;
    if (examples.length < mostExamples) examples.push(triangle);
    turnTriangle(indices, triangle);
  }
  return { mesh: { positions: mesh.positions, indices }, turned, contradictions, examples };
}

/** Turns one triangle round, in place. */
export function turnTriangle(indices: Uint32Array, triangle: number): void {
  const second = indices[3 * triangle + 1];
  indices[3 * triangle + 1] = indices[3 * triangle + 2];
  indices[3 * triangle + 2] = second;
}

/** Walks over each surface from its first triangle; then the smaller share of its area is turned. */
function agree({ positions, indices }: TriangleMesh, mates: Int32Array) {
  const triangles = indices.length / 3;
  const isTurned = new Uint8Array(triangles);
  const seen = new Uint8Array(triangles);
  const queue = new Int32Array(triangles);
  const contradictions: number[] = [];
  for (let first = 0; first < triangles; first++) {
    if (seen[first] === 1) continue;
    seen[first] = 1;
    let end = 0;
    let kept = 0;
    let turned = 0;
    queue[end++] = first;
    for (let at = 0; at < end; at++) {
      const triangle = queue[at];
      const area = facetArea(positions, indices, 3 * triangle);
      if (isTurned[triangle] === 1) turned += area;
      else kept += area;
      for (let side = 3 * triangle; side < 3 * triangle + 3; side++) {
        const mate = mates[side];
        if (mate < 0) continue;
        const other = (mate / 3) | 0;
        const isSame = indices[side] === indices[mate];
        const wanted = isSame ? 1 - isTurned[triangle] : isTurned[triangle];
        if (seen[other] === 0) {
          seen[other] = 1;
          isTurned[other] = wanted;
          queue[end++] = other;
        } else if (isTurned[other] !== wanted && side < mate) contradictions.push(side);
      }
    }
    if (turned <= kept) continue;
    for (let at = 0; at < end; at++) isTurned[queue[at]] ^= 1;
  }
  return { isTurned, contradictions };
}

/**
 * A surface has an inside when it encloses this share of what a ball of its area does. Flatter ones,
 * single facets above all, keep the side that they have. Own choice.
 */
const leastBulge = 0.01;

function ballVolume(area: number): number {
  return area ** 1.5 / (6 * Math.sqrt(Math.PI));
}

/**
 * Turns open surfaces outward as a whole where their volume, with every rim closed by a fan from the
 * rims' middle, is negative. Closed surfaces are left to the nesting of shells. @returns a mesh of
 * its own when something was turned
 */
export function turnOpenSurfaces(
  mesh: TriangleMesh,
  surfaces: { readonly labels: Int32Array; readonly count: number },
  mates: Int32Array,
): { mesh: TriangleMesh; turned: number } {
  const { positions, indices } = mesh;
  const rims = new Float64Array(4 * surfaces.count);
  for (let side = 0; side < mates.length; side++) {
    if (mates[side] !== OPEN) continue;
    const at = 4 * surfaces.labels[(side / 3) | 0];
    for (let axis = 0; axis < 3; axis++) rims[at + axis] += positions[3 * indices[side] + axis];
    rims[at + 3]++;
  }
  const volumes = new Float64Array(surfaces.count);
  const areas = new Float64Array(surfaces.count);
  for (let triangle = 0; triangle < surfaces.labels.length; triangle++) {
    const surface = surfaces.labels[triangle];
    const count = rims[4 * surface + 3];
    if (count === 0) continue;
    areas[surface] += facetArea(positions, indices, 3 * triangle);
    // Seen from the rims' middle the fans add nothing.
    volumes[surface] += sixfoldVolume(positions, indices, 3 * triangle, [
      rims[4 * surface] / count,
      rims[4 * surface + 1] / count,
      rims[4 * surface + 2] / count,
    ]);
  }
  const isInward = Array.from(
    volumes,
    (sixfold, surface) => sixfold / 6 < -leastBulge * ballVolume(areas[surface]),
  );
  const turned = isInward.filter(Boolean).length;
  if (turned === 0) return { mesh, turned };
  const outward = indices.slice();
  for (let triangle = 0; triangle < surfaces.labels.length; triangle++)
    if (isInward[surfaces.labels[triangle]]) turnTriangle(outward, triangle);
  return { mesh: { positions, indices: outward }, turned };
}

function sixfoldVolume(
  positions: Float64Array,
  indices: Uint32Array,
  at: number,
  [ox, oy, oz]: readonly [number, number, number],
): number {
  const a = 3 * indices[at];
  const b = 3 * indices[at + 1];
  const c = 3 * indices[at + 2];
  const bx = positions[b] - ox;
  const by = positions[b + 1] - oy;
  const bz = positions[b + 2] - oz;
  const cx = positions[c] - ox;
  const cy = positions[c + 1] - oy;
  const cz = positions[c + 2] - oz;
  return (
    (positions[a] - ox) * (by * cz - bz * cy) +
    (positions[a + 1] - oy) * (bz * cx - bx * cz) +
    (positions[a + 2] - oz) * (bx * cy - by * cx)
  );
}
