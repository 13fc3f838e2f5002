import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { chainLoops } from '../sections/chain-loops.js';
import { type Plane } from '../vectors/plane.js';
import { planeFrame } from '../vectors/plane-frame.js';
import { ABOVE, BELOW, defaultSnapMm, ON, tellSides } from './plane-sides.js';
import { capSection, flattenNodes, type PolygonTriangulator } from './section-cap.js';
import { linkSection } from './section-links.js';
import { placeSectionNodes } from './section-nodes.js';
import { collectSide, numberOwnVertices } from './side-mesh.js';

export { type PolygonTriangulator } from './section-cap.js';

export interface CutOptions {
  readonly triangulate: PolygonTriangulator;
  /** Tag of the cap's triangles, above 0. */
  readonly capTag: number;
  /** Vertices this close to the plane lie on it, mm; by default 1e-9 of the box's largest side. */
  readonly snapMm?: number;
}

export interface CutResult {
  readonly above: TriangleMesh;
  readonly below: TriangleMesh;
  /** Triangles of one cap; both sides have equally many. */
  readonly capTriangles: number;
  readonly sectionAreaMm2: number;
}

/**
 * Cuts a closed, outward-oriented mesh (mm) along a plane into two closed meshes; either may be
 * empty. A side that keeps the whole mesh is the mesh itself, otherwise nothing is shared and
 * nothing is mutated. Caps match: the same vertices on both sides.
 *
 * A vertex on the plane (within `snapMm`) is used by both sides as it is, so no sliver and no
 * second vertex arises next to it. A triangle in the plane goes to the side where its solid lies:
 * cutting along a face leaves no sheet of no thickness. Where surfaces touch the plane in an edge
 * from one side only, the edge gets no cap. What cannot be closed by index: a side whose own
 * surface touches its cap along an edge uses that edge four times; placeCut moves such planes.
 *
 * An open mesh is cut as well, but a border that reaches the plane leaves its loop uncapped.
 * O(vertices + triangles) beside the triangulation of the cap.
 */
export function cutMesh(mesh: TriangleMesh, plane: Plane, options: CutOptions): CutResult {
  const snapMm = options.snapMm ?? defaultSnapMm(mesh.positions);
  const sides = tellSides(mesh, plane, snapMm);
  const { counts } = sides;
  const crossing = counts[ABOVE | BELOW] + counts[ABOVE | BELOW | ON];
  if (crossing + counts[ABOVE] + counts[ABOVE | ON] === 0) {
    return { above: emptyMesh(), below: mesh, capTriangles: 0, sectionAreaMm2: 0 };
  }
  if (crossing + counts[BELOW] + counts[BELOW | ON] === 0) {
    return { above: mesh, below: emptyMesh(), capTriangles: 0, sectionAreaMm2: 0 };
  }
  const nodes = placeSectionNodes(mesh, plane, sides);
  const links = linkSection(mesh, sides, nodes);
  const xy = flattenNodes(nodes, planeFrame(plane.normal));
  const loops = chainLoops(links.from, links.to, links.count, xy);
  const cap = capSection(loops, xy, options.triangulate);
  const numbers = numberOwnVertices(sides.vertices);
  const parts = { mesh, sides, nodes, cap: cap.triangles, capTag: options.capTag, numbers };
  return {
    above: collectSide(parts, ABOVE),
    below: collectSide(parts, BELOW),
    capTriangles: cap.triangles.length / 3,
    sectionAreaMm2: cap.areaMm2,
  };
}

function emptyMesh(): TriangleMesh {
  return {
    positions: new Float64Array(0),
    indices: new Uint32Array(0),
    tags: new Int32Array(0),
  };
}
