import { describe, expect, it } from 'vitest';
import { zipLoops } from './zip-loops.js';

const ring = (radius: number, sides: number, turn = 0) =>
  Float64Array.from(
    Array.from({ length: sides }, (_, k) => {
      const angle = turn + (2 * Math.PI * k) / sides;
      return [radius * Math.cos(angle), radius * Math.sin(angle)];
    }).flat(),
  );
const reversed = (loop: Float64Array) =>
  Float64Array.from(loop.keys(), (i) => loop[loop.length - 2 - (i - (i % 2)) + (i % 2)]!);

/** Every border edge once, in its loop's direction, and every inner edge both ways. */
function expectTiles(
  corners: Uint32Array,
  outer: readonly Float64Array[],
  inner: readonly Float64Array[],
): void {
  const edges = new Set<string>();
  for (let k = 0; k < corners.length; k += 3)
    for (let side = 0; side < 3; side++) {
      const edge = `${corners[k + side]} ${corners[k + ((side + 1) % 3)]}`;
      expect(edges.has(edge)).toBe(false);
      edges.add(edge);
    }
  const border = new Set<string>();
  let first = 0;
  for (const loop of [...outer, ...inner.map(reversed)]) {
    const points = loop.length / 2;
    for (let k = 0; k < points; k++) border.add(`${first + k} ${first + ((k + 1) % points)}`);
    first += points;
  }
  const open = [...edges].filter((edge) => !edges.has(edge.split(' ').reverse().join(' ')));
  expect(new Set(open)).toEqual(border);
}

describe('zipLoops', () => {
  it('tiles the strip between rings of different counts of points', () => {
    for (const [many, few] of [
      [64, 17],
      [9, 40],
      [4, 4],
    ] as const) {
      const [outer, inner] = [[ring(10, many, 0.3)], [ring(6, few)]];
      const corners = zipLoops(outer, inner);
      expect(corners).not.toBeNull();
      expect(corners!.length / 3).toBe(many + few);
      expectTiles(corners!, outer, inner);
    }
  });

  it('pairs the hole of a washer with the hole of its bevel', () => {
    const outer = [ring(20, 32), reversed(ring(10, 24))];
    const inner = [reversed(ring(10.4, 20)), ring(19.6, 28)];
    const corners = zipLoops(outer, inner);
    expect(corners).not.toBeNull();
    expectTiles(corners!, outer, inner);
  });

  it('gives up where the walk would fold over or a loop has no partner', () => {
    expect(zipLoops([ring(10, 12)], [])).toBeNull();
    // An inner loop that leaves the outer one.
    expect(zipLoops([ring(10, 12)], [ring(12, 12)])).toBeNull();
  });
});
