import { BoxGeometry, CylinderGeometry, SphereGeometry, type BufferGeometry } from 'three';
import { mergeVertices } from 'three/addons/utils/BufferGeometryUtils.js';
import { shadeSurface } from './surface-shading';

function arraysOf(geometry: BufferGeometry) {
  const positions = Float32Array.from(geometry.getAttribute('position').array);
  return { positions, indices: Uint32Array.from(geometry.index!.array) };
}

/** The round shapes of three.js do not meet themselves to the last bit; models that we draw do. */
function shade(geometry: BufferGeometry) {
  geometry.deleteAttribute('normal');
  geometry.deleteAttribute('uv');
  const { positions, indices } = arraysOf(mergeVertices(geometry, 1e-4));
  return shadeSurface(positions, indices);
}

const lineCount = (edges: Float32Array) => edges.length / 6;

describe('shadeSurface', () => {
  it('finds the twelve edges of a box, though its file shares no corners', () => {
    const { positions, indices } = arraysOf(new BoxGeometry(10, 20, 30));
    const { featureEdges } = shadeSurface(positions, indices);
    expect(positions).toHaveLength(24 * 3);
    expect(lineCount(featureEdges)).toBe(12);
  });

  it('gives each face of a box its own normal at every corner', () => {
    const { positions, normals } = shade(new BoxGeometry(2, 2, 2));
    for (let at = 0; at < normals.length; at += 3) {
      const normal = [...normals.slice(at, at + 3)];
      expect(normal.filter((part) => Math.abs(part) > 0.999)).toHaveLength(1);
      const axis = normal.findIndex((part) => Math.abs(part) > 0.999);
      // Outward: the corner lies on the side its normal points to.
      expect(positions[at + axis]! * normal[axis]!).toBeCloseTo(1, 6);
    }
  });

  it('draws no edge on a fine sphere and points its normals outward', () => {
    const { positions, normals, featureEdges } = shade(new SphereGeometry(5, 48, 32));
    expect(lineCount(featureEdges)).toBe(0);
    for (let at = 0; at < positions.length; at += 3) {
      const radius = Math.hypot(positions[at]!, positions[at + 1]!, positions[at + 2]!);
      const along =
        (positions[at]! * normals[at]! +
          positions[at + 1]! * normals[at + 1]! +
          positions[at + 2]! * normals[at + 2]!) /
        radius;
      expect(along).toBeGreaterThan(0.99);
    }
  });

  it('draws the two rims of a cylinder and nothing along its wall', () => {
    const { featureEdges } = shade(new CylinderGeometry(10, 10, 30, 64));
    expect(lineCount(featureEdges)).toBe(128);
    for (let at = 0; at < featureEdges.length; at += 3)
      expect(Math.abs(featureEdges[at + 1]!)).toBeCloseTo(15, 4);
  });

  it('draws an open rim', () => {
    const { featureEdges } = shade(new CylinderGeometry(10, 10, 30, 64, 1, true));
    expect(lineCount(featureEdges)).toBe(128);
  });

  it('lets triangles without area change nothing', () => {
    const box = arraysOf(new BoxGeometry(10, 10, 10));
    const indices = new Uint32Array([...box.indices, 0, 0, 1, 2, 2, 2]);
    const { normals, featureEdges } = shadeSurface(box.positions, indices);
    expect(normals.every(Number.isFinite)).toBe(true);
    expect(lineCount(featureEdges)).toBeGreaterThanOrEqual(12);
  });

  it('takes an empty surface', () => {
    const shaded = shadeSurface(new Float32Array(0), new Uint32Array(0));
    expect(shaded.positions).toHaveLength(0);
    expect(shaded.featureEdges).toHaveLength(0);
  });
});
