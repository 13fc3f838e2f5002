import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** Closed shapes made by code, for specs. Lengths in mm; triangles wind outward. */

export function box(
  width: number,
  depth: number,
  height: number,
  corner: readonly [number, number, number] = [0, 0, 0],
): TriangleMesh {
  const [x, y, z] = corner;
  const positions = new Float64Array(24);
  for (let i = 0; i < 8; i++) {
    positions[3 * i] = x + (i & 1 ? width : 0);
    positions[3 * i + 1] = y + (i & 2 ? depth : 0);
    positions[3 * i + 2] = z + (i & 4 ? height : 0);
  }
  const quads = [
    [0, 2, 3, 1],
    [4, 5, 7, 6],
    [0, 1, 5, 4],
    [2, 6, 7, 3],
    [0, 4, 6, 2],
    [1, 3, 7, 5],
  ] as const;
  const indices = Uint32Array.from(quads.flatMap(([a, b, c, d]) => [a, b, c, a, c, d]));
  return { positions, indices };
}

/** A tube of round section swept along a closed curve: torus knots, rings. Genus 1. */
export function tube(
  curve: (t: number) => readonly [number, number, number],
  radius: number,
  along: number,
  around: number,
): TriangleMesh {
  const positions = new Float64Array(3 * along * around);
  for (let i = 0; i < along; i++) {
    const t = i / along;
    const here = curve(t);
    const ahead = curve(t + 1e-4);
    const tangent = unit([ahead[0] - here[0], ahead[1] - here[1], ahead[2] - here[2]]);
    const side = unit(cross(tangent, Math.abs(tangent[2]) < 0.9 ? [0, 0, 1] : [1, 0, 0]));
    const up = cross(side, tangent);
    for (let j = 0; j < around; j++) {
      const angle = (2 * Math.PI * j) / around;
      for (let k = 0; k < 3; k++)
        positions[3 * (i * around + j) + k] =
          here[k] + radius * (Math.cos(angle) * side[k] + Math.sin(angle) * up[k]);
    }
  }
  const indices = new Uint32Array(6 * along * around);
  let at = 0;
  for (let i = 0; i < along; i++)
    for (let j = 0; j < around; j++) {
      const a = i * around + j;
      const b = i * around + ((j + 1) % around);
      const c = ((i + 1) % along) * around + j;
      const d = ((i + 1) % along) * around + ((j + 1) % around);
      indices.set([a, c, b, b, c, d], at);
      at += 6;
    }
  return outward({ positions, indices });
}

/** Torus knot: `winds` times round the axis, `turns` times round the tube, in a ring of this radius. */
export function torusKnot(
  ringMm: number,
  tubeMm: number,
  along = 400,
  around = 24,
  winds = 2,
  turns = 3,
): TriangleMesh {
  return tube(
    (t) => {
      const a = 2 * Math.PI * t;
      const r = ringMm * (1 + 0.4 * Math.cos(turns * a));
      return [r * Math.cos(winds * a), r * Math.sin(winds * a), 0.4 * ringMm * Math.sin(turns * a)];
    },
    tubeMm,
    along,
    around,
  );
}

/** A ball of latitude bands and longitude slices. */
export function ball(radius: number, slices: number, centre: readonly [number, number, number]) {
  const bands = Math.max(2, Math.round(slices / 2));
  const rings = bands - 1;
  const positions = new Float64Array(3 * (rings * slices + 2));
  const put = (v: number, x: number, y: number, z: number) =>
    positions.set([centre[0] + x, centre[1] + y, centre[2] + z], 3 * v);
  for (let i = 0; i < rings; i++) {
    const polar = (Math.PI * (i + 1)) / bands;
    for (let j = 0; j < slices; j++) {
      const azimuth = (2 * Math.PI * j) / slices;
      const r = radius * Math.sin(polar);
      put(i * slices + j, r * Math.cos(azimuth), r * Math.sin(azimuth), radius * Math.cos(polar));
    }
  }
  const top = rings * slices;
  put(top, 0, 0, radius);
  put(top + 1, 0, 0, -radius);
  const triangles: number[] = [];
  for (let j = 0; j < slices; j++) {
    const next = (j + 1) % slices;
    triangles.push(top, j, next);
    triangles.push(top + 1, (rings - 1) * slices + next, (rings - 1) * slices + j);
    for (let i = 0; i + 1 < rings; i++) {
      const a = i * slices + j;
      const b = i * slices + next;
      triangles.push(a, a + slices, b, b, a + slices, b + slices);
    }
  }
  return outward({ positions, indices: Uint32Array.from(triangles) });
}

/** The same surface facing the other way: as a cavity. */
export function turned(mesh: TriangleMesh): TriangleMesh {
  const indices = mesh.indices.slice();
  for (let i = 0; i < indices.length; i += 3) {
    indices[i] = mesh.indices[i + 1];
    indices[i + 1] = mesh.indices[i];
  }
  return { ...mesh, indices };
}

/** Several shells in one mesh, not united. */
export function together(...meshes: readonly TriangleMesh[]): TriangleMesh {
  const positions: number[] = [];
  const indices: number[] = [];
  for (const mesh of meshes) {
    const first = positions.length / 3;
    for (const value of mesh.positions) positions.push(value);
    for (const index of mesh.indices) indices.push(first + index);
  }
  return { positions: Float64Array.from(positions), indices: Uint32Array.from(indices) };
}

/** Six times the signed volume about the origin, by the divergence theorem. */
function sixVolumes({ positions: p, indices }: TriangleMesh): number {
  let total = 0;
  for (let i = 0; i < indices.length; i += 3) {
    const a = 3 * indices[i];
    const b = 3 * indices[i + 1];
    const c = 3 * indices[i + 2];
    total +=
      p[a] * (p[b + 1] * p[c + 2] - p[b + 2] * p[c + 1]) +
      p[a + 1] * (p[b + 2] * p[c] - p[b] * p[c + 2]) +
      p[a + 2] * (p[b] * p[c + 1] - p[b + 1] * p[c]);
  }
  return total;
}

export function volumeOf(mesh: TriangleMesh): number {
  return sixVolumes(mesh) / 6;
}

function outward(mesh: TriangleMesh): TriangleMesh {
  return sixVolumes(mesh) < 0 ? turned(mesh) : mesh;
}

type Vector = readonly [number, number, number];
const cross = (a: Vector, b: Vector): Vector => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];
function unit(a: Vector): Vector {
  const length = Math.hypot(...a);
  return [a[0] / length, a[1] / length, a[2] / length];
}
