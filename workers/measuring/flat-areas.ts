import { facetNormal } from '../../shared/geometry/mesh/facet-normal.js';
import { matesOf } from '../../shared/geometry/mesh/edge-mates.js';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { FlatArea } from '../../shared/jobs/model-inspect.js';
import { sampleSurface } from './surface-samples.js';
import { Workspace } from './workspace.js';

const mostFlats = 12;
/** A flat area has at least this share of the surface. */
const leastShare = 0.01;
/** Facets whose normals differ by less than this sine belong to one plane: a tenth of a degree. Own choice. */
const sineTolerance = 0.00175;
/** How far a corner may lie off the plane, as a share of the box's diagonal. Own choice. */
const offsetShare = 2e-5;
/** Facets are first sorted roughly by direction into bins of about this sine. */
const binSine = 0.02;

/**
 * The largest plane regions of a surface, connected over edges: at most 12, each with 1 % of the
 * surface or more, the largest first. Lengths in the mesh's unit. O(triangles).
 */
export function findFlats(mesh: TriangleMesh, diagonal: number): FlatArea[] {
  if (!mayHaveFlats(mesh, diagonal)) return [];
  const facets = mesh.indices.length / 3;
  const workspace = new Workspace(bytesAFacet * facets + 8 * binsASide ** 3 + 64);
  const { bins, areas, total } = sortByDirection(mesh, workspace);
  const candidates = candidateFacets(bins, areas, total, workspace);
  if (candidates.length === 0) return [];
  const normals = facetNormals(mesh, workspace);
  const { mates } = matesOf(mesh);
  const seen = new Uint8Array(areas.length);
  const queue: number[] = [];
  const flats: FlatArea[] = [];
  // Large facets give the steadiest normals.
  candidates.sort((a, b) => areas[b] - areas[a] || a - b);
  for (const seed of candidates) {
    if (seen[seed] === 1) continue;
    queue.length = 0;
    queue.push(seed);
    seen[seed] = 1;
    const sum = { area: 0, x: 0, y: 0, z: 0 };
    for (let at = 0; at < queue.length; at++) {
      const triangle = queue[at];
      addMiddle(mesh, triangle, areas[triangle], sum);
      for (let side = 3 * triangle; side < 3 * triangle + 3; side++) {
        const other = mates[side] < 0 ? -1 : (mates[side] / 3) | 0;
        if (other < 0 || seen[other] === 1) continue;
        if (!liesInPlane(mesh, normals, seed, other, offsetShare * diagonal)) continue;
        seen[other] = 1;
        queue.push(other);
      }
    }
    if (sum.area < leastShare * total) continue;
    flats.push({
      area: sum.area,
      normal: [normals[3 * seed], normals[3 * seed + 1], normals[3 * seed + 2]],
      centre: [sum.x / sum.area, sum.y / sum.area, sum.z / sum.area],
    });
  }
  return flats.sort((a, b) => b.area - a.area).slice(0, mostFlats);
}

/** Samples of the surface: on a flat area of the least size there are this many. */
const samplesAFlat = 160;
/** Bins for the samples, a little wider than the samples of one flat differ: in each part of the normal by
 *  twice `sineTolerance`, in the distance from the middle of the box by that much of half its diagonal. */
const sampleSine = 0.004;
const sampleOffsetShare = 0.004;
/** A flat may straddle two bins in each part of the normal and in the distance, 16 together, which leaves
 *  10 samples in the fullest. A few fewer, because samples fall a little unevenly. */
const leastInOneBin = 8;

/**
 * A quick look before all facets are gone through: on every flat area some samples have one direction
 * and lie in one plane. It may say yes where there are none.
 */
