import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** A test solid with its exact volume, mm³, as the polyhedron it is. */
export interface Shape {
  readonly name: string;
  readonly mesh: TriangleMesh;
  readonly volumeMm3: number;
}

/** A closed profile in the half-plane r ≥ 0, counter-clockwise with r to the right and z up. */
export type Profile = readonly (readonly [r: number, z: number])[];

/**
 * A profile turned about z in `sides` flat steps. Its section at any height is made of regular
 * polygons, so its volume is exactly (sides / 2) · sin(2π / sides) · ∮ r² dz, with the integral
 * exact on straight profile edges (Pappus' theorem has π in place of the first factor).
 * Corners with r = 0 are poles: one vertex each.
 */
export function facetedTurning(name: string, profile: Profile, sides: number): Shape {
  const positions: number[] = [];
  const ringOf = profile.map(([r, z]) => {
    const first = positions.length / 3;
    for (let side = 0; side < (r === 0 ? 1 : sides); side++) {
      const angle = (2 * Math.PI * side) / sides;
      positions.push(r * Math.cos(angle), r * Math.sin(angle), z);
    }
    return (side: number) => (r === 0 ? first : first + (side % sides));
  });
  const indices: number[] = [];
  const triangle = (a: number, b: number, c: number) => {
    if (a !== b && b !== c && c !== a) indices.push(a, b, c);
  };
  let integral = 0;
  for (let k = 0; k < profile.length; k++) {
    const next = (k + 1) % profile.length;
    const [r0, z0] = profile[k]!;
    const [r1, z1] = profile[next]!;
    integral += ((z1 - z0) * (r0 * r0 + r0 * r1 + r1 * r1)) / 3;
    if (r0 === 0 && r1 === 0) continue;
    for (let side = 0; side < sides; side++) {
      const a = ringOf[k]!(side);
      const b = ringOf[k]!(side + 1);
      const c = ringOf[next]!(side + 1);
      const d = ringOf[next]!(side);
      triangle(a, b, c);
      triangle(a, c, d);
    }
  }
  const volumeMm3 = (sides / 2) * Math.sin((2 * Math.PI) / sides) * integral;
  return { name, mesh: toMesh(positions, indices), volumeMm3 };
}

export function sphere(radius: number, sides: number, rings: number): Shape {
  const profile = Array.from({ length: rings + 1 }, (_, ring) => {
    const angle = (Math.PI * ring) / rings - Math.PI / 2;
    const isPole = ring === 0 || ring === rings;
    return [isPole ? 0 : radius * Math.cos(angle), radius * Math.sin(angle)] as const;
  });
  return facetedTurning(`sphere of ${sides} sides`, profile, sides);
}

/** A regular prism standing on z = 0: a cylinder in `sides` flat steps. */
export function prism(radius: number, height: number, sides: number): Shape {
  const profile: Profile = [
    [0, 0],
    [radius, 0],
    [radius, height],
    [0, height],
  ];
  return facetedTurning(`prism of ${sides} sides`, profile, sides);
}

export function cone(radius: number, height: number, sides: number): Shape {
  const profile: Profile = [
    [0, 0],
    [radius, 0],
    [0, height],
  ];
  return facetedTurning(`cone of ${sides} sides`, profile, sides);
}

export function torus(radius: number, tube: number, sides: number, rings: number): Shape {
  const profile = Array.from({ length: rings }, (_, ring) => {
    const angle = (2 * Math.PI * ring) / rings;
    return [radius + tube * Math.cos(angle), tube * Math.sin(angle)] as const;
  });
  return facetedTurning(`torus of ${sides} sides`, profile, sides);
}

/** An axis-aligned box. */
export function box(
  [x0, y0, z0]: readonly [number, number, number],
  [x1, y1, z1]: readonly [number, number, number],
): Shape {
  const mesh = extrude(
    [
      [x0, y0],
      [x1, y0],
      [x1, y1],
      [x0, y1],
    ],
    [0, 1, 2, 0, 2, 3],
    z0,
    z1,
  );
  return { name: 'box', mesh, volumeMm3: (x1 - x0) * (y1 - y0) * (z1 - z0) };
}

