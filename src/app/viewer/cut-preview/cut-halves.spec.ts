import { BoxGeometry, TorusKnotGeometry, type BufferGeometry } from 'three';
import { mergeVertices } from 'three/addons/utils/BufferGeometryUtils.js';
import { HalvesCutter, type HalfSurface } from './cut-halves';

function surfaceOf(geometry: BufferGeometry): HalfSurface {
  geometry.deleteAttribute('normal');
  geometry.deleteAttribute('uv');
  const merged = mergeVertices(geometry, 1e-4);
  return {
    positions: Float32Array.from(merged.getAttribute('position').array),
    indices: Uint32Array.from(merged.index!.array),
  };
}

/** Signed volume by the divergence theorem. */
function volumeOf({ positions, indices }: HalfSurface): number {
  let volume = 0;
  const at = (index: number, axis: number) => positions[indices[index]! * 3 + axis]!;
  for (let i = 0; i < indices.length; i += 3)
    volume +=
      at(i, 0) * (at(i + 1, 1) * at(i + 2, 2) - at(i + 1, 2) * at(i + 2, 1)) -
      at(i, 1) * (at(i + 1, 0) * at(i + 2, 2) - at(i + 1, 2) * at(i + 2, 0)) +
      at(i, 2) * (at(i + 1, 0) * at(i + 2, 1) - at(i + 1, 1) * at(i + 2, 0));
  return volume / 6;
}

describe('HalvesCutter', () => {
  it('cuts a box into two boxes of the right volumes', () => {
    const cutter = new HalvesCutter(surfaceOf(new BoxGeometry(40, 20, 10)));
    const { above, below } = cutter.cut({ normal: [1, 0, 0], offsetMm: 10 });
    expect(volumeOf(above!)).toBeCloseTo(10 * 20 * 10, 3);
    expect(volumeOf(below!)).toBeCloseTo(30 * 20 * 10, 3);
  });

  it.each([
    [[0, 0, 1] as const, 5],
    [[0.6, 0, 0.8] as const, 12],
    [[0, -0.28, 0.96] as const, -7],
  ])('keeps the volume of a knot cut across %j', (normal, offsetMm) => {
    const knot = surfaceOf(new TorusKnotGeometry(50, 15, 96, 16));
    const { above, below } = new HalvesCutter(knot).cut({ normal, offsetMm });
    const sum = volumeOf(above!) + volumeOf(below!);
    expect(Math.abs(sum / volumeOf(knot) - 1)).toBeLessThan(1e-4);
  });

  it('cuts the same model again and again', () => {
    const cutter = new HalvesCutter(surfaceOf(new BoxGeometry(40, 20, 10)));
    const volumes = [-10, 0, 10].map((offsetMm) =>
      volumeOf(cutter.cut({ normal: [1, 0, 0], offsetMm }).below!),
    );
    [2_000, 4_000, 6_000].forEach((volume, at) => expect(volumes[at]).toBeCloseTo(volume, 3));
  });

  it('gives nothing on the empty side of a plane that misses', () => {
    const cutter = new HalvesCutter(surfaceOf(new BoxGeometry(40, 20, 10)));
    const { above, below } = cutter.cut({ normal: [0, 0, 1], offsetMm: 100 });
    expect(above).toBeNull();
    expect(volumeOf(below!)).toBeCloseTo(8_000, 3);
  });
});
