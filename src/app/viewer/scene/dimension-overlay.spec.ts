import { Box3, OrthographicCamera, Vector3 } from 'three';
import { boxDimensions } from './dimension-overlay';

const size = { widthPx: 400, heightPx: 300 };

function cameraFrom(x: number, y: number, z: number): OrthographicCamera {
  const camera = new OrthographicCamera(-200, 200, 150, -150, 0, 10_000);
  camera.up.set(0, 0, 1);
  camera.position.set(x, y, z);
  camera.lookAt(0, 0, 0);
  camera.updateMatrixWorld();
  camera.updateProjectionMatrix();
  return camera;
}

describe('boxDimensions', () => {
  const box = new Box3(new Vector3(-50, -20, -10), new Vector3(50, 20, 10.04));

  it('writes the three sides in mm without a unit', () => {
    const texts = boxDimensions(box, cameraFrom(300, -500, 300), size).map(({ text }) => text);
    expect(texts).toEqual(['100', '40', '20']);
  });

  it('keeps a dimension line as long as its edge and parallel to it', () => {
    for (const dimension of boxDimensions(box, cameraFrom(300, -500, 300), size)) {
      const { from, to, edgeFrom, edgeTo } = dimension;
      expect(to.x - from.x).toBeCloseTo(edgeTo.x - edgeFrom.x, 6);
      expect(to.y - from.y).toBeCloseTo(edgeTo.y - edgeFrom.y, 6);
    }
  });

  it.each([
    [300, -500, 300],
    [-300, -500, 300],
    [300, 500, -300],
    [-300, 500, 300],
  ])('stands off the box on the outside, seen from (%d, %d, %d)', (x, y, z) => {
    // Half-way along, a dimension line is farther from the middle of the box than its edge is.
    const fromMiddle = (a: { x: number; y: number }, b: { x: number; y: number }) =>
      Math.hypot((a.x + b.x - size.widthPx) / 2, (a.y + b.y - size.heightPx) / 2);
    for (const { from, to, edgeFrom, edgeTo } of boxDimensions(box, cameraFrom(x, y, z), size))
      expect(fromMiddle(from, to)).toBeGreaterThan(fromMiddle(edgeFrom, edgeTo));
  });
});
