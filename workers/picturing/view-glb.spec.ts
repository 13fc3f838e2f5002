import { NodeIO } from '@gltf-transform/core';
import { EXTMeshoptCompression } from '@gltf-transform/extensions';
import { MeshoptDecoder } from 'meshoptimizer';
import { describe, expect, it } from 'vitest';
import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { box, join, sphere } from '../../test/support/shapes.js';
import { simplifyForView } from './simplify-for-view.js';
import { makeViewGlb, type ViewContent } from './view-glb.js';

async function readBack(content: ViewContent) {
  const bytes = await makeViewGlb(content);
  const io = new NodeIO()
    .registerExtensions([EXTMeshoptCompression])
    .registerDependencies({ 'meshopt.decoder': MeshoptDecoder });
  await MeshoptDecoder.ready;
  const document = await io.readBinary(bytes);
  const nodes = document
    .getRoot()
    .listNodes()
    .map((node) => {
      const primitive = node.getMesh()!.listPrimitives()[0];
      return {
        name: node.getName(),
        meshName: node.getMesh()!.getName(),
        moved: node.getTranslation().some((value) => value !== 0),
        mode: primitive.getMode(),
        positions: primitive.getAttribute('POSITION')!.getArray() as Float32Array,
        walls: (primitive.getAttribute('_WALL')?.getArray() ?? null) as Float32Array | null,
        triangles: (primitive.getIndices()?.getCount() ?? 0) / 3,
      };
    });
  return { bytes, nodes };
}

describe('the view file', () => {
  it('keeps names, order, lines and coordinates', async () => {
    const seam = Float32Array.of(0, 0, 5, 10, 0, 5, 10, 0, 5, 10, 10, 5);
    const { nodes } = await readBack({
      meshes: [
        { name: 'P01', mesh: box([0, 0, 0], [10, 20, 30]).mesh },
        { name: 'P02', mesh: box([-5, 7, 1], [0, 9, 3]).mesh },
      ],
      lines: [{ name: 'seam-1', positions: seam }],
      triangleBudget: 60_000,
    });
    expect(nodes.map(({ name }) => name)).toEqual(['P01', 'P02', 'seam-1']);
    expect(nodes.map(({ meshName }) => meshName)).toEqual(['P01', 'P02', 'seam-1']);
    expect(nodes.map(({ mode }) => mode)).toEqual([4, 4, 1]);
    expect(nodes.map(({ triangles }) => triangles)).toEqual([12, 12, 0]);
    expect(nodes.some(({ moved }) => moved)).toBe(false);
    expect(boundingBox(nodes[0].positions)).toMatchObject({ min: [0, 0, 0], max: [10, 20, 30] });
    expect(boundingBox(nodes[1].positions)).toMatchObject({ min: [-5, 7, 1], max: [0, 9, 3] });
    expect(nodes[2].positions).toEqual(seam);
  });

  it('keeps a number a vertex, whatever the order in which vertices are written', async () => {
    const ball = sphere(100, 40, 20).mesh;
    // A number that can be worked out from where the vertex is.
    const values = Float32Array.from({ length: ball.positions.length / 3 }, (_, vertex) =>
      Math.fround(ball.positions[3 * vertex + 2] + 200),
    );
    const { nodes } = await readBack({
      meshes: [{ name: 'model', mesh: ball, scalars: { name: 'WALL', values } }],
      triangleBudget: Infinity,
    });
    const { positions, walls } = nodes[0];
    expect(walls!.length).toBe(positions.length / 3);
    for (let vertex = 0; vertex < walls!.length; vertex++)
      expect(Math.abs(walls![vertex] - positions[3 * vertex + 2] - 200)).toBeLessThan(0.01);
  });

  it('meets its budget and stays near the surface', async () => {
    const ball = sphere(200, 300, 150).mesh;
    const { bytes, nodes } = await readBack({
      meshes: [{ name: 'model', mesh: ball }],
      triangleBudget: 6000,
    });
    expect(nodes[0].triangles).toBeLessThanOrEqual(6000);
    expect(nodes[0].triangles).toBeGreaterThan(4000);
    const { positions } = nodes[0];
    for (let i = 0; i < positions.length; i += 3) {
      const radius = Math.hypot(positions[i], positions[i + 1], positions[i + 2]);
      expect(Math.abs(radius - 200)).toBeLessThan(0.5);
    }
    expect(bytes.length).toBeLessThan(50_000);
  });

  it('writes the same bytes for the same input', async () => {
    const content = {
      meshes: [{ name: 'model', mesh: sphere(30, 64, 32).mesh }],
      triangleBudget: 900,
    };
    expect(await makeViewGlb(content)).toEqual(await makeViewGlb(content));
  });

  it('leaves whole parts out when nothing else brings it under the budget', async () => {
    const crumbs = Array.from({ length: 800 }, (_, i) => {
      const at = [3 * (i % 30), 3 * Math.floor(i / 30), 0] as const;
      return box(at, [at[0] + 1, at[1] + 1, 1]).mesh;
    });
    const view = await simplifyForView(join(crumbs), 500);
    expect(view.indices.length / 3).toBeLessThanOrEqual(500);
    expect(view.indices.length).toBeGreaterThan(0);
  });
});
