import { gridStepFor, lengthLabel, scaleBarFor } from './scale-steps';

describe('scaleBarFor', () => {
  it('is a round length that is as long as fits, at every zoom from 0.001 to 1000 px a mm', () => {
    for (let power = -3; power <= 3; power += 0.07) {
      const pixelsPerMm = 10 ** power;
      const { lengthMm, widthPx } = scaleBarFor(pixelsPerMm, 120);
      const leading = Number((lengthMm / 10 ** Math.floor(Math.log10(lengthMm) + 1e-9)).toFixed(6));
      expect([1, 2, 5]).toContain(leading);
      expect(widthPx).toBeCloseTo(lengthMm * pixelsPerMm, 9);
      expect(widthPx).toBeLessThanOrEqual(120 * (1 + 1e-9));
      // The next round length is at most 2.5 times as long, so the bar is never shorter than 40 %.
      expect(widthPx).toBeGreaterThan(120 / 2.5 - 1e-6);
    }
  });

  it('keeps a length that is a step itself', () => {
    expect(scaleBarFor(1, 100).lengthMm).toBe(100);
    expect(scaleBarFor(1, 200).lengthMm).toBe(200);
  });
});

describe('gridStepFor', () => {
  it.each([
    [5, 1],
    [100, 10],
    [600, 10],
    [601, 50],
    [2_000, 50],
    [5_000, 100],
  ])('under an object of %d mm lines stand %d mm apart', (longest, step) => {
    expect(gridStepFor(longest)).toBe(step);
  });

  it('has a step for objects beyond every printer', () => {
    expect(gridStepFor(1e9)).toBe(10_000);
  });
});

describe('lengthLabel', () => {
  it('writes millimetres and, from a thousand of them, metres', () => {
    expect(lengthLabel(50)).toBe('50 mm');
    expect(lengthLabel(0.5)).toBe('0.5 mm');
    expect(lengthLabel(2_000)).toBe('2 m');
  });
});
