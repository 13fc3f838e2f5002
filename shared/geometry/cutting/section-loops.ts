import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { chainLoops } from '../sections/chain-loops.js';
import { type SeamPlane, toPlane } from '../sections/seam-plane.js';
import { type Vector3 } from '../vectors/plane.js';
import { defaultSnapMm, tellSides } from './plane-sides.js';
import { linkSection } from './section-links.js';
import { placeSectionNodes } from './section-nodes.js';

/**
 * The section of a closed mesh by a plane parallel to a seam's, `heightMm` along the seam's normal
 * from it, seen in the seam's coordinates: flat xy of each loop, mm, outers counter-clockwise, holes
 * clockwise. Empty where the plane meets nothing. O(vertices + triangles).
 */
export function sectionLoops(
  mesh: TriangleMesh,
  plane: SeamPlane,
  normal: Vector3,
  heightMm: number,
): Float64Array[] {
  const [x, y, z] = plane.origin;
  const offset = normal[0] * x + normal[1] * y + normal[2] * z + heightMm;
  const level = { normal, offset };
  const sides = tellSides(mesh, level, defaultSnapMm(mesh.positions));
  const nodes = placeSectionNodes(mesh, level, sides);
  const links = linkSection(mesh, sides, nodes);
  const xy = new Float64Array(2 * nodes.count);
  for (let node = 0; node < nodes.count; node++)
    xy.set(toPlane(plane, nodes.positions, 3 * node), 2 * node);
  const loops = chainLoops(links.from, links.to, links.count, xy);
  return Array.from({ length: loops.count }, (_, loop) => {
    const chain = loops.nodes.subarray(loops.start[loop], loops.start[loop + 1]);
    const flat = new Float64Array(2 * chain.length);
    for (let k = 0; k < chain.length; k++) {
      flat[2 * k] = xy[2 * chain[k]];
      flat[2 * k + 1] = xy[2 * chain[k] + 1];
    }
    return flat;
  });
}
