import { boxOf, wholeModel } from './scaled-parts';

const a = {
  name: 'model',
  positions: new Float32Array([0, 0, 0, 2, 0, 0, 0, 1, -1]),
  indices: new Uint32Array([0, 1, 2]),
};
const b = { ...a, positions: a.positions.map((value) => value + 3) };

describe('boxOf', () => {
  it('spans all surfaces', () => {
    expect(boxOf([a, b])).toEqual({ min: [0, 0, -1], size: [5, 4, 4] });
  });

  it('is zero without a vertex', () => {
    expect(boxOf([])).toEqual({ min: [0, 0, 0], size: [0, 0, 0] });
  });
});

describe('wholeModel', () => {
  it('is the model in millimetres with its centre', () => {
    const piece = wholeModel({ surfaces: [a], lines: [] }, [50.8, 25.4, 25.4])!;
    expect([...piece.surface.positions.slice(3, 6)]).toEqual([Math.fround(50.8), 0, 0]);
    expect(piece.centreMm[0]).toBeCloseTo(25.4, 9);
    expect(piece.centreMm[2]).toBeCloseTo(-12.7, 9);
  });

  it('joins several surfaces into one', () => {
    const { surface } = wholeModel({ surfaces: [a, b], lines: [] }, [5, 4, 4])!;
    expect([...surface.indices]).toEqual([0, 1, 2, 3, 4, 5]);
    expect(surface.positions).toHaveLength(18);
  });

  it('is nothing when there is no surface or no size to it', () => {
    const point = { ...a, positions: new Float32Array(9) };
    expect(wholeModel({ surfaces: [], lines: [] }, [1, 1, 1])).toBeNull();
    expect(wholeModel({ surfaces: [point], lines: [] }, [1, 1, 1])).toBeNull();
  });
});