function mayHaveFlats(mesh: TriangleMesh, diagonal: number): boolean {
  const { count, points, triangles } = sampleSurface(mesh, samplesAFlat / leastShare);
  const { min, max } = boundingBox(mesh.positions);
  const side = Math.ceil(2 / sampleSine) + 1;
  const bins = new Float64Array(count);
  const normal = new Float64Array(3);
  for (let i = 0; i < count; i++) {
    facetNormal(mesh.positions, mesh.indices, 3 * triangles[i], normal, 0);
    let offset = 0;
    let bin = 0;
    for (let axis = 0; axis < 3; axis++) {
      offset += normal[axis] * (points[3 * i + axis] - (min[axis] + max[axis]) / 2);
      bin = side * bin + Math.floor((normal[axis] + 1) / sampleSine);
    }
    bins[i] = side * bin + Math.floor((offset / diagonal + 1) / sampleOffsetShare);
  }
  bins.sort();
  for (let i = leastInOneBin - 1; i < count; i++)
    if (bins[i] === bins[i - leastInOneBin + 1]) return true;
  return false;
}

const binsASide = Math.ceil(2 / binSine) + 1;
/** What `findFlats` takes of a workspace: bin, area and normal. */
const bytesAFacet = 4 + 8 + 24;

/** The bin of every facet's direction, its area, and the sum of the areas. */
function sortByDirection({ positions, indices }: TriangleMesh, workspace: Workspace) {
  const triangles = indices.length / 3;
  const bins = workspace.naturals(triangles);
  const areas = workspace.doubles(triangles);
  const normal = new Float64Array(3);
  let total = 0;
  for (let triangle = 0; triangle < triangles; triangle++) {
    const area = facetNormal(positions, indices, 3 * triangle, normal, 0);
    const x = Math.floor((normal[0] + 1) / binSine);
    const y = Math.floor((normal[1] + 1) / binSine);
    const z = Math.floor((normal[2] + 1) / binSine);
    bins[triangle] = (x * binsASide + y) * binsASide + z;
    areas[triangle] = area;
    total += area;
  }
  return { bins, areas, total };
}

function facetNormals({ positions, indices }: TriangleMesh, workspace: Workspace): Float64Array {
  const normals = workspace.doubles(indices.length);
  for (let at = 0; at < indices.length; at += 3) facetNormal(positions, indices, at, normals, at);
  return normals;
}

/** Facets in directions that have enough area for a flat; a plane may straddle up to eight bins. */
function candidateFacets(
  bins: Uint32Array,
  areas: Float64Array,
  total: number,
  workspace: Workspace,
): number[] {
  const sums = workspace.doubles(binsASide ** 3).fill(0);
  for (let triangle = 0; triangle < areas.length; triangle++)
    sums[bins[triangle]] += areas[triangle];
  const least = (leastShare * total) / 8;
  const found: number[] = [];
  for (let triangle = 0; triangle < areas.length; triangle++)
    if (areas[triangle] > 0 && sums[bins[triangle]] >= least) found.push(triangle);
  return found;
}

function liesInPlane(
  { positions, indices }: TriangleMesh,
  normals: Float64Array,
  seed: number,
  other: number,
  tolerance: number,
): boolean {
  const nx = normals[3 * seed];
  const ny = normals[3 * seed + 1];
  const nz = normals[3 * seed + 2];
  const cosine =
    nx * normals[3 * other] + ny * normals[3 * other + 1] + nz * normals[3 * other + 2];
  // Facets without area have no normal and go by their corners alone.
  if (cosine !== 0 && !(cosine > 0 && 1 - cosine * cosine < sineTolerance * sineTolerance))
    return false;
  const origin = 3 * indices[3 * seed];
  for (let corner = 0; corner < 3; corner++) {
    const at = 3 * indices[3 * other + corner];
    const offset =
      nx * (positions[at] - positions[origin]) +
      ny * (positions[at + 1] - positions[origin + 1]) +
      nz * (positions[at + 2] - positions[origin + 2]);
    if (Math.abs(offset) > tolerance) return false;
  }
  return true;
}

function addMiddle(
  { positions, indices }: TriangleMesh,
  triangle: number,
  area: number,
  sum: { area: number; x: number; y: number; z: number },
): void {
  sum.area += area;
  for (let corner = 0; corner < 3; corner++) {
    const at = 3 * indices[3 * triangle + corner];
    sum.x += (area * positions[at]) / 3;
    sum.y += (area * positions[at + 1]) / 3;
    sum.z += (area * positions[at + 2]) / 3;
  }
}
