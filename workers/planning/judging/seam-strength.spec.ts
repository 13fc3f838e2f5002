import { beforeAll, describe, expect, it } from 'vitest';
import { cutMesh } from '../../../shared/geometry/cutting/cut-mesh.js';
import { type TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { box, facetedTurning, prism } from '../../../test/support/shapes.js';
import { loadSolids, type Solids } from '../../solids/solid-kernel.js';
import { signedFan } from '../signed-fan.js';
import { bendingStress, bondedSection, sideOf } from './seam-strength.js';

let solids: Solids;
beforeAll(async () => {
  solids = await loadSolids();
});

const across = { normal: [0, 0, 1] as const, offset: 50 };
const section = (mesh: TriangleMesh, triangulate = solids.triangulate) => {
  const cut = cutMesh(mesh, across, { triangulate, capTag: 3 });
  return bondedSection(cut.below, across, 3)!;
};

describe('bondedSection against handbook formulas', () => {
  it('of a rectangle b × h: its area, and the smaller of b·h²/6 and h·b²/6', () => {
    const found = section(box([0, 0, 0], [30, 20, 100]).mesh);
    expect(found.areaMm2).toBeCloseTo(600, 9);
    expect(found.modulusMm3).toBeCloseTo((30 * 20 ** 2) / 6, 6);
    expect(found.middle.map((at) => Number(at.toFixed(9)))).toEqual([15, 10, 50]);
  });

  it('of a disk: πr³/4', () => {
    const found = section(prism(12, 100, 720).mesh);
    expect(found.modulusMm3 / ((Math.PI * 12 ** 3) / 4)).toBeCloseTo(1, 3);
  });

  it('of a tube: π(R⁴ − r⁴)/(4R), with true triangles and with fans that overlap', () => {
    const profile = [
      [20, 0],
      [20, 100],
      [17, 100],
      [17, 0],
    ] as const;
    const mesh = facetedTurning('tube', profile, 720).mesh;
    const exact = (Math.PI * (20 ** 4 - 17 ** 4)) / (4 * 20);
    expect(section(mesh).modulusMm3 / exact).toBeCloseTo(1, 3);
    expect(section(mesh, signedFan).modulusMm3 / exact).toBeCloseTo(1, 3);
  });

  it('has none without a cap of that number', () => {
    expect(bondedSection(box([0, 0, 0], [1, 1, 1]).mesh, across, 1)).toBeNull();
  });
});

describe('bendingStress', () => {
  it('is that of a beam held level: M·c/I with the weight at its middle', () => {
    const bar = box([0, 0, 0], [20, 20, 100]).mesh;
    const cut = cutMesh(
      bar,
      { normal: [0, 0, 1], offset: 60 },
      {
        triangulate: solids.triangulate,
        capTag: 1,
      },
    );
    const plane = { normal: [0, 0, 1] as const, offset: 60 };
    const found = bondedSection(cut.below, plane, 1)!;
    const stress = bendingStress(found, sideOf([cut.above]), sideOf([cut.below]));
    // Computed: 20·20·40 mm³ of 1.24 g/cm³, 20 mm off, on a square of 20 mm.
    const newtons = 20 * 20 * 40 * 1.24e-6 * 9.81;
    expect(stress).toBeCloseTo((1000 * newtons * 20) / (20 ** 3 / 6), 6);
  });

  it('knows volume and middle of a solid wherever it is', () => {
    const { volumeMm3, middle } = sideOf([box([100, 200, 300], [110, 220, 340]).mesh]);
    expect(volumeMm3).toBeCloseTo(10 * 20 * 40, 6);
    expect(middle.map((at) => Number(at.toFixed(6)))).toEqual([105, 210, 320]);
  });
});
