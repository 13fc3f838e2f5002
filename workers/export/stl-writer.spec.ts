import { describe, expect, it } from 'vitest';
import { box, torusKnot } from '../../test/support/shapes.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { writeStl } from './stl-writer.js';

const asFloat32 = (mesh: TriangleMesh) => ({
  positions: Float32Array.from(mesh.positions),
  indices: mesh.indices,
});

describe('writeStl', () => {
  it('writes 84 + 50 bytes a triangle, the count little-endian and the corners exactly as given', () => {
    // More facets than one batch, and not a multiple of it.
    const mesh = asFloat32(torusKnot(60.123, 17.1, 401, 25));
    const bytes = writeStl(mesh, 'knot');
    const facets = mesh.indices.length / 3;
    expect(facets).toBeGreaterThan(2 * 8192);
    expect(bytes.byteLength).toBe(84 + 50 * facets);
    const view = new DataView(bytes.buffer);
    expect(view.getUint32(80, true)).toBe(facets);
    let different = 0;
    for (let corner = 0; corner < 3 * facets; corner++)
      for (let k = 0; k < 3; k++) {
        const at = 84 + 50 * Math.floor(corner / 3) + 12 + 12 * (corner % 3) + 4 * k;
        const written = view.getFloat32(at, true);
        if (!Object.is(written, mesh.positions[3 * mesh.indices[corner] + k])) different++;
      }
    expect(different).toBe(0);
  });

  it('writes the outward unit normal of each facet, and zero for a facet without area', () => {
    const cube = asFloat32(box([0, 0, 0], [10, 10, 10]).mesh);
    const flat = { positions: cube.positions, indices: Uint32Array.of(0, 1, 1) };
    const view = new DataView(writeStl(cube, 'cube').buffer);
    for (let facet = 0; facet < 12; facet++) {
      const normal = [0, 1, 2].map((k) => view.getFloat32(84 + 50 * facet + 4 * k, true));
      const corner = [0, 1, 2].map((k) => view.getFloat32(84 + 50 * facet + 12 + 4 * k, true));
      expect(Math.hypot(...normal)).toBeCloseTo(1, 6);
      // From the cube's middle the face lies ahead by half its side.
      expect(normal.reduce((dot, n, k) => dot + n * (corner[k] - 5), 0)).toBeCloseTo(5, 5);
    }
    expect(new DataView(writeStl(flat, 'flat').buffer).getFloat32(84, true)).toBe(0);
  });

  it('keeps the header printable and never lets it begin like an ASCII file', () => {
    const mesh = asFloat32(box([0, 0, 0], [1, 1, 1]).mesh);
    const header = (title: string) =>
      new TextDecoder().decode(writeStl(mesh, title).subarray(0, 80));
    expect(header('solid cube')).not.toMatch(/^\s*solid/i);
    expect(header('Möbel\u0000')).toMatch(/^M\?bel\? +$/);
    expect(header('x'.repeat(200))).toBe('x'.repeat(80));
  });
});
