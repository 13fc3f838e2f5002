import { cividisAt } from './cividis';
import { wallColours } from './wall-colours';

describe('cividis', () => {
  it('grows steadily lighter, which is what makes it readable without colour', () => {
    // Relative luminance after WCAG 2.2.
    const luminance = (share: number) => {
      const [r, g, b] = cividisAt(share).map((value) =>
        value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4,
      ) as [number, number, number];
      return 0.2126 * r + 0.7152 * g + 0.0722 * b;
    };
    for (let i = 0; i < 40; i++) expect(luminance((i + 1) / 40)).toBeGreaterThan(luminance(i / 40));
    expect(cividisAt(-1)).toEqual(cividisAt(0));
    expect(cividisAt(7)).toEqual(cividisAt(1));
  });
});

describe('wallColours', () => {
  it('gives every corner the colour of its vertex, and what is unknown a neutral one', () => {
    const walls = Float32Array.of(0, 1, 2, 99);
    const colours = wallColours(Uint32Array.of(0, 1, 2, 3, 2, 1), walls, 2);
    const corner = (i: number) => [...colours.slice(3 * i, 3 * i + 3)];
    expect(corner(1)).toEqual(corner(5));
    expect(corner(2)).toEqual(corner(3));
    expect(corner(1)).not.toEqual(corner(2));
    const [r, g, b] = corner(0) as [number, number, number];
    expect(Math.max(r, g, b) - Math.min(r, g, b)).toBeLessThan(0.05);
  });
});
