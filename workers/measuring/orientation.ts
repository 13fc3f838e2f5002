import type { Shells } from '../../shared/geometry/mesh/shells.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { nestShells } from './shell-nesting.js';

export interface Orientation {
  /** `outward`: as it should be. `inside-out`: every shell is turned. `mixed`: some are, some are not. */
  readonly kind: 'outward' | 'inside-out' | 'mixed';
  /** Shells that bound a hollow, by where they lie. */
  readonly cavities: number;
  /** Outer shells wound as hollows. */
  readonly insideOut: number;
  /** Shells inside another one, wound as solids: their volume would count twice. */
  readonly doubled: number;
  /** Shells that enclose next to nothing. */
  readonly flat: number;
  readonly crossing: number;
  readonly complete: boolean;
}

/** A shell is flat when its volume is below this share of its model's area × longest side: a sheet
 *  thinner than a millionth of a millimetre on a metre. Own choice. */
const flatShare = 1e-9;

/**
 * Compares how each shell of a closed mesh winds with where it lies: outermost shells bound solids,
 * shells directly inside them hollows, and so on inwards.
 */
export function orientationOf(
  mesh: TriangleMesh,
  shells: Shells,
  extent: { readonly area: number; readonly longest: number },
): Orientation {
  const { volumes, depths, crossing, complete } = nestShells(mesh, shells);
  const leastVolume = (flatShare * extent.area * extent.longest) / shells.count;
  let cavities = 0;
  let insideOut = 0;
  let doubled = 0;
  let flat = 0;
  for (let shell = 0; shell < shells.count; shell++) {
    const isHollow = (depths[shell] & 1) === 1;
    if (Math.abs(volumes[shell]) <= leastVolume) flat++;
    else if (isHollow && volumes[shell] > 0) doubled++;
    else if (!isHollow && volumes[shell] < 0) insideOut++;
    if (isHollow) cavities++;
  }
  const wrong = insideOut + doubled;
  const kind = wrong === 0 ? 'outward' : wrong === shells.count - flat ? 'inside-out' : 'mixed';
  return { kind, cavities, insideOut, doubled, flat, crossing, complete };
}

/** Turns every triangle round, in place. */
export function turnTriangles(indices: Uint32Array): void {
  for (let i = 0; i < indices.length; i += 3) {
    const second = indices[i + 1];
    indices[i + 1] = indices[i + 2];
    indices[i + 2] = second;
  }
}
