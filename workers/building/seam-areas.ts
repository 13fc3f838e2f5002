import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane, type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type CrossSection, type Solids, type SolidScope } from '../solids/solid-kernel.js';
import { loopsOf } from '../solids/regions.js';
import { type Cap, capsOf } from '../../shared/geometry/sections/cap-loops.js';
import { seamPlane, type SeamPlane, toPlane } from '../../shared/geometry/sections/seam-plane.js';
import { outlinePairs } from './seam-outlines.js';

/** Where two pieces only graze each other there is nothing to glue; smaller overlaps are no seam. */
export const LEAST_SEAM_MM2 = 0.01;

/** A region where two pieces meet, in the assembled model. */
export interface SeamRegion {
  between: [string, string];
  areaMm2: number;
  /** Number of the cut, from 1, in the tree's order. */
  cut: number;
  /** Its outline as line pairs, flat xyz of both ends, mm. */
  outline: Float32Array;
  /** The pieces on the side that the cut's normal points to, and on the other. */
  above: string;
  below: string;
  /** Coordinates in the seam's plane; all seams of a cut share them. */
  plane: SeamPlane;
  /** The cut's normal. */
  normal: Vector3;
  /** In these coordinates, flat xy, mm: outers counter-clockwise, holes clockwise. */
  region: Float64Array[];
}

interface NamedBody {
  name: string;
  /** Assembled frame, tagged: tag n > 0 is the cap of cut n. */
  mesh: TriangleMesh;
}

interface Face {
  name: string;
  region: CrossSection;
  bounds: { min: readonly number[]; max: readonly number[] };
}

/**
 * The seams of a plan: for each cut, the overlap of every cap above with every cap below, in the
 * cut's plane. Sorted by cut, then by the order of the bodies.
 * @param planes the cuts in the tree's numbering, as they were really made
 */
export function findSeams(
  bodies: readonly NamedBody[],
  planes: readonly Plane[],
  solids: Solids,
  onCut: (done: number, total: number) => void = () => {},
): SeamRegion[] {
  const capsByCut: { body: NamedBody; cap: Cap }[][] = planes.map(() => []);
  for (const body of bodies)
    for (const cap of capsOf(body.mesh)) capsByCut[cap.cut - 1]?.push({ body, cap });
  const order = new Map(bodies.map((body, index) => [body.name, index]));
  return planes.flatMap((plane, index) => {
    onCut(index, planes.length);
    const seams = solids.withSolids((scope) => seamsOfCut(scope, plane, capsByCut[index]));
    return seams
      .map((seam) => ({ ...seam, cut: index + 1, between: inOrder(seam.between, order) }))
      .sort(
        (a, b) =>
          order.get(a.between[0])! - order.get(b.between[0])! ||
          order.get(a.between[1])! - order.get(b.between[1])!,
      );
  });
}

function seamsOfCut(
  scope: SolidScope,
  plane: Plane,
  caps: readonly { body: NamedBody; cap: Cap }[],
): Omit<SeamRegion, 'cut'>[] {
  const first = caps[0];
  if (!first) return [];
  const at = 3 * first.body.mesh.indices[3 * first.cap.triangles[0]];
  const p = first.body.mesh.positions;
  const frame = seamPlane(plane, [p[at], p[at + 1], p[at + 2]]);
  const above: Face[] = [];
  const below: Face[] = [];
  for (const { body, cap } of caps) {
    const loops = cap.loops.map((loop) =>
      loop.map((vertex) => toPlane(frame, body.mesh.positions, 3 * vertex)),
    );
    const region = scope.keep(new scope.CrossSection(loops, 'EvenOdd'));
    const face: Face = { name: body.name, region, bounds: region.bounds() };
    // A cap's outward side looks out of its body: along the normal from below the plane.
    (facesAlong(body.mesh, cap, frame) ? below : above).push(face);
  }
  const seams: Omit<SeamRegion, 'cut'>[] = [];
  for (const upper of above)
    for (const lower of below) {
      if (!boundsMeet(upper.bounds, lower.bounds)) continue;
      const shared = scope.keep(upper.region.intersect(lower.region));
      const areaMm2 = shared.area();
      if (!(areaMm2 > LEAST_SEAM_MM2)) continue;
      const outline = outlinePairs(shared.toPolygons(), frame, LEAST_SEAM_MM2);
      seams.push({
        between: [upper.name, lower.name],
        areaMm2,
        outline,
        above: upper.name,
        below: lower.name,
        plane: frame,
        normal: plane.normal,
        region: loopsOf(scope, shared),
      });
    }
  return seams;
}

/** Whether the cap's triangles turn counter-clockwise in the frame, taken together. */
function facesAlong(mesh: TriangleMesh, cap: Cap, frame: SeamPlane): boolean {
  let doubled = 0;
  for (const triangle of cap.triangles) {
    const [a, b, c] = [0, 1, 2].map((k) =>
      toPlane(frame, mesh.positions, 3 * mesh.indices[3 * triangle + k]),
    );
    doubled += (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]);
  }
  return doubled > 0;
}

function boundsMeet(a: Face['bounds'], b: Face['bounds']): boolean {
  return a.min[0] < b.max[0] && b.min[0] < a.max[0] && a.min[1] < b.max[1] && b.min[1] < a.max[1];
}

function inOrder(
  [a, b]: readonly [string, string],
  order: ReadonlyMap<string, number>,
): [string, string] {
  return order.get(a)! <= order.get(b)! ? [a, b] : [b, a];
}
