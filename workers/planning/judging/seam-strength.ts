import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane, type Vector3 } from '../../../shared/geometry/vectors/plane.js';
import { planeFrame } from '../../../shared/geometry/vectors/plane-frame.js';

/** A bonded face as a beam's section. */
export interface BondedSection {
  readonly areaMm2: number;
  /** Its middle, mm. */
  readonly middle: Vector3;
  /** Section modulus I/c about its weaker principal axis, mm³. */
  readonly modulusMm3: number;
}

/** What hangs on a seam. */
export interface Side {
  readonly volumeMm3: number;
  readonly middle: Vector3;
}

/**
 * The cap of one cut as a section: area, middle and moments about it, summed over its triangles
 * with their signs, so that caps of trial cuts, whose triangles overlap, are right too. Null
 * without a cap of that tag or of no area.
 */
export function bondedSection(
  mesh: TriangleMesh,
  plane: Plane,
  capTag: number,
): BondedSection | null {
  const { positions: p, indices, tags } = mesh;
  if (!tags) return null;
  const { u, v } = planeFrame(plane.normal);
  let area = 0;
  let su = 0;
  let sv = 0;
  let suu = 0;
  let svv = 0;
  let suv = 0;
  const corners: number[] = [];
  for (let t = 0; t < tags.length; t++) {
    if (tags[t] !== capTag) continue;
    const at = corners.length;
    for (let corner = 0; corner < 3; corner++) {
      const k = 3 * indices[3 * t + corner];
      corners.push(
        u[0] * p[k] + u[1] * p[k + 1] + u[2] * p[k + 2],
        v[0] * p[k] + v[1] * p[k + 1] + v[2] * p[k + 2],
      );
    }
    const [a, b, c, d, e, f] = corners.slice(at);
    const twice = (c - a) * (f - b) - (e - a) * (d - b);
    const share = twice / 2;
    area += share;
    su += (share * (a + c + e)) / 3;
    sv += (share * (b + d + f)) / 3;
    // Exact for a triangle: the mean of products over its corners and its middle.
    suu += (share * (a * a + c * c + e * e + a * c + c * e + e * a)) / 6;
    svv += (share * (b * b + d * d + f * f + b * d + d * f + f * b)) / 6;
    suv +=
      (share * (2 * (a * b + c * d + e * f) + a * d + c * b + c * f + e * d + e * b + a * f)) / 12;
  }
  if (area === 0 || !Number.isFinite(area)) return null;
  const mu = su / area;
  const mv = sv / area;
  const sign = Math.sign(area);
  const iuu = sign * (suu - area * mu * mu);
  const ivv = sign * (svv - area * mv * mv);
  const iuv = sign * (suv - area * mu * mv);
  const { normal, offset } = plane;
  return {
    areaMm2: Math.abs(area),
    middle: [0, 1, 2].map(
      (axis) => mu * u[axis] + mv * v[axis] + offset * normal[axis],
    ) as unknown as Vector3,
    modulusMm3: weakerModulus(corners, mu, mv, iuu, ivv, iuv),
  };
}

/** The smaller I/c of the two principal axes. */
function weakerModulus(
  corners: readonly number[],
  mu: number,
  mv: number,
  iuu: number,
  ivv: number,
  iuv: number,
): number {
  const turn = 0.5 * Math.atan2(2 * iuv, iuu - ivv);
  let weakest = Infinity;
  for (const angle of [turn, turn + Math.PI / 2]) {
    const [c, s] = [Math.cos(angle), Math.sin(angle)];
    const moment = c * c * iuu + 2 * c * s * iuv + s * s * ivv;
    let reach = 0;
    for (let k = 0; k < corners.length; k += 2)
      reach = Math.max(reach, Math.abs(c * (corners[k] - mu) + s * (corners[k + 1] - mv)));
    if (reach > 0) weakest = Math.min(weakest, Math.max(0, moment) / reach);
  }
  return weakest;
}

/** Solid PLA, kg/mm³: plans are compared before a material is chosen. */
const DENSITY = 1.24e-6;
const GRAVITY = 9.81;
/** A section that thin has no strength that could be said, kPa. */
const MOST_KPA = 1e6;

/**
 * Bending stress σ = M·c/I in a glued seam when the lighter side is held out level by the other,
 * kPa; beam theory, the seam as strong as its section is wide. For comparing plans, no promise.
 */
export function bendingStress(section: BondedSection, one: Side, other: Side): number {
  const lighter = one.volumeMm3 <= other.volumeMm3 ? one : other;
  const lever = Math.hypot(
    lighter.middle[0] - section.middle[0],
    lighter.middle[1] - section.middle[1],
    lighter.middle[2] - section.middle[2],
  );
  const moment = DENSITY * lighter.volumeMm3 * GRAVITY * lever;
  if (!(section.modulusMm3 > 0)) return moment > 0 ? MOST_KPA : 0;
  return Math.min(MOST_KPA, (1000 * moment) / section.modulusMm3);
}

/** Volume and its middle of several closed meshes together. */
export function sideOf(meshes: readonly TriangleMesh[]): Side {
  let sixfold = 0;
  let x = 0;
  let y = 0;
  let z = 0;
  for (const { positions: p, indices } of meshes)
    for (let t = 0; t < indices.length; t += 3) {
      const a = 3 * indices[t];
      const b = 3 * indices[t + 1];
      const c = 3 * indices[t + 2];
      const six =
        p[a] * (p[b + 1] * p[c + 2] - p[b + 2] * p[c + 1]) +
        p[a + 1] * (p[b + 2] * p[c] - p[b] * p[c + 2]) +
        p[a + 2] * (p[b] * p[c + 1] - p[b + 1] * p[c]);
      sixfold += six;
      x += six * (p[a] + p[b] + p[c]);
      y += six * (p[a + 1] + p[b + 1] + p[c + 1]);
      z += six * (p[a + 2] + p[b + 2] + p[c + 2]);
    }
  if (sixfold === 0) return { volumeMm3: 0, middle: [0, 0, 0] };
  return {
    volumeMm3: sixfold / 6,
    middle: [x / (4 * sixfold), y / (4 * sixfold), z / (4 * sixfold)],
  };
}
