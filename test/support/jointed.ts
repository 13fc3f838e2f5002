import { applyTree, type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { type JointWishes, usualJoints } from '../../shared/jobs/joint-plan.js';
import { type MaterialProfile, usualMaterial } from '../../shared/jobs/material-profile.js';
import { nameBodies } from '../../workers/building/finish-bodies.js';
import { findSeams } from '../../workers/building/seam-areas.js';
import { dressBody } from '../../workers/jointing/dress-body.js';
import { planJoints } from '../../workers/jointing/plan-joints.js';
import { type Solids } from '../../workers/solids/solid-kernel.js';

export const leaf: PlaneTree = { kind: 'leaf' };

export function cutAt(plane: Plane, above: PlaneTree = leaf, below: PlaneTree = leaf): PlaneTree {
  return { kind: 'cut', plane, above, below };
}

/** The planes of a tree with the offsets as made, root first, above before below. */
function planesOf(tree: PlaneTree, offsets: readonly number[]): Plane[] {
  const planes: Plane[] = [];
  const walk = (node: PlaneTree): void => {
    if (node.kind === 'leaf') return;
    planes.push({ normal: node.plane.normal, offset: offsets[planes.length]! });
    walk(node.above);
    walk(node.below);
  };
  walk(tree);
  return planes;
}

/** Cuts a mesh along a tree and gives it joints, as a plan does, all of it in the assembled model. */
export function jointed(
  solids: Solids,
  mesh: TriangleMesh,
  tree: PlaneTree,
  {
    wishes = usualJoints,
    material = usualMaterial,
  }: { wishes?: JointWishes; material?: MaterialProfile } = {},
) {
  const { bodies, offsets } = applyTree(mesh, tree, {
    triangulate: solids.triangulate,
    toleranceMm: 0.02,
  });
  const named = nameBodies(bodies);
  const plain = named.map(({ name, body }) => ({ name, path: body.path, mesh: body.mesh }));
  const seams = findSeams(plain, planesOf(tree, offsets), solids);
  const joints = planJoints({
    bodies: new Map(plain.map(({ name, mesh: one }) => [name, one])),
    seams,
    wishes,
    material,
    solids,
  });
  const dress = (name: string) => {
    const { mesh: own } = plain.find((one) => one.name === name)!;
    return dressBody({
      name,
      mesh: own,
      seams,
      joints,
      up: [0, 0, 1],
      wishes,
      material,
      solids,
      finish: { isBevelled: true, isMarked: true },
    });
  };
  return { plain, seams, joints, dress };
}
