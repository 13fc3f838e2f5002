import { describe, expect, it } from 'vitest';
import { chainLoops } from './chain-loops.js';

function chain(
  links: readonly (readonly [number, number])[],
  points: readonly (readonly number[])[],
) {
  const from = Int32Array.from(links, ([a]) => a);
  const to = Int32Array.from(links, ([, b]) => b);
  const loops = chainLoops(from, to, links.length, Float64Array.from(points.flat()));
  return Array.from({ length: loops.count }, (_, loop) => [
    ...loops.nodes.subarray(loops.start[loop], loops.start[loop + 1]),
  ]);
}

describe('chaining links into loops', () => {
  const square = [
    [0, 0],
    [1, 0],
    [1, 1],
    [0, 1],
  ];

  it('follows links in any order and starts at the first', () => {
    const links = [
      [2, 3],
      [0, 1],
      [3, 0],
      [1, 2],
    ] as const;
    expect(chain(links, square)).toEqual([[2, 3, 0, 1]]);
  });

  it('leaves out links that lead nowhere and loops of two', () => {
    const links = [
      [0, 1],
      [1, 2],
      [3, 0],
    ] as const;
    expect(chain(links, square)).toEqual([]);
    expect(
      chain(
        [
          [0, 1],
          [1, 0],
        ],
        square,
      ),
    ).toEqual([]);
  });

  it('parts two squares that touch in a corner', () => {
    const points = [...square, [2, 1], [2, 2], [1, 2]];
    const links = [
      [0, 1],
      [1, 2],
      [2, 3],
      [3, 0],
      [2, 4],
      [4, 5],
      [5, 6],
      [6, 2],
    ] as const;
    const loops = chain(links, points).map((loop) => [...loop].sort().join());
    expect(loops.sort()).toEqual(['0,1,2,3', '2,4,5,6']);
  });

  it('goes round a hole that touches the outline in a corner without crossing it', () => {
    const points = [
      [0, 0],
      [4, 0],
      [4, 4],
      [0, 4],
      [2, 1],
      [1, 2],
    ];
    // The hole 0-5-4 runs clockwise and shares corner 0 with the outline.
    const links = [
      [0, 1],
      [1, 2],
      [2, 3],
      [3, 0],
      [0, 5],
      [5, 4],
      [4, 0],
    ] as const;
    expect(chain(links, points)).toEqual([[0, 1, 2, 3, 0, 5, 4]]);
  });
});
