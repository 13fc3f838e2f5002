import { cubeDirections } from '../../shared/geometry/fitting/candidate-downs.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import {
  spaceDiagonal,
  spaceInWords,
  spaceVolume,
} from '../../shared/geometry/fitting/space-measures.js';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { pointsOnEdges } from './body-nodes.js';

export interface PieceBound {
  /** No plan whatever has fewer pieces. */
  readonly pieces: number;
  /** In words, with the numbers. */
  readonly reason: string;
}

/** Distances and ratios must exceed the limit by this share before they count: rounding. */
const ROUNDING = 1e-9;
/** Edge points lie this share of the diagonal apart. */
const POINT_SPACING = 1 / 16;
/** Vertices, and points on edges, looked at. */
const MOST_POINTS = 3_000;

/**
 * A proved lower bound on the number of pieces. A piece is one body, so it belongs to one solid of
 * the model and the bounds of the solids add up. For one solid: its volume over the space's, and
 * the size of a set of its surface points no two of which can lie in one piece because they are
 * farther apart than the space's diagonal, the longest line inside it.
 * @param solids the model's loose solids, exact, mm
 * @param spaces a piece may go to any: the largest volume and the longest diagonal bound it
 */
export function lowerBound(
  solids: readonly TriangleMesh[],
  spaces: readonly BuildSpace[],
): PieceBound {
  const roomiest = largest(spaces, spaceVolume);
  const longest = largest(spaces, spaceDiagonal);
  const capacity = spaceVolume(roomiest);
  const diagonal = spaceDiagonal(longest);
  let pieces = 0;
  let byVolume = 0;
  let byDistance = 0;
  let volume = 0;
  let points = 0;
  for (const solid of solids) {
    const ratio = Math.abs(signedVolume(solid)) / capacity;
    const filled = Math.max(1, Math.ceil(ratio * (1 - ROUNDING)));
    const packed = Math.max(1, farApart(solid, diagonal * (1 + ROUNDING)));
    volume += ratio * capacity;
    points += packed;
    pieces += Math.max(filled, packed);
    if (filled >= packed && filled > 1) byVolume++;
    else if (packed > 1) byDistance++;
  }
  return { pieces, reason: inWords() };

  function inWords(): string {
    const litres = (mm3: number) => `${(mm3 / 1e6).toFixed(mm3 < 1e7 ? 2 : 1)} l`;
    if (byVolume > 0 && byDistance === 0 && solids.length === 1)
      return `The solid is ${litres(volume)} and ${spaceInWords(roomiest)} hold ${litres(capacity)}.`;
    if (byDistance > 0 && byVolume === 0 && solids.length === 1)
      return `${points} points of the surface lie more than ${diagonal.toFixed(1)} mm apart from one another, the longest line inside ${spaceInWords(longest)}.`;
    if (solids.length > 1)
      return byVolume + byDistance === 0
        ? `The model has ${solids.length} loose solids.`
        : `The model has ${solids.length} loose solids, and each needs as many pieces as its volume and its length ask for.`;
    return 'Nothing in its volume or its length asks for more than one piece.';
  }
}

function largest(spaces: readonly BuildSpace[], of: (space: BuildSpace) => number): BuildSpace {
  return spaces.reduce((a, b) => (of(b) > of(a) ? b : a));
}

/** How far a plan may be from the fewest pieces possible, in words. */
export function gapInWords(pieces: number, bound: number): string {
  if (pieces <= bound) return 'No plan can have fewer.';
  const over = pieces - bound;
  return `At most ${over} ${over === 1 ? 'piece' : 'pieces'} more than the fewest possible: no plan can have fewer than ${bound}.`;
}

/**
 * Size of the largest set found of points pairwise farther apart than `distance`: points are taken
 * first come, first served in the order in which 26 sweeps and the distances from the sweeps'
 * first points meet them. Any such set proves the bound; a better one only tightens it.
 */
function farApart(mesh: TriangleMesh, distance: number): number {
  const points = Float64Array.from([
    ...thinnedVertices(mesh.positions),
    ...pointsOnEdges(mesh, distance * POINT_SPACING, MOST_POINTS),
  ]);
  const count = points.length / 3;
  const keys = new Float64Array(count);
  let most = 0;
  for (const [x, y, z] of cubeDirections) {
    let first = 0;
    for (let k = 0; k < count; k++) {
      keys[k] = x * points[3 * k] + y * points[3 * k + 1] + z * points[3 * k + 2];
      if (keys[k] < keys[first]) first = k;
    }
    most = Math.max(most, pickApart(points, keys, distance));
    for (let k = 0; k < count; k++) {
      keys[k] = Math.hypot(
        points[3 * k] - points[3 * first],
        points[3 * k + 1] - points[3 * first + 1],
        points[3 * k + 2] - points[3 * first + 2],
      );
    }
    most = Math.max(most, pickApart(points, keys, distance));
  }
  return most;
}

function thinnedVertices(positions: Float64Array): Float64Array {
  const vertices = positions.length / 3;
  if (vertices <= MOST_POINTS) return positions;
  const stride = vertices / MOST_POINTS;
  const kept = new Float64Array(3 * MOST_POINTS);
  for (let k = 0; k < MOST_POINTS; k++) {
    const from = 3 * Math.floor(k * stride);
    kept[3 * k] = positions[from];
    kept[3 * k + 1] = positions[from + 1];
    kept[3 * k + 2] = positions[from + 2];
  }
  return kept;
}

function pickApart(points: Float64Array, keys: Float64Array, distance: number): number {
  const order = Uint32Array.from({ length: keys.length }, (_, k) => k);
  order.sort((a, b) => keys[a] - keys[b] || a - b);
  const limit = distance * distance;
  const picked: number[] = [];
  for (let n = 0; n < order.length; n++) {
    const k = 3 * order[n];
    const x = points[k];
    const y = points[k + 1];
    const z = points[k + 2];
    let isApart = true;
    // The latest picked are the nearest in the sweep's order.
    for (let p = picked.length - 3; isApart && p >= 0; p -= 3) {
      const dx = picked[p] - x;
      const dy = picked[p + 1] - y;
      const dz = picked[p + 2] - z;
      isApart = dx * dx + dy * dy + dz * dz > limit;
    }
    if (isApart) picked.push(x, y, z);
  }
  return picked.length / 3;
}
