import { pictureOf } from './plan-scene';
import { samplePlan } from './testing/sample-plan';

const surface = (name: string) => ({
  name,
  positions: new Float32Array(9),
  indices: new Uint32Array([0, 1, 2]),
});

describe('pictureOf', () => {
  const result = samplePlan().result!;

  it('gives every piece its surface and every seam its outline by name, whatever their order', () => {
    const outline = new Float32Array(6).fill(2);
    const picture = pictureOf(result, {
      surfaces: ['P03', 'P01', 'P02'].map(surface),
      lines: [
        { name: 'seam-2', positions: outline },
        { name: 'seam-1', positions: new Float32Array(6) },
      ],
    });
    expect(picture.pieces.map(({ name }) => name)).toEqual(['P01', 'P02', 'P03']);
    expect(picture.pieces.every(({ name, surface: own }) => own.name === name)).toBe(true);
    expect(picture.seams[1]).toEqual({ between: ['P02', 'P03'], positions: outline });
  });

  it('leaves out a piece without a surface and keeps a seam without an outline', () => {
    const picture = pictureOf(result, { surfaces: [surface('P02')], lines: [] });
    expect(picture.pieces.map(({ name }) => name)).toEqual(['P02']);
    expect(picture.seams).toHaveLength(2);
    expect(picture.seams[0]!.positions).toHaveLength(0);
  });
});
