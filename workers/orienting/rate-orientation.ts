import { convexHull2d } from '../../shared/geometry/fitting/convex-hull-2d.js';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { columnSupport } from '../../shared/geometry/support/column-support.js';
import { planeFrame } from '../../shared/geometry/vectors/plane-frame.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';

/** What matters of a piece when it is laid down to print. */
export interface RatingTask {
  readonly overhangDegrees: number;
  readonly bridgeMm: number;
  /** Sides from which the finished object is looked at, assembled model. */
  readonly showDirections: readonly Vector3[];
  /** Axes of sockets, outward from their faces: lying ones print a little worse. */
  readonly socketAxes: readonly Vector3[];
  /** Axes of fixed pins, outward: they cannot point at the bed, and lying ones are weak. */
  readonly pinAxes: readonly Vector3[];
}

/** How a piece prints in one orientation. */
export interface Rating {
  readonly down: Vector3;
  readonly supportMm3: number;
  readonly supportMm2: number;
  readonly heightMm: number;
  /** Flat on the bed, mm². */
  readonly contactMm2: number;
  /**
   * Height of the centre of mass over its least distance from the edge of what stands on the bed;
   * Infinity when it would fall over.
   */
  readonly tipping: number;
  /** Faces that support leans on, those in show counted three times, seam faces a fifth, mm². */
  readonly scarMm2: number;
  /** All of it as one number, mm³ of support that would be as bad. */
  readonly cost: number;
}

/*
 * What things cost, as mm³ of support: own choice, no source. A millimetre of height is a layer
 * change or five; a scar is sanded by hand; a piece without a foot needs a raft or a brim.
 */
const PER_HEIGHT_MM = 15;
const PER_SCAR_MM2 = 0.5;
const NO_FOOT_SHARE = 0.08;
const TIPPING_SHARE = 0.08;
const STEADY_TIPPING = 3;
const SHAKY_TIPPING = 9;
/** Wanted foot as a share of the mean section (volume over height). */
const FOOT_SHARE = 0.15;
const PER_LYING_SOCKET = 20;
const PER_LYING_PIN = 300;
const SEAM_FACE_SCAR = 0.2;
const SHOWN_SCAR = 2;

/** Facets this near the lowest point and this level lie on the bed. */
const ON_BED_MM = 0.02;
const ON_BED_COS = 0.9999;

/** A piece made ready to be rated many times. */
export class RatedPiece {
  private readonly volumeMm3: number;
  private readonly centre: Vector3;

  constructor(
    private readonly mesh: TriangleMesh,
    private readonly task: RatingTask,
  ) {
    this.volumeMm3 = signedVolume(mesh);
    this.centre = centreOfMass(mesh, this.volumeMm3);
  }

  /** @param pitchMm side of a column */
  rate(down: Vector3, pitchMm: number): Rating {
    const { mesh, task } = this;
    const up: Vector3 = [0 - down[0], 0 - down[1], 0 - down[2]];
    const { overhangDegrees, bridgeMm } = task;
    const support = columnSupport({ mesh, up, pitchMm, overhangDegrees, bridgeMm });
    return this.withCost({ ...this.standing(down), ...support }, down);
  }

  /** The same with the most support that there can be: every face that leans counts to the plate. */
  bound(down: Vector3): Rating {
    const standing = this.standing(down);
    return this.withCost({ ...standing, volumeMm3: standing.boundMm3, areaMm2: 0 }, down);
  }

  private withCost(
    figures: ReturnType<RatedPiece['standing']> & { volumeMm3: number; areaMm2: number },
    down: Vector3,
  ): Rating {
    const { heightMm, contactMm2, tipping, scarMm2, volumeMm3, areaMm2 } = figures;
    const foot = Math.min(1, (contactMm2 * heightMm) / (FOOT_SHARE * this.volumeMm3));
    const shaky = Math.min(
      1,
      Math.max(0, (tipping - STEADY_TIPPING) / (SHAKY_TIPPING - STEADY_TIPPING)),
    );
    const lying = (axes: readonly Vector3[]) =>
      axes.filter((axis) => Math.abs(along(axis, down)) < Math.SQRT1_2).length;
    const pinsDown = this.task.pinAxes.filter((axis) => along(axis, down) > 0.3).length;
    const cost =
      volumeMm3 +
      PER_SCAR_MM2 * scarMm2 +
      PER_HEIGHT_MM * heightMm +
      this.volumeMm3 * (NO_FOOT_SHARE * (1 - foot) + TIPPING_SHARE * shaky + pinsDown) +
      PER_LYING_SOCKET * lying(this.task.socketAxes) +
      PER_LYING_PIN * lying(this.task.pinAxes);
    return {
      down,
      supportMm3: volumeMm3,
      supportMm2: areaMm2,
      heightMm,
      contactMm2,
      tipping,
      scarMm2,
      cost,
    };
  }