/**
 * A polygon (counter-clockwise, with its triangulation) made into a solid from z0 to z1.
 * The volume is its area times the height.
 */
export function extrude(
  polygon: readonly (readonly [number, number])[],
  triangles: readonly number[],
  z0: number,
  z1: number,
): TriangleMesh {
  const n = polygon.length;
  const positions = [z0, z1].flatMap((z) => polygon.flatMap(([x, y]) => [x, y, z]));
  const indices: number[] = [];
  for (let i = 0; i < triangles.length; i += 3) {
    const [a, b, c] = [triangles[i]!, triangles[i + 1]!, triangles[i + 2]!];
    indices.push(a, c, b, n + a, n + b, n + c);
  }
  for (let a = 0; a < n; a++) {
    const b = (a + 1) % n;
    indices.push(a, b, n + b, a, n + b, n + a);
  }
  return toMesh(positions, indices);
}

/** A cube with one octant missing: faces that lie exactly in the planes of its middle. */
export function sevenEighthsCube(side: number): Shape {
  const cells = (x: number, y: number, z: number) => !(x === 1 && y === 1 && z === 1);
  return { ...voxels('cube without an octant', [2, 2, 2], side / 2, cells) };
}

/** Cubes of a grid joined into one solid: every face lies in a grid plane. */
export function voxels(
  name: string,
  [nx, ny, nz]: readonly [number, number, number],
  pitch: number,
  isSolid: (x: number, y: number, z: number) => boolean,
): Shape {
  const filled = (x: number, y: number, z: number) =>
    x >= 0 && y >= 0 && z >= 0 && x < nx && y < ny && z < nz && isSolid(x, y, z);
  const numbers = new Map<string, number>();
  const positions: number[] = [];
  const indices: number[] = [];
  const vertex = (p: readonly number[]) => {
    const key = p.join();
    let number = numbers.get(key);
    if (number === undefined) {
      numbers.set(key, (number = positions.length / 3));
      positions.push(p[0]! * pitch, p[1]! * pitch, p[2]! * pitch);
    }
    return number;
  };
  let cells = 0;
  for (let x = 0; x < nx; x++)
    for (let y = 0; y < ny; y++)
      for (let z = 0; z < nz; z++) {
        if (!filled(x, y, z)) continue;
        cells++;
        for (let axis = 0; axis < 3; axis++)
          for (const step of [0, 1]) {
            const neighbour = [x, y, z];
            neighbour[axis]! += step === 1 ? 1 : -1;
            if (filled(neighbour[0]!, neighbour[1]!, neighbour[2]!)) continue;
            const corner = (i: number, j: number) => {
              const p = [x, y, z];
              p[axis]! += step;
              p[(axis + 1) % 3]! += i;
              p[(axis + 2) % 3]! += j;
              return vertex(p);
            };
            const quad = [corner(0, 0), corner(1, 0), corner(1, 1), corner(0, 1)];
            if (step === 0) quad.reverse();
            indices.push(quad[0]!, quad[1]!, quad[2]!, quad[0]!, quad[2]!, quad[3]!);
          }
      }
  return { name, mesh: toMesh(positions, indices), volumeMm3: cells * pitch ** 3 };
}

/** A box with a smaller box hollowed out inside it: two shells. */
export function boxWithCavity(side: number, hollow: number): Shape {
  const rim = (side - hollow) / 2;
  const outer = box([0, 0, 0], [side, side, side]).mesh;
  const inner = box([rim, rim, rim], [side - rim, side - rim, side - rim]).mesh;
  return {
    name: 'box with a cavity',
    mesh: join([outer, turnInsideOut(inner)]),
    volumeMm3: side ** 3 - hollow ** 3,
  };
}

