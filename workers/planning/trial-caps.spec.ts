import { beforeAll, describe, expect, it } from 'vitest';
import { seededRandom } from '../../test/support/random.js';
import { loadSolids, type Solids } from '../solids/solid-kernel.js';
import { trialCaps } from './trial-caps.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

/** A dented loop about a point, counter-clockwise. */
function star(points: number, x: number, y: number, reach: number, random: () => number) {
  return Float64Array.from({ length: 2 * points }, (_, k) => {
    const angle = (2 * Math.PI * (k >> 1)) / points;
    const r = reach * (0.4 + 0.6 * random());
    return k % 2 === 0 ? x + r * Math.cos(angle) : y + r * Math.sin(angle);
  });
}

/** One radius serves both coordinates of a point. */
function dented(points: number, x: number, y: number, reach: number, seed: number) {
  const radii = Array.from({ length: points }, seededRandom(seed));
  let k = 0;
  return star(points, x, y, reach, () => radii[k++ >> 1]!);
}

const reversed = (loop: Float64Array) =>
  Float64Array.from({ length: loop.length }, (_, k) =>
    k % 2 === 0 ? loop[loop.length - 2 - k]! : loop[loop.length - k]!,
  );

function areas(loops: readonly Float64Array[], corners: Uint32Array) {
  const xy = loops.flatMap((loop) => [...loop]);
  let signed = 0;
  let absolute = 0;
  for (let t = 0; t < corners.length; t += 3) {
    const [a, b, c] = [0, 1, 2].map((k) => 2 * corners[t + k]!) as [number, number, number];
    const twice =
      (xy[b]! - xy[a]!) * (xy[c + 1]! - xy[a + 1]!) - (xy[b + 1]! - xy[a + 1]!) * (xy[c]! - xy[a]!);
    signed += twice / 2;
    absolute += Math.abs(twice) / 2;
  }
  return { signed, absolute };
}

/** Every loop edge once along its direction, every other edge both ways. */
function bordersOnce(loops: readonly Float64Array[], corners: Uint32Array): boolean {
  const count = new Map<string, number>();
  for (let t = 0; t < corners.length; t += 3)
    for (let k = 0; k < 3; k++) {
      const [a, b] = [corners[t + k]!, corners[t + ((k + 1) % 3)]!];
      const key = a < b ? `${a} ${b}` : `${b} ${a}`;
      count.set(key, (count.get(key) ?? 0) + (a < b ? 1 : -1));
    }
  let first = 0;
  for (const loop of loops) {
    const points = loop.length / 2;
    for (let k = 0; k < points; k++) {
      const [a, b] = [first + k, first + ((k + 1) % points)];
      const key = a < b ? `${a} ${b}` : `${b} ${a}`;
      count.set(key, (count.get(key) ?? 0) - (a < b ? 1 : -1));
    }
    first += points;
  }
  return [...count.values()].every((left) => left === 0);
}

describe('trialCaps', () => {
  it('covers dented loops with holes exactly, as manifold-3d does (200 seeded cases)', () => {
    for (let seed = 1; seed <= 200; seed++) {
      const outer = dented(12 + (seed % 60), 0, 0, 100, seed);
      const hole = reversed(dented(5 + (seed % 9), 0, 0, 30, 1000 + seed));
      const apart = dented(7, 300, 20, 40, 2000 + seed);
      const loops = [outer, hole, apart];
      const corners = trialCaps(loops);
      const { signed, absolute } = areas(loops, corners);
      const judge = areas(loops, solids.triangulate(loops)).signed;
      expect(Math.abs(signed / judge - 1), `seed ${seed}`).toBeLessThan(1e-9);
      expect(Math.abs(absolute / judge - 1), `seed ${seed}`).toBeLessThan(1e-9);
      expect(bordersOnce(loops, corners), `seed ${seed}`).toBe(true);
    }
  });

  it('keeps every edge of loops that cross themselves or have points on a line', () => {
    const bow = Float64Array.from([0, 0, 10, 10, 10, 0, 0, 10]);
    const line = Float64Array.from([0, 0, 5, 0, 10, 0, 10, 5, 10, 10, 0, 10, 0, 5]);
    for (const loop of [bow, line]) expect(bordersOnce([loop], trialCaps([loop]))).toBe(true);
    expect(areas([line], trialCaps([line])).absolute).toBeCloseTo(100, 9);
  });

  it('answers very long loops by fans', () => {
    const loop = dented(1500, 0, 0, 100, 5);
    expect(trialCaps([loop])).toHaveLength(3 * 1498);
  });
});
