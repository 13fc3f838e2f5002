import { type BufferGeometry } from 'three';
import {
  BufferAttribute,
  BufferGeometry as Geometry,
  BoxGeometry,
  Quaternion,
  Vector3,
} from 'three';
import { Brush, Evaluator, INTERSECTION, SUBTRACTION } from 'three-bvh-csg';
import {
  type Body,
  type PlaneTree,
  applyTree,
} from '../../../shared/geometry/cutting/apply-tree.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane } from '../../../shared/geometry/vectors/plane.js';
import { toSoup } from '../../support/shapes.js';
import { type ManifoldModule, manifoldTriangulator } from '../../support/triangulator.js';

/** How far a cut may move, mm, as in the product. */
const TOLERANCE_MM = 0.02;

export function cutWithKernel(module: ManifoldModule, mesh: TriangleMesh, tree: PlaneTree): Body[] {
  const triangulate = manifoldTriangulator(module);
  return applyTree(mesh, tree, { triangulate, toleranceMm: TOLERANCE_MM }).bodies;
}

type Manifold = InstanceType<ManifoldModule['Manifold']>;

/** Import and cuts in manifold-3d; the caller deletes the leaves. */
export function cutWithManifold(
  module: ManifoldModule,
  positions: Float32Array,
  indices: Uint32Array,
  tree: PlaneTree,
): Manifold[] {
  const mesh = new module.Mesh({ numProp: 3, vertProperties: positions, triVerts: indices });
  const leaves: Manifold[] = [];
  const visit = (part: Manifold, node: PlaneTree): void => {
    if (node.kind === 'leaf') {
      leaves.push(part);
      // Booleans are deferred: counting makes them happen.
      part.numTri();
      return;
    }
    const { normal, offset } = node.plane;
    const [above, below] = part.splitByPlane([normal[0], normal[1], normal[2]], offset);
    part.delete();
    visit(above, node.above);
    visit(below, node.below);
  };
  visit(module.Manifold.ofMesh(mesh), tree);
  return leaves;
}

/** Corners of each leaf, as an STL of manifold-3d's result would hold them. */
export function manifoldSoups(leaves: readonly Manifold[]): Float32Array[] {
  return leaves.map((leaf) => {
    const { vertProperties, triVerts, numProp } = leaf.getMesh();
    const soup = new Float32Array(3 * triVerts.length);
    for (let i = 0; i < triVerts.length; i++) {
      for (let axis = 0; axis < 3; axis++) {
        soup[3 * i + axis] = vertProperties[numProp * triVerts[i]! + axis]!;
      }
    }
    return soup;
  });
}

/** Building a brush with its tree, and the cuts, in three-bvh-csg; returns the leaves' corners. */
export function cutWithCsg(mesh: TriangleMesh, tree: PlaneTree, reachMm: number): Float32Array[] {
  const evaluator = new Evaluator();
  evaluator.attributes = ['position', 'normal'];
  evaluator.useGroups = false;
  const soups: Float32Array[] = [];
  const visit = (part: Brush, node: PlaneTree): void => {
    if (node.kind === 'leaf') {
      soups.push(soupOf(part.geometry));
      return;
    }
    const half = halfSpace(node.plane, reachMm);
    const above = new Brush();
    const below = new Brush();
    evaluator.evaluate(part, half, [INTERSECTION, SUBTRACTION], [above, below]);
    visit(above, node.above);
    visit(below, node.below);
  };
  const geometry = new Geometry();
  geometry.setAttribute('position', new BufferAttribute(toSoup(mesh), 3));
  geometry.computeVertexNormals();
  visit(new Brush(geometry), tree);
  return soups;
}

/** A box that covers everything above the plane within reach. */
function halfSpace({ normal, offset }: Plane, reachMm: number): Brush {
  const direction = new Vector3(normal[0], normal[1], normal[2]);
  const brush = new Brush(new BoxGeometry(2 * reachMm, 2 * reachMm, 2 * reachMm));
  brush.quaternion.copy(new Quaternion().setFromUnitVectors(new Vector3(0, 0, 1), direction));
  brush.position.copy(direction).multiplyScalar(offset + reachMm);
  brush.updateMatrixWorld();
  return brush;
}

function soupOf(geometry: BufferGeometry): Float32Array {
  const source = geometry.index === null ? geometry : geometry.toNonIndexed();
  return Float32Array.from(source.getAttribute('position').array);
}
