import { describe, expect, it } from 'vitest';
import { box, cone, join, prism, sphere } from '../../../test/support/shapes.js';
import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { type Vector3 } from '../vectors/plane.js';
import { columnSupport, heldColumns } from './column-support.js';

const up: Vector3 = [0, 0, 1];
const support = (
  mesh: TriangleMesh,
  direction: Vector3 = up,
  pitchMm = 0.5,
  overhangDegrees = 45,
) => columnSupport({ mesh, up: direction, pitchMm, overhangDegrees });

/** A bar 100 × 20 × 20 on a stem 20 × 20 × 60, one solid. */
function tee(): TriangleMesh {
  // Two boxes that touch in a face: columns do not mind.
  return join([box([-10, -10, 0], [10, 10, 60]).mesh, box([-50, -10, 60], [50, 10, 80]).mesh]);
}

describe('columnSupport against closed forms', () => {
  it('of a ball on the plate: (π·h³/3-type cap integral) 27,110 mm³ for R = 50 at 45°', () => {
    const { volumeMm3, areaMm2 } = support(sphere(50, 256, 128).mesh);
    // Computed: ∫ over r < R/√2 of R − √(R² − r²), that is πR³·(1/2 − 2/3·(1 − 2^(−3/2))).
    const exact = Math.PI * 50 ** 3 * (1 / 2 - (2 / 3) * (1 - 2 ** -1.5));
    expect(exact).toBeCloseTo(27_110, -1);
    expect(Math.abs(volumeMm3 / exact - 1)).toBeLessThan(0.01);
    expect(Math.abs(areaMm2 / ((Math.PI * 50 ** 2) / 2) - 1)).toBeLessThan(0.01);
  });

  it('of a ball whose every down-facing facet counts: πR³/3', () => {
    const { volumeMm3 } = support(sphere(50, 256, 128).mesh, up, 0.5, 0);
    expect(Math.abs(volumeMm3 / ((Math.PI * 50 ** 3) / 3) - 1)).toBeLessThan(0.01);
  });

  it('of a lying cylinder: 0.12882·R²·L', () => {
    const { volumeMm3 } = support(prism(50, 100, 720).mesh, [1, 0, 0]);
    expect(Math.abs(volumeMm3 / (0.12882 * 50 ** 2 * 100) - 1)).toBeLessThan(0.01);
  });

  it('of a T: 96,000 mm³ upright, none inverted', () => {
    expect(Math.abs(support(tee()).volumeMm3 / 96_000 - 1)).toBeLessThan(0.01);
    expect(support(tee(), [0, 0, -1]).volumeMm3).toBe(0);
  });

  it('of a cube on a face and a cone point up: none', () => {
    expect(support(box([0, 0, 0], [40, 40, 40]).mesh)).toEqual({ volumeMm3: 0, areaMm2: 0 });
    expect(support(cone(40, 80, 64).mesh).volumeMm3).toBe(0);
  });

  it('of a cone point down: the space under its side, its slope being less than 45°', () => {
    // Computed: a cylinder less the cone: 2/3·πR²h.
    const { volumeMm3 } = support(cone(60, 30, 256).mesh, [0, 0, -1]);
    expect(Math.abs(volumeMm3 / ((2 / 3) * Math.PI * 60 ** 2 * 30) - 1)).toBeLessThan(0.01);
  });
});

describe('columnSupport', () => {
  it('converges with the pitch', () => {
    const exact = Math.PI * 50 ** 3 * (1 / 2 - (2 / 3) * (1 - 2 ** -1.5));
    const errors = [8, 4, 1].map((pitch) =>
      Math.abs(support(sphere(50, 512, 256).mesh, up, pitch).volumeMm3 / exact - 1),
    );
    expect(errors[2]).toBeLessThan(0.01);
    expect(errors[2]).toBeLessThanOrEqual(Math.max(errors[0]!, errors[1]!));
  });

  it('does not depend on how the plane is turned about the build direction', () => {
    const c = Math.cos(0.7);
    const s = Math.sin(0.7);
    const { positions, indices } = tee();
    const turned = positions.map((_, k) =>
      k % 3 === 0
        ? c * positions[k]! - s * positions[k + 1]!
        : k % 3 === 1
          ? s * positions[k - 1]! + c * positions[k]!
          : positions[k]!,
    );
    const { volumeMm3 } = support({ positions: turned, indices });
    expect(Math.abs(volumeMm3 / 96_000 - 1)).toBeLessThan(0.01);
  });

  it('counts down to the solid below, not through it', () => {
    // A plate 20 mm above a larger plate.
    const mesh = join([box([0, 0, 0], [60, 60, 5]).mesh, box([10, 10, 25], [50, 50, 30]).mesh]);
    expect(support(mesh).volumeMm3).toBeCloseTo(40 * 40 * 20, -2);
  });

  it('needs none for an empty mesh and refuses columns beyond measure', () => {
    expect(support({ positions: new Float64Array(0), indices: new Uint32Array(0) })).toEqual({
      volumeMm3: 0,
      areaMm2: 0,
    });
    expect(() => support(box([0, 0, 0], [1e4, 1e4, 1]).mesh, up, 0.1)).toThrow(RangeError);
  });

  it('lets level faces between near walls carry themselves, and no others', () => {
    // A gate: two posts 12 mm apart with a lintel, and a ledge that sticks out on one side.
    const mesh = join([
      box([0, 0, 0], [10, 20, 30]).mesh,
      box([22, 0, 0], [32, 20, 30]).mesh,
      box([0, 0, 30], [40, 20, 40]).mesh,
    ]);
    const of = (bridgeMm: number) =>
      columnSupport({ mesh, up, pitchMm: 0.5, overhangDegrees: 45, bridgeMm }).volumeMm3;
    const [gate, ledge] = [12 * 20 * 30, 8 * 20 * 30];
    expect(of(0) / (gate + ledge)).toBeCloseTo(1, 2);
    expect(of(10) / (gate + ledge)).toBeCloseTo(1, 2);
    expect(of(13) / ledge).toBeCloseTo(1, 2);
  });

  it('gives every column that is held, adding up to the volume', () => {
    const { columns, pitchMm, volumeMm3, areaMm2, u, v } = heldColumns({
      mesh: tee(),
      up,
      pitchMm: 1,
      overhangDegrees: 45,
    });
    let sum = 0;
    for (let k = 0; k < columns.length; k += 4) {
      sum += columns[k + 3]! - columns[k + 2]!;
      // Under the arms of the T, never under its stem.
      const [x, y] = [0, 1].map((axis) => columns[k]! * u[axis]! + columns[k + 1]! * v[axis]!);
      expect(Math.abs(x!)).toBeGreaterThan(10);
      expect(Math.abs(y!)).toBeLessThan(10);
    }
    expect(sum * pitchMm ** 2).toBeCloseTo(volumeMm3, 6);
    expect((columns.length / 4) * pitchMm ** 2).toBeCloseTo(areaMm2, 6);
  });
});
