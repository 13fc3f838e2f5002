import { describe, expect, it } from 'vitest';
import { demoModels } from './demo-models.js';
import { toBinaryStl } from './solids/binary-stl.js';

/** Reads the bytes again and welds equal corners, as whoever opens the file will. */
function readBack(bytes: Buffer) {
  const count = bytes.readUInt32LE(80);
  const numberOf = new Map<string, number>();
  const corners: number[][] = [];
  const triangles: number[][] = [];
  for (let facet = 0; facet < count; facet++) {
    triangles.push(
      [0, 1, 2].map((corner) => {
        const at = 84 + 50 * facet + 12 + 12 * corner;
        const point = [0, 4, 8].map((offset) => bytes.readFloatLE(at + offset));
        const key = point.join(' ');
        if (!numberOf.has(key)) {
          numberOf.set(key, corners.length);
          corners.push(point);
        }
        return numberOf.get(key) as number;
      }),
    );
  }
  return { corners, triangles };
}

function edgesOf(triangles: number[][]): Map<string, number> {
  const edges = new Map<string, number>();
  for (const [a, b, c] of triangles as [number, number, number][])
    for (const key of [`${a} ${b}`, `${b} ${c}`, `${c} ${a}`])
      edges.set(key, (edges.get(key) ?? 0) + 1);
  return edges;
}

function shellCount(triangles: number[][], vertexCount: number): number {
  const parent = Array.from({ length: vertexCount }, (_, vertex) => vertex);
  const find = (vertex: number): number => {
    let at = vertex;
    while (parent[at] !== at) at = parent[at] = parent[parent[at] as number] as number;
    return at;
  };
  for (const [a, b, c] of triangles as [number, number, number][]) {
    parent[find(a)] = find(b);
    parent[find(b)] = find(c);
  }
  return new Set(parent.map((_, vertex) => find(vertex))).size;
}

function volumeOf({ corners, triangles }: ReturnType<typeof readBack>): number {
  return triangles.reduce((sum, triangle) => {
    const [a, b, c] = triangle.map((vertex) => corners[vertex]) as [number, number, number][];
    const [[ax, ay, az], [bx, by, bz], [cx, cy, cz]] = [a, b, c] as [
      [number, number, number],
      [number, number, number],
      [number, number, number],
    ];
    return (
      sum + (ax * (by * cz - bz * cy) + ay * (bz * cx - bx * cz) + az * (bx * cy - by * cx)) / 6
    );
  }, 0);
}

/** What each should hold, mm³: bounds computed by hand from its measures. */
const bounds: Record<string, { litres: [number, number]; longestMm: [number, number] }> = {
  // Wall of 3 mm on about 0.7 m², less the windows.
  'Harbour bell cowl': { litres: [1.3, 2.4], longestMm: [619, 621] },
  // Plate of π·300²·16 mm = 4.5 l, under a dome of at most 26 mm.
  'Moon disc': { litres: [4.5, 12], longestMm: [599, 601] },
  // Body about 280 × 235 mm, foot and neck.
  Heron: { litres: [10, 25], longestMm: [1600, 1720] },
  // Pappus: π(154² − 150²)·(330·π/2 + 280) = 3.05 l, and two flanges.
  'Ventilator elbow': { litres: [3.05, 5], longestMm: [640, 680] },
};

describe.each(demoModels)('the demo model $name', ({ name, make, fileName }) => {
  const mesh = readBack(toBinaryStl(make(), name));

  it('is one closed, outward oriented shell after a round trip through its file', () => {
    const edges = edgesOf(mesh.triangles);
    const bad = [...edges].filter(([edge, uses]) => {
      const [a, b] = edge.split(' ');
      return uses !== 1 || edges.get(`${b} ${a}`) !== 1;
    });
    expect(bad).toEqual([]);
    expect(shellCount(mesh.triangles, mesh.corners.length)).toBe(1);
  });

  it('has the volume and the length of its measures', () => {
    const expected = bounds[name];
    const litres = volumeOf(mesh) / 1e6;
    expect(litres).toBeGreaterThan(expected?.litres[0] ?? NaN);
    expect(litres).toBeLessThan(expected?.litres[1] ?? NaN);
    const sizes = [0, 1, 2].map((axis) => {
      const values = mesh.corners.map((corner) => corner[axis] ?? NaN);
      return values.reduce((m, v) => Math.max(m, v)) - values.reduce((m, v) => Math.min(m, v));
    });
    expect(Math.max(...sizes)).toBeGreaterThan(expected?.longestMm[0] ?? NaN);
    expect(Math.max(...sizes)).toBeLessThan(expected?.longestMm[1] ?? NaN);
  });

  it('has no collapsed triangle and a plain file name', () => {
    expect(fileName).toMatch(/^[a-z-]+\.stl$/);
    expect(mesh.triangles.every((triangle) => new Set(triangle).size === 3)).toBe(true);
    expect(mesh.triangles.length).toBeGreaterThan(10_000);
  });
});
