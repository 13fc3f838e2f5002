import { beforeAll, describe, expect, it } from 'vitest';
import { randomInteger, seededRandom } from '../../test/support/random.js';
import { loadSolids, type Solids } from './solid-kernel.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

/** A star-shaped loop around a point, counter-clockwise or clockwise. */
function starLoop(
  random: () => number,
  points: number,
  radius: number,
  [x, y]: readonly [number, number],
  clockwise = false,
): Float64Array {
  const loop = new Float64Array(2 * points);
  for (let i = 0; i < points; i++) {
    const angle = ((clockwise ? -1 : 1) * 2 * Math.PI * (i + 0.8 * random())) / points;
    const r = radius * (0.6 + 0.4 * random());
    loop[2 * i] = x + r * Math.cos(angle);
    loop[2 * i + 1] = y + r * Math.sin(angle);
  }
  return loop;
}

function areaOfLoop(loop: Float64Array): number {
  let twofold = 0;
  for (let i = 0; i < loop.length; i += 2) {
    const j = (i + 2) % loop.length;
    twofold += loop[i] * loop[j + 1] - loop[j] * loop[i + 1];
  }
  return twofold / 2;
}

/** Every loop edge bounds exactly one triangle in its direction; every other edge is used once each way. */
function expectBoundary(loops: readonly Float64Array[], triangles: Uint32Array): void {
  const used = new Map<string, number>();
  const count = (from: number, to: number, by: number) => {
    const key = `${from} ${to}`;
    used.set(key, (used.get(key) ?? 0) + by);
  };
  for (let i = 0; i < triangles.length; i += 3)
    for (let k = 0; k < 3; k++) count(triangles[i + k], triangles[i + ((k + 1) % 3)], 1);
  expect([...used.values()].every((times) => times === 1)).toBe(true);
  let first = 0;
  for (const loop of loops) {
    const points = loop.length / 2;
    for (let i = 0; points >= 3 && i < points; i++)
      count(first + i, first + ((i + 1) % points), -1);
    first += points;
  }
  for (const [key, times] of used) {
    if (times === 0) continue;
    const [from, to] = key.split(' ');
    expect(times).toBe(1);
    expect(used.get(`${to} ${from}`)).toBe(1);
  }
}

function areaOfTriangles(loops: readonly Float64Array[], triangles: Uint32Array): number {
  const points = loops.flatMap((loop) => [...loop]);
  let twofold = 0;
  for (let i = 0; i < triangles.length; i += 3) {
    const [a, b, c] = [2 * triangles[i], 2 * triangles[i + 1], 2 * triangles[i + 2]];
    twofold +=
      (points[b] - points[a]) * (points[c + 1] - points[a + 1]) -
      (points[b + 1] - points[a + 1]) * (points[c] - points[a]);
  }
  return twofold / 2;
}

describe('triangulating the loops of a cap', () => {
  for (const seed of [1, 2, 3, 4, 5, 6, 7, 8])
    it(`keeps every edge and the area, holes and separate outlines included (seed ${seed})`, () => {
      const random = seededRandom(seed);
      const loops: Float64Array[] = [];
      for (let island = 0; island < 4; island++) {
        const centre = [100 * island, 50] as const;
        loops.push(starLoop(random, 3 + randomInteger(random, 300), 40, centre));
        if (random() < 0.7)
          loops.push(starLoop(random, 3 + randomInteger(random, 60), 10, centre, true));
      }
      const triangles = solids.triangulate(loops);
      expectBoundary(loops, triangles);
      const area = loops.reduce((sum, loop) => sum + areaOfLoop(loop), 0);
      expect(areaOfTriangles(loops, triangles)).toBeCloseTo(area, 6);
    });

  it('keeps points on straight edges and points that fall together', () => {
    const loops = [Float64Array.of(0, 0, 5, 0, 5, 0, 10, 0, 10, 10, 0, 10)];
    expectBoundary(loops, solids.triangulate(loops));
    expect(solids.triangulate(loops).length).toBe(12);
  });

  it('numbers vertices through all loops, also across loops that bound nothing', () => {
    const square = Float64Array.of(0, 0, 1, 0, 1, 1, 0, 1);
    const loops = [new Float64Array(0), Float64Array.of(5, 5, 6, 6), square];
    const triangles = solids.triangulate(loops);
    expect([...new Set(triangles)].sort()).toEqual([2, 3, 4, 5]);
    expectBoundary(loops, triangles);
    expect(solids.triangulate([]).length).toBe(0);
  });

  it('refuses coordinates that are not finite', () => {
    expect(() => solids.triangulate([Float64Array.of(0, 0, NaN, 0, 1, 1)])).toThrow(/not finite/);
  });

  it('frees what a scope keeps, also when its block throws', () => {
    const freed: string[] = [];
    const handle = (name: string) => ({ delete: () => void freed.push(name) });
    expect(solids.withSolids(({ keep }) => (keep(handle('a')), keep(handle('b')), 7))).toBe(7);
    expect(() =>
      solids.withSolids(({ keep }) => {
        keep(handle('c'));
        throw new Error('broken');
      }),
    ).toThrow('broken');
    expect(freed).toEqual(['b', 'a', 'c']);
  });
});
