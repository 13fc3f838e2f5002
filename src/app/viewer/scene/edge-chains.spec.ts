import { drawableEdges } from './edge-chains';

const extent = 100;

function drawn(edges: readonly (readonly [number, number, number])[], placeCount: number) {
  const ends = Uint32Array.from(edges.flatMap(([from, to]) => [from, to]));
  const lengths = Float32Array.from(edges.map(([, , length]) => length));
  return [...drawableEdges(ends, lengths, placeCount, extent)];
}

describe('drawableEdges', () => {
  it('drops a short chain with loose ends', () => {
    expect(
      drawn(
        [
          [0, 1, 1],
          [1, 2, 1],
        ],
        3,
      ),
    ).toEqual([0, 0]);
  });

  it('keeps a chain that is long enough, its short links among it', () => {
    expect(
      drawn(
        [
          [0, 1, 1],
          [1, 2, 9],
        ],
        3,
      ),
    ).toEqual([1, 1]);
  });

  it('keeps a small closed loop', () => {
    expect(
      drawn(
        [
          [0, 1, 0.5],
          [1, 2, 0.5],
          [2, 0, 0.5],
        ],
        3,
      ),
    ).toEqual([1, 1, 1]);
  });

  it('judges chains apart from each other', () => {
    expect(
      drawn(
        [
          [0, 1, 1],
          [2, 3, 50],
        ],
        4,
      ),
    ).toEqual([0, 1]);
  });

  it('takes none', () => {
    expect(drawn([], 0)).toEqual([]);
  });
});
