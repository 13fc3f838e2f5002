import { describe, expect, it } from 'vitest';
import { type CutTree } from '../../shared/jobs/recipe.js';
import { planesOf, withOffsets } from './cut-tree.js';

const leaf: CutTree = { kind: 'leaf' };
const cut = (offset: number, above: CutTree, below: CutTree): CutTree => ({
  kind: 'cut',
  plane: { normal: [0, 0, 1], offset },
  reason: `at ${offset}`,
  above,
  below,
});
const tree = cut(1, cut(2, leaf, cut(3, leaf, leaf)), cut(4, leaf, leaf));
const offsets = (of: CutTree) => planesOf(of).map((plane) => plane.offset);

describe('cut trees', () => {
  it('number their cuts from the root, above before below', () => {
    expect(offsets(tree)).toEqual([1, 2, 3, 4]);
    expect(planesOf(leaf)).toEqual([]);
  });

  it('take new offsets in that order and keep the rest', () => {
    const moved = withOffsets(tree, [10, 20, 30, 40]);
    expect(offsets(moved)).toEqual([10, 20, 30, 40]);
    expect(moved).toMatchObject({ reason: 'at 1', below: { reason: 'at 4' } });
    expect(offsets(tree)).toEqual([1, 2, 3, 4]);
  });

  it('refuse another number of offsets', () => {
    expect(() => withOffsets(tree, [1])).toThrow(/4 cuts was given 1 offset/);
    expect(() => withOffsets(leaf, [1])).toThrow();
  });
});
