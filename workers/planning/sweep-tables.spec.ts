import { describe, expect, it } from 'vitest';
import { cutMesh } from '../../shared/geometry/cutting/cut-mesh.js';
import { outerVertices } from '../../shared/geometry/fitting/outer-vertices.js';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { lumpyBody } from '../../test/support/planning-shapes.js';
import { randomDirection, seededRandom } from '../../test/support/random.js';
import { box, torus } from '../../test/support/shapes.js';
import { bodyFaces } from './body-faces.js';
import { bodyNodes } from './body-nodes.js';
import { extentsOf, makeFitFrames } from './fit-frames.js';
import { signedFan } from './signed-fan.js';
import { sweepOffsets } from './sweep-offsets.js';
import { plainWorth } from './judging/surface-worth.js';
import { rangeAlong, sweepTables } from './sweep-tables.js';

const fit = makeFitFrames([{ shape: 'rectangular', widthMm: 200, depthMm: 200, heightMm: 200 }]);
const spacingMm = 8;

const shapes: [string, TriangleMesh][] = [
  ['a box of twelve triangles', box([0, 0, 0], [300, 200, 100]).mesh],
  ['a torus', torus(120, 40, 48, 24).mesh],
  ['a lumpy body', lumpyBody(150, 7, 3, [40, 28])],
];

describe('sweepTables against real cuts', () => {
  for (const [name, mesh] of shapes) {
    const seed = 77;
    it(`knows section, volume and extents of both sides of ${name} (seed ${seed})`, () => {
      const random = seededRandom(seed);
      let missed = 0;
      let compared = 0;
      const nodes = bodyNodes(mesh, outerVertices(mesh.positions), fit, spacingMm);
      for (let n = 0; n < 5; n++) {
        const normal = randomDirection(random);
        const [low, high] = rangeAlong(mesh.positions, normal);
        const offsets = sweepOffsets(low, high, [200, 200, 200]);
        const faces = bodyFaces(mesh, plainWorth);
        const tables = sweepTables({ normal, low, high, offsets }, nodes, faces, fit, 45);
        for (let j = 0; j < offsets.length; j += 7) {
          const options = { triangulate: signedFan, capTag: 1 };
          const cut = cutMesh(mesh, { normal, offset: offsets[j] }, options);
          expect(edgeReport(cut.above).closed).toBe(true);
          const volume = signedVolume(mesh);
          expect(Math.abs(tables.seamMm2[j] - cut.sectionAreaMm2)).toBeLessThan(1e-6 * volume);
          expect(Math.abs(tables.volumeAboveMm3[j] - signedVolume(cut.above))).toBeLessThan(
            1e-9 * volume,
          );
          for (const [side, lows, highs] of [
            [cut.above, tables.aboveLow, tables.aboveHigh],
            [cut.below, tables.belowLow, tables.belowHigh],
          ] as const) {
            const least = new Float64Array(fit.axisCount);
            const most = new Float64Array(fit.axisCount);
            extentsOf(fit, side.positions, least, most);
            for (let a = 0; a < fit.axisCount; a++) {
              // Nodes never reach beyond the side; they may miss some of it, most near its tips.
              const row = j * fit.axisCount + a;
              const missing = most[a] - highs[row];
              expect(missing).toBeGreaterThan(-1e-3);
              missed += missing;
              compared++;
              expect(lows[row] - least[a]).toBeGreaterThan(-1e-3);
            }
          }
        }
      }
      expect(missed / compared).toBeLessThan(spacingMm / 2);
    });
  }
});
