import { describe, expect, it } from 'vitest';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import {
  boxWithCavity,
  sphere,
  torus,
  torusKnot,
  turnInsideOut,
} from '../../test/support/shapes.js';
import { joinMeshes } from '../mending/uniting/mesh-parts.js';
import { surfaceDeviation } from '../measuring/surface-deviation.js';
import { buildBvh } from '../measuring/triangle-bvh.js';
import { makeProxy } from './proxy.js';

const large = [
  { name: 'ball', mesh: sphere(50, 400, 200).mesh },
  { name: 'ring', mesh: torus(40, 12, 500, 160).mesh },
  { name: 'knot', mesh: torusKnot(30, 9, 1200, 70) },
  {
    name: 'thin shell',
    mesh: joinMeshes([turnInsideOut(sphere(57, 300, 150).mesh), sphere(60, 300, 150).mesh]),
  },
];

describe('the proxy', () => {
  it.each(large)('of a $name is closed, small enough and near it', async ({ mesh }) => {
    expect(mesh.indices.length / 3).toBeGreaterThan(100_000);
    const bvh = buildBvh(mesh);
    const proxy = await makeProxy(mesh, bvh);
    expect(proxy.isClosed).toBe(true);
    expect(edgeReport(proxy.mesh).closed).toBe(true);
    expect(proxy.mesh.indices.length / 3).toBeLessThanOrEqual(60_000);
    expect(Math.abs(signedVolume(proxy.mesh) / signedVolume(mesh) - 1)).toBeLessThan(2e-3);
    const again = surfaceDeviation(proxy.mesh, bvh, 3000)!;
    // Measured with other samples: as large, but for chance.
    expect(again.max).toBeLessThan(2 * proxy.deviation!.max + 1e-9);
    expect(proxy.deviation!.mean).toBeLessThanOrEqual(proxy.deviation!.p95);
    expect(proxy.deviation!.p95).toBeLessThanOrEqual(proxy.deviation!.max);
    expect(proxy.deviation!.max).toBeLessThan(0.2);
  });

  it('of a small model is the model', async () => {
    const { mesh } = boxWithCavity(40, 20);
    const proxy = await makeProxy(mesh, buildBvh(mesh));
    expect(proxy.mesh).toBe(mesh);
    expect(proxy).toMatchObject({ isClosed: true, deviation: { max: 0 } });
  });

  it('of an open surface is small enough and says that it is open', async () => {
    const { mesh } = sphere(50, 400, 200);
    const open = { positions: mesh.positions, indices: mesh.indices.slice(3000) };
    const proxy = await makeProxy(open, null);
    expect(proxy.isClosed).toBe(false);
    expect(proxy.deviation).toBeNull();
    expect(proxy.mesh.indices.length / 3).toBeLessThanOrEqual(60_000);
  });
});