/**
 * A tube along a (p, q) torus knot, the curve ((2 + cos qt)·cos pt, (2 + cos qt)·sin pt, sin qt),
 * in 2 · along · around triangles. It has no closed form: its volume is that of the mesh.
 */
export function torusKnot(
  size: number,
  tube: number,
  along: number,
  around: number,
  [p, q]: readonly [number, number] = [2, 3],
): TriangleMesh {
  const positions = new Float64Array(3 * along * around);
  const curve = (t: number) => {
    const r = size * (2 + Math.cos(q * t));
    return [r * Math.cos(p * t), r * Math.sin(p * t), size * Math.sin(q * t)] as const;
  };
  for (let i = 0; i < along; i++) {
    const t = (2 * Math.PI * i) / along;
    const [x, y, z] = curve(t);
    const [ax, ay, az] = curve(t + 1e-4);
    const [bx, by, bz] = curve(t - 1e-4);
    const tangent = unit([ax - bx, ay - by, az - bz]);
    // A fixed rule for the frame keeps the seam at t = 2π closed.
    const side = unit(crossOf(tangent, [ax + bx, ay + by, az + bz]));
    const up = crossOf(side, tangent);
    for (let j = 0; j < around; j++) {
      const angle = (2 * Math.PI * j) / around;
      const c = tube * Math.cos(angle);
      const s = tube * Math.sin(angle);
      const at = 3 * (i * around + j);
      positions[at] = x + c * up[0]! + s * side[0]!;
      positions[at + 1] = y + c * up[1]! + s * side[1]!;
      positions[at + 2] = z + c * up[2]! + s * side[2]!;
    }
  }
  const indices = new Uint32Array(6 * along * around);
  let filled = 0;
  for (let i = 0; i < along; i++) {
    for (let j = 0; j < around; j++) {
      const a = i * around + j;
      const b = i * around + ((j + 1) % around);
      const c = ((i + 1) % along) * around + ((j + 1) % around);
      const d = ((i + 1) % along) * around + j;
      indices.set([a, c, d, a, b, c], filled);
      filled += 6;
    }
  }
  return { positions, indices };
}

export function join(meshes: readonly TriangleMesh[]): TriangleMesh {
  const positions: number[] = [];
  const indices: number[] = [];
  for (const mesh of meshes) {
    const first = positions.length / 3;
    for (const index of mesh.indices) indices.push(first + index);
    positions.push(...mesh.positions);
  }
  return toMesh(positions, indices);
}

export function turnInsideOut(mesh: TriangleMesh): TriangleMesh {
  const indices = Uint32Array.from(mesh.indices);
  for (let i = 0; i < indices.length; i += 3) {
    indices[i + 1] = mesh.indices[i + 2]!;
    indices[i + 2] = mesh.indices[i + 1]!;
  }
  return { ...mesh, indices };
}

/** The corners of the triangles, 9 numbers each, as an STL holds them. */
export function toSoup(mesh: TriangleMesh): Float32Array {
  const soup = new Float32Array(3 * mesh.indices.length);
  for (let i = 0; i < mesh.indices.length; i++) {
    for (let axis = 0; axis < 3; axis++) {
      soup[3 * i + axis] = mesh.positions[3 * mesh.indices[i]! + axis]!;
    }
  }
  return soup;
}

function toMesh(positions: number[], indices: number[]): TriangleMesh {
  return { positions: Float64Array.from(positions), indices: Uint32Array.from(indices) };
}

function crossOf(a: readonly number[], b: readonly number[]): number[] {
  return [
    a[1]! * b[2]! - a[2]! * b[1]!,
    a[2]! * b[0]! - a[0]! * b[2]!,
    a[0]! * b[1]! - a[1]! * b[0]!,
  ];
}

function unit(a: readonly number[]): number[] {
  const length = Math.hypot(a[0]!, a[1]!, a[2]!);
  return a.map((value) => value / length);
}
