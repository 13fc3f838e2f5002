import { convexHull2d } from '../../shared/geometry/fitting/convex-hull-2d.js';

/** Corners of a round outline. */
const SIDES = 32;
/** Half the width of a roof's level bridge, in radii: tan 22.5°. */
const BRIDGE = Math.SQRT2 - 1;

export interface PlanePoint {
  readonly x: number;
  readonly y: number;
}

/** Outlines of one shape for every radius: the same corners in the same order, counter-clockwise. */
export type RoundShape = (radiusMm: number) => Float64Array;

/**
 * The outline of a socket: polygons that circles of the radius just fit into.
 * @param reach how far the pin may move either way from `at`, mm; 0 gives a round outline, else
 *   two half circles with straight sides between
 * @param roof unit direction of the build in the plane, null for none: each circle is closed on
 *   that side by two lines at 45° and a short level bridge of 0.83 radii, so that the socket prints
 *   lying without support
 */
export function socketShape(
  at: PlanePoint,
  reach: PlanePoint = { x: 0, y: 0 },
  roof: PlanePoint | null = null,
): RoundShape {
  const isRound = reach.x === 0 && reach.y === 0;
  const ways = isRound ? [0] : [-1, 1];
  const corners = ways.flatMap((way) =>
    unitCorners(roof).map((corner) => ({
      middle: { x: at.x + way * reach.x, y: at.y + way * reach.y },
      corner,
    })),
  );
  const place = ({ middle, corner }: (typeof corners)[number], radiusMm: number) => {
    const scale = radiusMm / Math.cos(Math.PI / SIDES);
    return [middle.x + scale * corner.x, middle.y + scale * corner.y];
  };
  // Which corners bound the shape is the same for every radius: one is as good as another.
  const probe = isRound ? 1 : Math.hypot(reach.x, reach.y);
  const placed = corners.map((corner) => place(corner, probe));
  const hull = convexHull2d(Float64Array.from(placed.flat()));
  const bounding = Array.from({ length: hull.length / 2 }, (_, k) =>
    placed.findIndex(([x, y]) => x === hull[2 * k] && y === hull[2 * k + 1]),
  );
  return (radiusMm) => Float64Array.from(bounding.flatMap((k) => place(corners[k], radiusMm)));
}

/** The outline of a pin: a polygon inside the circle. */
export function pinShape(at: PlanePoint): RoundShape {
  const shape = socketShape(at);
  return (radiusMm) => shape(radiusMm * Math.cos(Math.PI / SIDES));
}

function unitCorners(roof: PlanePoint | null): PlanePoint[] {
  const turn = roof ? Math.atan2(roof.y, roof.x) : 0;
  const circle = Array.from({ length: SIDES }, (_, k) => {
    const angle = turn + (2 * Math.PI * (k + 0.5)) / SIDES;
    return { x: Math.cos(angle), y: Math.sin(angle) };
  });
  if (!roof) return circle;
  const bridge = [-1, 1].map((side) => ({
    x: roof.x - side * BRIDGE * roof.y,
    y: roof.y + side * BRIDGE * roof.x,
  }));
  return [...circle, ...bridge];
}
