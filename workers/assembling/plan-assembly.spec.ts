import { beforeAll, describe, expect, it } from 'vitest';
import { cutAt, jointed, leaf } from '../../test/support/jointed.js';
import { box, torusKnot } from '../../test/support/shapes.js';
import { type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { loadSolids, type Solids } from '../solids/solid-kernel.js';
import { planAssembly } from './plan-assembly.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

function assembly(mesh: TriangleMesh, tree: PlaneTree) {
  const { plain, seams, dress } = jointed(solids, mesh, tree);
  const pieces = plain.map(({ name, path }) => ({ name, path, mesh: dress(name).mesh }));
  return { moves: planAssembly(pieces, seams), pieces, seams };
}

/** Every piece is in one object at the end, and no move takes a piece that is there already. */
function expectWhole({ moves, pieces, seams }: ReturnType<typeof assembly>, parts = 1): void {
  const groups = new Map(pieces.map(({ name }) => [name, new Set([name])]));
  for (const { moved, onto } of moves) {
    // Several groups may come together; each comes whole.
    for (const name of moved) for (const other of groups.get(name)!) expect(moved).toContain(other);
    for (const name of onto) expect(groups.get(name)).toEqual(new Set(onto));
    const joined = new Set([...moved, ...onto]);
    for (const name of joined) groups.set(name, joined);
  }
  expect(new Set(groups.values()).size).toBe(parts);
  expect(moves.flatMap((move) => [...move.seams]).sort((a, b) => a - b)).toEqual(
    seams.map((_, k) => k),
  );
}

const across = (axis: 0 | 1 | 2, offset: number) => ({
  normal: [0, 1, 2].map((k) => (k === axis ? 1 : 0)) as unknown as [number, number, number],
  offset,
});

describe('planAssembly', () => {
  it('puts slices on one after another, each straight along the seams', () => {
    const found = assembly(
      box([0, 0, 0], [90, 40, 30]).mesh,
      cutAt(across(0, 30), cutAt(across(0, 60)), leaf),
    );
    expectWhole(found);
    expect(found.moves).toHaveLength(2);
    for (const { moved, direction, isFree } of found.moves) {
      expect(moved).toHaveLength(1);
      expect(Math.abs(direction[0])).toBe(1);
      expect(isFree).toBe(true);
    }
  });

  it('glues rows before it joins them where a piece would meet two seams at once', () => {
    const row = cutAt(across(1, 20));
    const found = assembly(box([0, 0, 0], [60, 40, 30]).mesh, cutAt(across(0, 30), row, row));
    expectWhole(found);
    expect(found.moves.map(({ moved }) => moved.length)).toEqual([1, 1, 2]);
    expect(found.moves.every(({ isFree }) => isFree)).toBe(true);
  });

  it('joins what falls apart on both sides of a cut without ever locking itself in', () => {
    // A knot crosses a plane many times: both halves are several loose pieces.
    const half = cutAt(across(1, 3));
    const found = assembly(torusKnot(60, 24, 150, 20), cutAt(across(0, 2), half, half));
    expect(found.pieces.length).toBeGreaterThan(6);
    expectWhole(found);
    expect(found.moves.every(({ isFree }) => isFree)).toBe(true);
  });

  it('tells a move that has no free way', () => {
    // A pocket: the block inside can only leave upward, its seam wants it to leave sideways.
    const pieces = [
      { name: 'P01', path: 'a', mesh: box([-30, -30, 0], [-10, 30, 20]).mesh },
      { name: 'P02', path: 'b', mesh: box([-10, -10, 0], [10, 10, 20]).mesh },
      { name: 'P03', path: 'a', mesh: box([30, -30, 0], [50, 30, 20]).mesh },
    ];
    const seams = [
      { above: 'P02', below: 'P01', normal: [1, 0, 0] as const },
      { above: 'P03', below: 'P01', normal: [0, 0, 1] as const },
    ];
    const moves = planAssembly(pieces, seams);
    expect(moves).toHaveLength(2);
    expect(moves[0]!.isFree).toBe(true);
    const walled = pieces.map((piece) =>
      piece.name === 'P03' ? { ...piece, mesh: box([12, -30, 0], [50, 30, 20]).mesh } : piece,
    );
    const forced = planAssembly(walled, [
      { above: 'P03', below: 'P01', normal: [0, 0, 1] },
      { above: 'P02', below: 'P01', normal: [1, 0, 0] },
    ]);
    // Either way round one of them has to pass the other.
    expect(forced).toHaveLength(2);
    expect(forced.map(({ moved }) => moved.join())).toEqual(['P02', 'P03']);
  });

  it('has nothing to say about one piece or pieces that touch nothing', () => {
    const mesh = box([0, 0, 0], [10, 10, 10]).mesh;
    expect(planAssembly([{ name: 'P01', path: '', mesh }], [])).toEqual([]);
  });
});
