import { BoxGeometry, SphereGeometry, type BufferGeometry } from 'three';
import { sectionLines } from './section-lines';

function surfaceOf(geometry: BufferGeometry) {
  const positions = Float32Array.from(geometry.getAttribute('position').array);
  return { name: 'a', positions, indices: Uint32Array.from(geometry.index!.array) };
}

function lengthOf(lines: Float32Array): number {
  let length = 0;
  for (let at = 0; at < lines.length; at += 6)
    length += Math.hypot(
      lines[at + 3]! - lines[at]!,
      lines[at + 4]! - lines[at + 1]!,
      lines[at + 5]! - lines[at + 2]!,
    );
  return length;
}

describe('sectionLines', () => {
  it('is as long as the outline of a box', () => {
    const box = surfaceOf(new BoxGeometry(40, 20, 10));
    const lines = sectionLines(box, { normal: [1, 0, 0], offsetMm: 3 });
    expect(lengthOf(lines)).toBeCloseTo(2 * (20 + 10), 4);
  });

  it('lies in the plane and comes near to the circumference on a sphere', () => {
    const sphere = surfaceOf(new SphereGeometry(10, 128, 64));
    const lines = sectionLines(sphere, { normal: [0.6, 0, 0.8], offsetMm: 6 });
    for (let at = 0; at < lines.length; at += 3)
      expect(0.6 * lines[at]! + 0.8 * lines[at + 2]!).toBeCloseTo(6, 4);
    expect(lengthOf(lines) / (2 * Math.PI * 8)).toBeCloseTo(1, 2);
  });

  it('gives whole segments when the plane goes through vertices', () => {
    const sphere = surfaceOf(new SphereGeometry(10, 32, 16));
    const lines = sectionLines(sphere, { normal: [0, 1, 0], offsetMm: 0 });
    expect(lines.length % 6).toBe(0);
    expect(lines.every(Number.isFinite)).toBe(true);
  });

  it('is empty where the plane misses', () => {
    const box = surfaceOf(new BoxGeometry(40, 20, 10));
    expect(sectionLines(box, { normal: [0, 0, 1], offsetMm: 6 })).toHaveLength(0);
  });
});
