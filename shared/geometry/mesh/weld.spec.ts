import { describe, expect, it } from 'vitest';
import { randomInteger, seededRandom } from '../../../test/support/random.js';
import * as shapes from '../../../test/support/shapes.js';
import { edgeReport } from './topology.js';
import { weldTriangles } from './weld.js';

const SEED = 5;

/** The slow path: a map of strings. */
function weldByStrings(soup: Float32Array | Float64Array) {
  const numbers = new Map<string, number>();
  const indices: number[] = [];
  for (let i = 0; i < soup.length; i += 3) {
    const key = `${soup[i]! + 0},${soup[i + 1]! + 0},${soup[i + 2]! + 0}`;
    if (!numbers.has(key)) numbers.set(key, numbers.size);
    indices.push(numbers.get(key)!);
  }
  return { vertices: numbers.size, indices };
}

describe(`welding a triangle soup, seed ${SEED}`, () => {
  it.each([Float32Array, Float64Array])('agrees with a map of strings on a %o', (Kind) => {
    const random = seededRandom(SEED);
    // Few values, so that most corners meet; 1/3 is not the same in both precisions.
    const values = [0, -0, 1 / 3, -1 / 3, 2, 1e-30, -7.25];
    const length = 9 * 500;
    const soup = new Kind(
      Array.from({ length }, () => values[randomInteger(random, values.length)]!),
    );
    const slow = weldByStrings(soup);
    const { mesh, degenerateDropped } = weldTriangles(soup);
    const corners = Array.from({ length: soup.length / 3 }, (_, corner) => corner);
    const isKept = (triangle: number) => {
      const [a, b, c] = slow.indices.slice(3 * triangle, 3 * triangle + 3);
      return a !== b && b !== c && c !== a;
    };
    const kept = corners.filter((corner) => isKept(Math.floor(corner / 3)));
    expect(degenerateDropped).toBe((corners.length - kept.length) / 3);
    expect(degenerateDropped).toBeGreaterThan(0);
    expect(mesh.indices.length).toBe(kept.length);
    kept.forEach((corner, i) => {
      for (let axis = 0; axis < 3; axis++) {
        const value = mesh.positions[3 * mesh.indices[i]! + axis]!;
        expect(value).toBe(soup[3 * corner + axis]! + 0);
      }
    });
    expect(new Set(mesh.indices).size).toBe(mesh.positions.length / 3);
  });

  it('closes a solid again that was written corner by corner', () => {
    const { mesh } = shapes.torus(50, 18, 64, 32);
    const { mesh: welded, degenerateDropped } = weldTriangles(shapes.toSoup(mesh));
    expect(degenerateDropped).toBe(0);
    expect(welded.positions.length).toBe(mesh.positions.length);
    expect(edgeReport(welded).closed).toBe(true);
  });

  it('grows its table when no corner meets another', () => {
    const soup = Float32Array.from({ length: 9 * 20_000 }, (_, i) => i);
    const { mesh } = weldTriangles(soup);
    expect(mesh.positions.length).toBe(soup.length);
    expect(mesh.indices.every((index, i) => index === i)).toBe(true);
  });

  it('does not join numbers that differ in the last bit', () => {
    const next = 1 + 2 ** -23;
    const soup = Float32Array.of(1, 0, 0, next, 0, 0, 0, 1, 0);
    expect(weldTriangles(soup).mesh.positions.length / 3).toBe(3);
  });

  it('reads a part of a larger buffer', () => {
    const all = Float32Array.of(9, 9, 9, 0, 0, 0, 1, 0, 0, 0, 1, 0);
    expect([...weldTriangles(all.subarray(3)).mesh.positions]).toEqual([0, 0, 0, 1, 0, 0, 0, 1, 0]);
  });

  it('takes an empty soup and refuses an incomplete triangle', () => {
    expect(weldTriangles(new Float32Array(0)).mesh.indices.length).toBe(0);
    expect(() => weldTriangles(new Float32Array(10))).toThrow(/multiple of 9/);
  });

  it('reports progress that ends in 1 and never falls', () => {
    const heard: number[] = [];
    weldTriangles(new Float32Array(9 * 200_000), (fraction) => heard.push(fraction));
    expect(heard.at(-1)).toBe(1);
    expect(heard.length).toBeGreaterThan(2);
    expect(heard).toEqual([...heard].sort((a, b) => a - b));
  });
});
