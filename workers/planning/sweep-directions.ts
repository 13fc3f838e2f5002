import { cubeDirections } from '../../shared/geometry/fitting/candidate-downs.js';
import { principalAxes } from '../../shared/geometry/fitting/principal-axes.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';

/** Directions within about 4° of one already listed bring nothing new. */
const NEW_DIRECTION = 0.9976;
const FACE_DIRECTIONS = 4;
const RANDOM_DIRECTIONS = 2;
/** A face direction must carry this share of the surface. */
const FACE_SHARE = 0.04;

/**
 * The directions along which a part is swept for cuts, up to sign: the 13 of the cube, the part's
 * principal axes, the normals that most of its surface has, and a few at random.
 * @param random seeded, in [0, 1)
 */
export function sweepDirections(mesh: TriangleMesh, random: () => number): Vector3[] {
  const found: Vector3[] = cubeDirections.filter(
    ([x, y, z]) => x > 0 || (x === 0 && (y > 0 || (y === 0 && z > 0))),
  );
  const add = (direction: Vector3) => {
    const isKnown = found.some(
      (d) =>
        Math.abs(d[0] * direction[0] + d[1] * direction[1] + d[2] * direction[2]) > NEW_DIRECTION,
    );
    if (!isKnown) found.push(direction);
  };
  for (const axis of principalAxes(mesh.positions)) add(axis);
  for (const normal of faceNormals(mesh)) add(normal);
  for (let k = 0; k < RANDOM_DIRECTIONS; k++) {
    const z = random();
    const angle = 2 * Math.PI * random();
    const flat = Math.sqrt(1 - z * z);
    add([flat * Math.cos(angle), flat * Math.sin(angle), z]);
  }
  return found;
}

/** Steps per unit of the grid in which normals are gathered. */
const NORMAL_STEPS = 12;

/** The normals, up to sign, that carry the most surface; only those that carry a fair share. */
function faceNormals({ positions: p, indices }: TriangleMesh): Vector3[] {
  const sums = new Map<number, [number, number, number, number]>();
  let total = 0;
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
    let nx = uy * vz - uz * vy;
    let ny = uz * vx - ux * vz;
    let nz = ux * vy - uy * vx;
    const length = Math.sqrt(nx * nx + ny * ny + nz * nz);
    if (length === 0) continue;
    total += length;
    if (nx < 0 || (nx === 0 && (ny < 0 || (ny === 0 && nz < 0)))) {
      nx = -nx;
      ny = -ny;
      nz = -nz;
    }
    const scale = NORMAL_STEPS / length;
    const key =
      (Math.round(nx * scale) * 64 + Math.round(ny * scale) + 32) * 64 +
      Math.round(nz * scale) +
      32;
    const sum = sums.get(key);
    if (!sum) sums.set(key, [nx, ny, nz, length]);
    else {
      sum[0] += nx;
      sum[1] += ny;
      sum[2] += nz;
      sum[3] += length;
    }
  }
  return [...sums.values()]
    .filter((sum) => sum[3] >= FACE_SHARE * total)
    .sort((a, b) => b[3] - a[3])
    .slice(0, FACE_DIRECTIONS)
    .map(([x, y, z]): Vector3 => {
      const length = Math.hypot(x, y, z);
      return [x / length, y / length, z / length];
    });
}
