import { type SurfacePart, type Triple } from '../scene/view-parts';

/** Along which direction a plane is moved. */
export const cutDirections = ['x', 'y', 'z', 'tilted'] as const;
export type CutDirection = (typeof cutDirections)[number];

/** How a tilted plane's normal stands: lean from upright, turned about the upright axis. */
export interface Tilt {
  /** 0 is a level plane, 90 an upright one. */
  readonly leanDegrees: number;
  /** 0 leans towards x, 90 towards y. */
  readonly turnDegrees: number;
}

/** The unit normal of a direction; exact along the axes. */
export function normalOf(direction: CutDirection, tilt: Tilt): Triple {
  if (direction === 'x') return [1, 0, 0];
  if (direction === 'y') return [0, 1, 0];
  if (direction === 'z') return [0, 0, 1];
  const lean = (tilt.leanDegrees * Math.PI) / 180;
  const turn = (tilt.turnDegrees * Math.PI) / 180;
  return [Math.sin(lean) * Math.cos(turn), Math.sin(lean) * Math.sin(turn), Math.cos(lean)];
}

/** Where a surface begins and ends along a unit normal, mm. Zeros without a vertex. */
export function extentAlong(surface: SurfacePart, normal: Triple): { low: number; high: number } {
  const [nx, ny, nz] = normal;
  const { positions } = surface;
  let low = Infinity;
  let high = -Infinity;
  for (let at = 0; at < positions.length; at += 3) {
    const distance = positions[at]! * nx + positions[at + 1]! * ny + positions[at + 2]! * nz;
    if (distance < low) low = distance;
    if (distance > high) high = distance;
  }
  return low > high ? { low: 0, high: 0 } : { low, high };
}
