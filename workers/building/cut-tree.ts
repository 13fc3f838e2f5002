import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { type CutTree } from '../../shared/jobs/recipe.js';

/** The planes of a tree in the order its cuts are numbered: root first, above before below. */
export function planesOf(tree: CutTree): Plane[] {
  if (tree.kind === 'leaf') return [];
  return [tree.plane, ...planesOf(tree.above), ...planesOf(tree.below)];
}

/**
 * The same tree with other offsets (mm), in the numbering of {@link planesOf}. Throws when their
 * number is not the number of cuts.
 */
export function withOffsets(tree: CutTree, offsets: readonly number[]): CutTree {
  let next = 0;
  const rebuilt = (node: CutTree): CutTree => {
    if (node.kind === 'leaf') return node;
    const plane = { normal: node.plane.normal, offset: offsets[next++] };
    return { ...node, plane, above: rebuilt(node.above), below: rebuilt(node.below) };
  };
  const result = rebuilt(tree);
  if (next !== offsets.length)
    throw new Error(`A tree of ${next} cuts was given ${offsets.length} offsets.`);
  return result;
}
