import { type PlaneTree } from '../../../shared/geometry/cutting/apply-tree.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Vector3 } from '../../../shared/geometry/vectors/plane.js';
import { normalize } from '../../../shared/geometry/vectors/vector3.js';
import { torusKnot } from '../../support/shapes.js';

/** A torus knot about 700 mm wide, its coordinates such as single precision holds exactly. */
export function benchKnot(along: number, around: number): TriangleMesh {
  const knot = torusKnot(100, 40, along, around);
  return { ...knot, positions: Float64Array.from(Float32Array.from(knot.positions)) };
}

/** Slightly tilted, so that no plane runs along the mesh's symmetries. */
const normals: readonly Vector3[] = [
  normalize([1, 0.013, 0.007]),
  normalize([0.011, 1, -0.009]),
  normalize([1, -0.017, 0.021]),
  normalize([-0.019, 1, 0.023]),
];

/** 15 cuts on 4 levels: halves, quarters, then each quarter across and along; fewer on fewer. */
export function benchTree(levels = normals.length): PlaneTree {
  return branch(0, 0, 0, levels);
}

function branch(level: number, alongX: number, alongY: number, levels: number): PlaneTree {
  if (level === levels) return { kind: 'leaf' };
  const isAcrossX = level % 2 === 0;
  const step = level < 2 ? 140 : 70;
  const next = (sign: number) =>
    isAcrossX
      ? branch(level + 1, alongX + sign * step, alongY, levels)
      : branch(level + 1, alongX, alongY + sign * step, levels);
  return {
    kind: 'cut',
    plane: { normal: normals[level]!, offset: isAcrossX ? alongX : alongY },
    above: next(1),
    below: next(-1),
  };
}
