import {
  applyTree,
  type Body,
  countCuts,
  type PlaneTree,
} from '../../shared/geometry/cutting/apply-tree.js';
import { type PolygonTriangulator } from '../../shared/geometry/cutting/cut-mesh.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { partZones, type PlanZone } from './judging/plan-zone.js';
import { poseExactly } from './pose-exactly.js';
import { type PlanNode } from './plan-node.js';

/** A tree applied to the exact model. */
export interface ExactPlan {
  readonly tree: PlaneTree;
  readonly bodies: Body[];
  readonly offsets: number[];
  /** Bodies that do not fit, with how much they are over, mm. */
  readonly over: { readonly body: Body; readonly byMm: number }[];
}

export interface ExactCutting {
  readonly mesh: TriangleMesh;
  readonly spaces: readonly BuildSpace[];
  readonly triangulate: PolygonTriangulator;
  readonly toleranceMm: number;
  /** Called between cuts and checks with the part done; may throw to cancel. */
  readonly onStep: (fraction: number) => void;
}

/** Cuts the exact model and lays every body on the bed. */
export function cutExactly(tree: PlaneTree, cutting: ExactCutting): ExactPlan {
  const { mesh, spaces, triangulate, toleranceMm, onStep } = cutting;
  const { bodies, offsets } = applyTree(mesh, tree, {
    triangulate,
    toleranceMm,
    onCut: (done, total) => onStep((0.6 * done) / total),
  });
  const over: { body: Body; byMm: number }[] = [];
  for (const [k, body] of bodies.entries()) {
    onStep(0.6 + (0.4 * k) / bodies.length);
    const pose = poseExactly(body.mesh, spaces);
    if (!pose.fits) over.push({ body, byMm: -pose.slackMm });
  }
  return { tree, bodies, offsets, over };
}

export function planeTreeOf(node: PlanNode): PlaneTree {
  if (node.kind === 'leaf') return { kind: 'leaf' };
  return {
    kind: 'cut',
    plane: node.plane,
    ...(node.motive === 'given' && { locked: true }),
    above: planeTreeOf(node.above),
    below: planeTreeOf(node.below),
  };
}

/** Where a cut of a tree is: its way down, and its plane. In preorder, above before below. */
export function listCuts(
  tree: PlaneTree,
  path = '',
): { path: string; plane: Plane; locked: boolean }[] {
  if (tree.kind === 'leaf') return [];
  return [
    { path, plane: tree.plane, locked: tree.locked ?? false },
    ...listCuts(tree.above, `${path}a`),
    ...listCuts(tree.below, `${path}b`),
  ];
}

/** The tree with the node at `path` replaced. */
export function replaceAt(tree: PlaneTree, path: string, by: PlaneTree): PlaneTree {
  if (path === '' || tree.kind === 'leaf') return by;
  const rest = path.slice(1);
  return path[0] === 'a'
    ? { ...tree, above: replaceAt(tree.above, rest, by) }
    : { ...tree, below: replaceAt(tree.below, rest, by) };
}

/** The tree with these offsets, in preorder. */
export function withOffsets(tree: PlaneTree, offsets: readonly number[]): PlaneTree {
  if (tree.kind === 'leaf') return tree;
  const aboveCuts = countCuts(tree.above);
  return {
    ...tree,
    plane: { normal: tree.plane.normal, offset: offsets[0] },
    above: withOffsets(tree.above, offsets.slice(1, 1 + aboveCuts)),
    below: withOffsets(tree.below, offsets.slice(1 + aboveCuts)),
  };
}

/** The leaf a body lies in: its path without the number of the loose solid. */
export function leafPath(body: Body): string {
  const dot = body.path.indexOf('.');
  return dot < 0 ? body.path : body.path.slice(0, dot);
}

/**
 * The zones that lie in the leaf at `path`; null when a cut on the way there crosses one of its
 * part. With no path the zones of the root.
 */
export function zonesOfLeaf(
  tree: PlaneTree,
  path: string,
  zones: readonly PlanZone[],
): readonly PlanZone[] | null {
  if (tree.kind === 'leaf' || path === '') return zones;
  const parted = partZones(zones, tree.plane);
  if (!parted) return null;
  return path[0] === 'a'
    ? zonesOfLeaf(tree.above, path.slice(1), parted.above)
    : zonesOfLeaf(tree.below, path.slice(1), parted.below);
}

/** Whether no cut of a tree comes near a zone that lies in what it cuts. */
export function keepsZones(tree: PlaneTree, zones: readonly PlanZone[]): boolean {
  if (tree.kind === 'leaf' || zones.length === 0) return true;
  const parted = partZones(zones, tree.plane);
  return (
    parted !== null && keepsZones(tree.above, parted.above) && keepsZones(tree.below, parted.below)
  );
}
