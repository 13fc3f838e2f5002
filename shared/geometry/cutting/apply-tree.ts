import { splitIntoSolids } from '../mesh/solids.js';
import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { type Plane } from '../vectors/plane.js';
import { cutMesh, type PolygonTriangulator } from './cut-mesh.js';
import { placeCut } from './place-cut.js';
import { defaultSnapMm } from './plane-sides.js';

/** Cuts below cuts; the recipe's cut tree is structurally one. */
export type PlaneTree =
  | { readonly kind: 'leaf' }
  | {
      readonly kind: 'cut';
      readonly plane: Plane;
      /** A cut that stays exactly where it is, whatever the tolerance. */
      readonly locked?: boolean | undefined;
      readonly above: PlaneTree;
      readonly below: PlaneTree;
    };

/** One solid of the result. */
export interface Body {
  readonly mesh: TriangleMesh;
  /**
   * Its way down the tree, 'a' for above and 'b' for below at each cut; where a leaf falls into
   * several loose solids, '.1', '.2' … follows, the largest first.
   */
  readonly path: string;
}

export interface TreeOptions {
  readonly triangulate: PolygonTriangulator;
  /** How far a cut may move along its normal, mm: see placeCut. 0 keeps every cut in its place. */
  readonly toleranceMm: number;
  /** Called after each cut. An exception it throws stops the work. */
  readonly onCut?: (done: number, total: number) => void;
}

export interface TreeResult {
  /** Leaf by leaf, above before below. */
  readonly bodies: Body[];
  /** Offsets really used, mm, cuts numbered in preorder, above before below. */
  readonly offsets: number[];
}

/**
 * Cuts a closed mesh (mm) along a tree of planes and takes the leaves apart into solids. The cap
 * of cut i (in preorder) has tag i + 1. A cut that meets nothing keeps its offset and leaves one
 * side empty; an empty leaf has no bodies. Deterministic, nothing is mutated.
 * O(triangles × depth).
 */
export function applyTree(mesh: TriangleMesh, tree: PlaneTree, options: TreeOptions): TreeResult {
  const total = countCuts(tree);
  // One measure for all parts, however small they get.
  const snapMm = defaultSnapMm(mesh.positions);
  const bodies: Body[] = [];
  const offsets: number[] = [];
  const visit = (part: TriangleMesh, node: PlaneTree, path: string): void => {
    if (node.kind === 'leaf') {
      const solids = splitIntoSolids(part);
      for (let i = 0; i < solids.length; i++) {
        bodies.push({ mesh: solids[i], path: solids.length > 1 ? `${path}.${i + 1}` : path });
      }
      return;
    }
    const toleranceMm = node.locked ? 0 : options.toleranceMm;
    const plane = placeCut(part, node.plane, toleranceMm, snapMm);
    offsets.push(plane.offset);
    const cut = cutMesh(part, plane, {
      triangulate: options.triangulate,
      capTag: offsets.length,
      snapMm,
    });
    options.onCut?.(offsets.length, total);
    visit(cut.above, node.above, `${path}a`);
    visit(cut.below, node.below, `${path}b`);
  };
  visit(mesh, tree, '');
  return { bodies, offsets };
}

export function countCuts(tree: PlaneTree): number {
  return tree.kind === 'leaf' ? 0 : 1 + countCuts(tree.above) + countCuts(tree.below);
}
