import { spreadOffsets } from './spread';
import { type Triple } from './view-parts';

const centre: Triple = [10, 20, 30];
const size: Triple = [100, 60, 200];

describe('spreadOffsets', () => {
  it('moves nothing at fraction 0', () => {
    const offsets = spreadOffsets(
      [
        [0, 0, 0],
        [50, 20, 90],
      ],
      centre,
      size,
      0,
    );
    expect(offsets.flat().every((value) => value === 0)).toBe(true);
  });

  it('moves a piece straight away from the centre of the model, twice as far at twice the fraction', () => {
    const piece: Triple = [40, 20, -30];
    const [half] = spreadOffsets([piece], centre, size, 0.5);
    const [full] = spreadOffsets([piece], centre, size, 1);
    expect(half![0] / half![2]).toBeCloseTo((40 - 10) / (-30 - 30), 12);
    expect(half![1]).toBe(0);
    expect(full).toEqual(half!.map((value) => 2 * value));
  });

  it('keeps mirrored pieces mirrored', () => {
    const left: Triple = [-20, 20, 30];
    const right: Triple = [40, 20, 30];
    const [a, b] = spreadOffsets([left, right], centre, size, 0.7);
    expect(a![0]).toBeCloseTo(-b![0], 12);
  });

  it('parts pieces that share one centre along the shortest axis', () => {
    const offsets = spreadOffsets([centre, centre, centre], centre, size, 1);
    const alongY = offsets.map((offset) => offset[1]);
    expect(new Set(alongY).size).toBe(3);
    expect(offsets.every((offset) => offset[0] === 0 && offset[2] === 0)).toBe(true);
  });

  it('never brings two pieces of a grid nearer to each other (200 random grids, seed 7)', () => {
    let state = 7;
    const random = () => (state = (state * 48271) % 2147483647) / 2147483647;
    for (let round = 0; round < 200; round++) {
      const centres = Array.from({ length: 6 }, (): Triple => [
        random() * 100,
        random() * 60,
        random() * 200,
      ]);
      const offsets = spreadOffsets(centres, [50, 30, 100], size, random());
      for (let a = 0; a < 6; a++)
        for (let b = 0; b < a; b++) {
          const before = Math.hypot(...centres[a]!.map((v, i) => v - centres[b]![i]!));
          const after = Math.hypot(
            ...centres[a]!.map((v, i) => v + offsets[a]![i]! - centres[b]![i]! - offsets[b]![i]!),
          );
          expect(after).toBeGreaterThanOrEqual(before - 1e-9);
        }
    }
  });
});
