import { describe, expect, it } from 'vitest';
import { sphere } from '../../test/support/shapes.js';
import { decodeMesh, encodeMesh } from './mesh-file.js';

const ball = sphere(50, 12, 6).mesh;
const rounded = { ...ball, positions: Float64Array.from(Float32Array.from(ball.positions)) };

describe('a stored mesh', () => {
  it('comes back as it was, with half the bytes when float32 holds it', () => {
    for (const mesh of [ball, rounded]) {
      const back = decodeMesh(encodeMesh(mesh));
      expect(back.positions).toEqual(mesh.positions);
      expect(back.indices).toEqual(mesh.indices);
      expect(back.tags).toBeUndefined();
    }
    const saved = encodeMesh(ball).length - encodeMesh(rounded).length;
    expect(saved).toBe(4 * ball.positions.length);
  });

  it('keeps tags, and reads from any place in memory', () => {
    const tags = Int32Array.from({ length: ball.indices.length / 3 }, (_, i) => i - 3);
    const bytes = encodeMesh({ ...ball, tags });
    const moved = new Uint8Array(bytes.length + 3);
    moved.set(bytes, 3);
    expect(decodeMesh(moved.subarray(3)).tags).toEqual(tags);
  });

  it('refuses bytes that it did not write', () => {
    const bytes = encodeMesh(ball);
    const damaged = (at: number, value: number) => {
      const copy = bytes.slice();
      copy[at] = value;
      return copy;
    };
    expect(() => decodeMesh(new Uint8Array(10))).toThrow(/shorter than its header/);
    expect(() => decodeMesh(damaged(0, 0))).toThrow(/Not a stored mesh/);
    expect(() => decodeMesh(damaged(4, 9))).toThrow(/unknown version 9/);
    expect(() => decodeMesh(damaged(8, 250))).toThrow(/bytes instead of/);
    expect(() => decodeMesh(bytes.slice(0, -1))).toThrow(/bytes instead of/);
    expect(() => decodeMesh(damaged(bytes.length - 1, 255))).toThrow(/names a vertex/);
    const infinite = bytes.slice();
    infinite.set([0, 0, 0, 0, 0, 0, 0xf0, 0x7f], 24);
    expect(() => decodeMesh(infinite)).toThrow(/not finite/);
  });
});
