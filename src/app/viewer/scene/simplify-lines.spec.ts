import { simplifyLines } from './simplify-lines';

/** A closed contour as segments. */
function contour(points: readonly (readonly [number, number, number])[]): number[] {
  return points.flatMap((point, at) => [
    ...points[(at + points.length - 1) % points.length]!,
    ...point,
  ]);
}

function circle(radius: number, count: number) {
  return contour(
    Array.from({ length: count }, (_, at) => {
      const angle = (2 * Math.PI * at) / count;
      return [radius * Math.cos(angle), radius * Math.sin(angle), 3] as const;
    }),
  );
}

describe('simplifyLines', () => {
  it('makes one segment of a straight run', () => {
    const straight = [0, 1, 2, 3].flatMap((x) => [x, 0, 0, x + 1, 0, 0]);
    expect([...simplifyLines(Float32Array.from(straight), 1e-3)]).toEqual([0, 0, 0, 4, 0, 0]);
  });

  it('keeps corners', () => {
    const square = contour([
      [10, 0, 0],
      [10, 10, 0],
      [0, 10, 0],
      [0, 0, 0],
    ]);
    expect(simplifyLines(Float32Array.from(square), 0.1)).toHaveLength(24);
  });

  it('keeps a fine circle closed and within the tolerance with far fewer segments', () => {
    const radius = 100;
    const lines = simplifyLines(Float32Array.from(circle(radius, 2_000)), 0.2);
    expect(lines.length / 6).toBeLessThan(120);
    for (let at = 0; at < lines.length; at += 6) {
      const next = (at + 6) % lines.length;
      expect([...lines.slice(at + 3, at + 6)]).toEqual([...lines.slice(next, next + 3)]);
      const middle = Math.hypot(
        (lines[at]! + lines[at + 3]!) / 2,
        (lines[at + 1]! + lines[at + 4]!) / 2,
      );
      expect(radius - middle).toBeLessThan(0.2 + 1e-3);
    }
  });

  it('does not join contours that do not hang together', () => {
    const apart = Float32Array.from([0, 0, 0, 1, 0, 0, 2, 0, 0, 3, 0, 0]);
    expect([...simplifyLines(apart, 10)]).toEqual([...apart]);
  });

  it('does not swallow a run that turns back on itself', () => {
    const spike = Float32Array.from([0, 0, 0, 9, 0, 0, 9, 0, 0, 1, 0, 0]);
    expect(simplifyLines(spike, 0.1)).toHaveLength(12);
  });

  it('takes none', () => {
    expect(simplifyLines(new Float32Array(0), 1)).toHaveLength(0);
  });
});
