import { layOutBalloons, packHeights, type BalloonAnchor } from './balloon-layout';

const area = { width: 600, height: 400, left: 200, right: 400, radius: 13 };

function randomAnchors(count: number, seed: number): BalloonAnchor[] {
  let state = seed;
  const random = () => (state = (state * 48271) % 2147483647) / 2147483647;
  return Array.from({ length: count }, (_, at) => ({
    name: `P${at}`,
    x: 200 + random() * 200,
    y: random() * 400,
  }));
}

describe('layOutBalloons', () => {
  it.each([1, 2, 3, 4, 5])(
    'keeps balloons inside and apart, leaders uncrossed (seed %d)',
    (seed) => {
      const placed = layOutBalloons(randomAnchors(20, seed), area);
      expect(placed).toHaveLength(20);
      for (const side of [placed.filter(({ x }) => x < 300), placed.filter(({ x }) => x > 300)]) {
        const sorted = [...side].sort((a, b) => a.y - b.y);
        sorted.forEach((balloon, at) => {
          expect(balloon.y).toBeGreaterThanOrEqual(area.radius);
          expect(balloon.y).toBeLessThanOrEqual(area.height - area.radius);
          const next = sorted[at + 1];
          if (!next) return;
          expect(next.y - balloon.y).toBeGreaterThanOrEqual(2 * area.radius);
          // Anchors in the same order as their balloons.
          expect(next.anchorY).toBeGreaterThanOrEqual(balloon.anchorY);
        });
      }
    },
  );

  it('puts a balloon on the side of its anchor at its height when nothing is in the way', () => {
    const [placed] = layOutBalloons([{ name: 'P1', x: 390, y: 123 }], area);
    expect(placed!.x).toBeGreaterThan(area.right);
    expect(placed!.y).toBeCloseTo(123, 9);
  });

  it('leaves out the least important ones when the columns are full', () => {
    const anchors = randomAnchors(100, 9);
    const names = layOutBalloons(anchors, area).map(({ name }) => name);
    expect(names.length).toBeLessThan(100);
    expect(new Set(names)).toEqual(new Set(anchors.slice(0, names.length).map(({ name }) => name)));
  });

  it('keeps balloons in the picture when the object is wider than it', () => {
    const placed = layOutBalloons(randomAnchors(4, 3), { ...area, left: -500, right: 900 });
    for (const { x } of placed) {
      expect(x).toBeGreaterThanOrEqual(area.radius);
      expect(x).toBeLessThanOrEqual(area.width - area.radius);
    }
  });
});

describe('packHeights', () => {
  it('leaves heights alone that are far enough apart', () => {
    expect(packHeights([50, 100, 180], 30, 0, 400)).toEqual([50, 100, 180]);
  });

  it('spreads equal heights evenly about the wanted one', () => {
    expect(packHeights([100, 100, 100], 30, 0, 400)).toEqual([70, 100, 130]);
  });

  it('keeps order and distance at the rims', () => {
    const heights = packHeights([-20, -10, 395, 420], 30, 0, 400);
    expect(heights[0]).toBeGreaterThanOrEqual(0);
    expect(heights[3]).toBeLessThanOrEqual(400 + 1e-9);
    for (let at = 1; at < 4; at++)
      expect(heights[at]! - heights[at - 1]!).toBeGreaterThanOrEqual(30 - 1e-9);
  });
});
