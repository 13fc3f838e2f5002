import type { PolygonTriangulator } from '../../shared/geometry/cutting/cut-mesh.js';

/** The parts of manifold-3d that its public `triangulate` is made of. Called directly because the
 *  public wrapper leaves its vectors to a finaliser that never runs inside a long synchronous job. */
interface Vector<T> {
  push_back(value: T): void;
  size(): number;
  get(index: number): T;
  delete(): void;
}
interface TriangulationModule {
  Vector_vec2: new () => Vector<{ x: number; y: number }>;
  Vector2_vec2: new () => Vector<Vector<{ x: number; y: number }>>;
  _Triangulate(
    loops: Vector<Vector<{ x: number; y: number }>>,
    epsilon: number,
    allowConvex: boolean,
  ): Vector<ArrayLike<number>>;
}

/** Let the triangulator derive its tolerance from the size of the loops. */
const ownEpsilon = -1;

/**
 * Cap triangulation by manifold-3d's ear clipper. Loops are flat xy, mm, outers CCW, holes CW; every
 * loop edge comes back exactly once as a boundary, collinear and repeated points included. Loops of
 * fewer than three points bound nothing and get no triangle, but keep their place in the numbering.
 * Throws on coordinates that are not finite: the ear clipper would answer with nonsense.
 * Cost: about 25 µs a point up to 10 000 points a loop, then growing (measured: 100 000 points 39 s).
 */
export function createTriangulator(module: unknown): PolygonTriangulator {
  const { Vector_vec2, Vector2_vec2, _Triangulate } = module as TriangulationModule;
  return (loops) => {
    // The ear clipper traps on an empty loop, so only real ones are handed over.
    const numbers: number[] = [];
    const real = new Vector2_vec2();
    try {
      let first = 0;
      for (const loop of loops) {
        const points = loop.length / 2;
        if (points >= 3) {
          const vector = new Vector_vec2();
          try {
            for (let i = 0; i < points; i++) {
              const x = loop[2 * i];
              const y = loop[2 * i + 1];
              if (!Number.isFinite(x) || !Number.isFinite(y))
                throw new Error('A section loop holds a coordinate that is not finite.');
              vector.push_back({ x, y });
              numbers.push(first + i);
            }
            real.push_back(vector);
          } finally {
            vector.delete();
          }
        }
        first += points;
      }
      if (numbers.length === 0) return new Uint32Array(0);
      const result = _Triangulate(real, ownEpsilon, true);
      try {
        const count = result.size();
        const triangles = new Uint32Array(3 * count);
        for (let i = 0; i < count; i++) {
          const corner = result.get(i);
          triangles[3 * i] = numbers[corner[0]];
          triangles[3 * i + 1] = numbers[corner[1]];
          triangles[3 * i + 2] = numbers[corner[2]];
        }
        return triangles;
      } finally {
        result.delete();
      }
    } finally {
      real.delete();
    }
  };
}