  private standing(down: Vector3) {
    const { positions: p, indices, tags } = this.mesh;
    const lean = Math.sin((this.task.overhangDegrees * Math.PI) / 180);
    const [dx, dy, dz] = down;
    const count = p.length / 3;
    const depths = new Float64Array(count);
    let lowest = -Infinity;
    let highest = Infinity;
    for (let k = 0, at = 0; k < count; k++, at += 3) {
      const depth = dx * p[at] + dy * p[at + 1] + dz * p[at + 2];
      depths[k] = depth;
      if (depth > lowest) lowest = depth;
      if (depth < highest) highest = depth;
    }
    let contactMm2 = 0;
    let scarMm2 = 0;
    let boundMm3 = 0;
    const feet: number[] = [];
    for (let t = 0; t < indices.length; t += 3) {
      const a = 3 * indices[t];
      const b = 3 * indices[t + 1];
      const c = 3 * indices[t + 2];
      const ux = p[b] - p[a];
      const uy = p[b + 1] - p[a + 1];
      const uz = p[b + 2] - p[a + 2];
      const vx = p[c] - p[a];
      const vy = p[c + 1] - p[a + 1];
      const vz = p[c + 2] - p[a + 2];
      const nx = uy * vz - uz * vy;
      const ny = uz * vx - ux * vz;
      const nz = ux * vy - uy * vx;
      const facing = nx * dx + ny * dy + nz * dz;
      if (facing <= 0) continue;
      const size = Math.sqrt(nx * nx + ny * ny + nz * nz);
      if (facing <= lean * size) continue;
      const depth = (depths[indices[t]] + depths[indices[t + 1]] + depths[indices[t + 2]]) / 3;
      if (facing > ON_BED_COS * size && lowest - depth < ON_BED_MM) {
        contactMm2 += size / 2;
        feet.push(a, b, c);
        continue;
      }
      boundMm3 += (facing / 2) * (lowest - depth);
      scarMm2 += (size / 2) * this.scarWeight(nx, ny, nz, size, tags ? tags[t / 3] : 0);
    }
    return {
      heightMm: lowest - highest,
      contactMm2,
      scarMm2,
      boundMm3,
      tipping: this.tippingOn(feet, down, lowest),
    };
  }

  private scarWeight(nx: number, ny: number, nz: number, size: number, tag: number): number {
    if (tag > 0) return SEAM_FACE_SCAR;
    let shown = 0;
    for (const [x, y, z] of this.task.showDirections)
      shown = Math.max(shown, (nx * x + ny * y + nz * z) / size);
    return 1 + SHOWN_SCAR * shown;
  }

  private tippingOn(feet: readonly number[], down: Vector3, lowest: number): number {
    if (feet.length === 0) return Infinity;
    const { u, v } = planeFrame(down);
    const { positions: p } = this.mesh;
    const flat = new Float64Array(2 * feet.length);
    for (let k = 0; k < feet.length; k++) {
      const point: Vector3 = [p[feet[k]], p[feet[k] + 1], p[feet[k] + 2]];
      flat[2 * k] = along(point, u);
      flat[2 * k + 1] = along(point, v);
    }
    const hull = convexHull2d(flat);
    if (hull.length < 6) return Infinity;
    const [x, y] = [along(this.centre, u), along(this.centre, v)];
    let margin = Infinity;
    for (let k = 0; k < hull.length; k += 2) {
      const n = (k + 2) % hull.length;
      const [ex, ey] = [hull[n] - hull[k], hull[n + 1] - hull[k + 1]];
      const inside = (ex * (y - hull[k + 1]) - ey * (x - hull[k])) / Math.hypot(ex, ey);
      margin = Math.min(margin, inside);
    }
    return margin > 0 ? (lowest - along(this.centre, down)) / margin : Infinity;
  }
}

function along(a: Vector3, b: Vector3): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

/** By the divergence theorem about the first vertex; of a mesh without volume that vertex. */
function centreOfMass({ positions: p, indices }: TriangleMesh, volumeMm3: number): Vector3 {
  const [ox, oy, oz] = p;
  let [sx, sy, sz] = [0, 0, 0];
  for (let t = 0; t < indices.length; t += 3) {
    const a = 3 * indices[t];
    const b = 3 * indices[t + 1];
    const c = 3 * indices[t + 2];
    const [ax, ay, az] = [p[a] - ox, p[a + 1] - oy, p[a + 2] - oz];
    const [bx, by, bz] = [p[b] - ox, p[b + 1] - oy, p[b + 2] - oz];
    const [cx, cy, cz] = [p[c] - ox, p[c + 1] - oy, p[c + 2] - oz];
    const six = ax * (by * cz - bz * cy) + ay * (bz * cx - bx * cz) + az * (bx * cy - by * cx);
    sx += six * (ax + bx + cx);
    sy += six * (ay + by + cy);
    sz += six * (az + bz + cz);
  }
  const scale = volumeMm3 > 0 ? 1 / (24 * volumeMm3) : 0;
  return [ox + sx * scale, oy + sy * scale, oz + sz * scale];
}
