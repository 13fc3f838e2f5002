/** Where a piece is on the screen, px from the upper left of the picture. */
export interface BalloonAnchor {
  readonly name: string;
  readonly x: number;
  readonly y: number;
}

/** A balloon beside the object and the point its leader line comes from. */
export interface PlacedBalloon {
  readonly name: string;
  readonly x: number;
  readonly y: number;
  readonly anchorX: number;
  readonly anchorY: number;
}

export interface BalloonArea {
  readonly width: number;
  readonly height: number;
  /** Left and right edge of the object on the screen. */
  readonly left: number;
  readonly right: number;
  readonly radius: number;
}

/** Room between a balloon and the object, px. */
const GAP = 22;
/** Room between two balloons in a column, px. */
const SPACING = 6;

/**
 * Item balloons in two columns left and right of the object, each column in the order of its
 * anchors so that leader lines of one side do not cross.
 * @param anchors in falling importance: when the columns are full, the last ones get no balloon
 */
export function layOutBalloons(
  anchors: readonly BalloonAnchor[],
  area: BalloonArea,
): PlacedBalloon[] {
  const pitch = 2 * area.radius + SPACING;
  const capacity = Math.max(1, Math.floor((area.height - SPACING) / pitch));
  const kept = anchors.slice(0, 2 * capacity);
  const byX = [...kept].sort((a, b) => a.x - b.x);
  const middle = (area.left + area.right) / 2;
  const wantedLeft = byX.filter((anchor) => anchor.x < middle).length;
  const leftCount = Math.min(capacity, Math.max(wantedLeft, byX.length - capacity));
  const leftX = Math.max(area.radius + 1, area.left - GAP - area.radius);
  const rightX = Math.min(area.width - area.radius - 1, area.right + GAP + area.radius);
  return [
    ...column(byX.slice(0, leftCount), leftX, pitch, area),
    ...column(byX.slice(leftCount), rightX, pitch, area),
  ];
}

/** One column: every balloon as near to its anchor's height as the others allow. */
function column(
  anchors: readonly BalloonAnchor[],
  x: number,
  pitch: number,
  area: BalloonArea,
): PlacedBalloon[] {
  const sorted = [...anchors].sort((a, b) => a.y - b.y);
  const heights = packHeights(
    sorted.map((anchor) => anchor.y),
    pitch,
    area.radius + 1,
    area.height - area.radius - 1,
  );
  return sorted.map((anchor, index) => ({
    name: anchor.name,
    x,
    y: heights[index]!,
    anchorX: anchor.x,
    anchorY: anchor.y,
  }));
}

/**
 * Heights at least `pitch` apart, in order, within [from, to] when there is room, as near as
 * possible to the wanted ones: neighbours that would touch are merged into blocks placed at their
 * mean (pool adjacent violators; isotonic regression, Barlow et al. 1972).
 */
export function packHeights(
  wanted: readonly number[],
  pitch: number,
  from: number,
  to: number,
): number[] {
  const blocks: { sum: number; count: number }[] = [];
  const mean = (block: { sum: number; count: number }) => block.sum / block.count;
  wanted.forEach((height, index) => {
    let block = { sum: height - index * pitch, count: 1 };
    for (
      let last = blocks[blocks.length - 1];
      last && mean(last) >= mean(block);
      last = blocks[blocks.length - 1]
    ) {
      block = { sum: last.sum + block.sum, count: last.count + block.count };
      blocks.pop();
    }
    blocks.push(block);
  });
  const highest = Math.max(from, to - (wanted.length - 1) * pitch);
  const heights: number[] = [];
  for (const block of blocks)
    for (let at = 0; at < block.count; at++)
      heights.push(Math.min(Math.max(mean(block), from), highest) + heights.length * pitch);
  return heights;
}
