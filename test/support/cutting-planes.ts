import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane, type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { cross, dot, normalize, scale, subtract } from '../../shared/geometry/vectors/vector3.js';
import { randomDirection, randomInteger } from './random.js';

export type PlaneKind = 'anywhere' | 'vertex' | 'edge' | 'three vertices' | 'face' | 'axis';

export interface TestPlane {
  readonly kind: PlaneKind;
  readonly plane: Plane;
}

/** Random planes that meet the mesh, among them `special` of each kind that is degenerate. */
export function planesThrough(
  mesh: TriangleMesh,
  random: () => number,
  anywhere: number,
  special: number,
): TestPlane[] {
  const planes: TestPlane[] = [];
  for (let i = 0; i < anywhere; i++) {
    planes.push({ kind: 'anywhere', plane: planeAnywhere(mesh, random) });
  }
  for (let i = 0; i < special; i++) {
    planes.push({ kind: 'vertex', plane: planeAt(randomDirection(random), pick(mesh, random)) });
    planes.push({ kind: 'edge', plane: planeThroughEdge(mesh, random) });
    planes.push({ kind: 'three vertices', plane: planeThroughThree(mesh, random) });
    planes.push({ kind: 'face', plane: planeAlongFace(mesh, random) });
    planes.push({ kind: 'axis', plane: planeAcrossAxis(mesh, random) });
  }
  return planes;
}

export function planeAnywhere(mesh: TriangleMesh, random: () => number): Plane {
  const { min, size } = boundingBox(mesh.positions);
  const within = (axis: 0 | 1 | 2) => min[axis] + size[axis] * (0.2 + 0.6 * random());
  return planeAt(randomDirection(random), [within(0), within(1), within(2)]);
}

function planeAt(normal: Vector3, point: Vector3): Plane {
  return { normal, offset: dot(normal, point) };
}

function planeThroughEdge(mesh: TriangleMesh, random: () => number): Plane {
  const [a, b] = corners(mesh, randomInteger(random, mesh.indices.length / 3));
  return planeAt(normalize(cross(subtract(b, a), randomDirection(random))), a);
}

function planeThroughThree(mesh: TriangleMesh, random: () => number): Plane {
  for (;;) {
    const [a, b, c] = [pick(mesh, random), pick(mesh, random), pick(mesh, random)];
    const normal = cross(subtract(b, a), subtract(c, a));
    if (Math.hypot(...normal) > 1e-3) return planeAt(normalize(normal), a);
  }
}

function planeAlongFace(mesh: TriangleMesh, random: () => number): Plane {
  const [a, b, c] = corners(mesh, randomInteger(random, mesh.indices.length / 3));
  const normal = normalize(cross(subtract(b, a), subtract(c, a)));
  return planeAt(random() < 0.5 ? normal : scale(normal, -1), a);
}

function planeAcrossAxis(mesh: TriangleMesh, random: () => number): Plane {
  const axes: readonly Vector3[] = [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ];
  const axis = axes[randomInteger(random, 3)]!;
  return planeAt(random() < 0.5 ? axis : scale(axis, -1), pick(mesh, random));
}

function pick(mesh: TriangleMesh, random: () => number): Vector3 {
  return vertexAt(mesh, randomInteger(random, mesh.positions.length / 3));
}

function corners(mesh: TriangleMesh, triangle: number): [Vector3, Vector3, Vector3] {
  const at = (corner: number) => vertexAt(mesh, mesh.indices[3 * triangle + corner]!);
  return [at(0), at(1), at(2)];
}

function vertexAt({ positions }: TriangleMesh, vertex: number): Vector3 {
  return [positions[3 * vertex]!, positions[3 * vertex + 1]!, positions[3 * vertex + 2]!];
}
