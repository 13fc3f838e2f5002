/**
 * A socket, a pin or an engraved figure on a flat face: the face gets a hole of the first level's
 * outline, walls join level to level, the last level is filled. Outlines are flat xy in the
 * face's own coordinates (outward normal towards the eye), mm: outers counter-clockwise, holes
 * clockwise; every level has the same loops with the same numbers of points.
 */
export interface CapFeature {
  readonly levels: readonly FeatureLevel[];
}

export interface FeatureLevel {
  readonly loops: readonly Float64Array[];
  /** Into the solid, mm; 0 for the first level, negative for what stands out. */
  readonly depthMm: number;
}

/**
 * Volume that a feature adds to the solid, mm³; negative for what is taken away. Exact for the
 * walls as they are built: between two levels each edge sweeps a ruled band of two triangles.
 */
export function featureVolume({ levels }: CapFeature): number {
  let volume = 0;
  for (let k = 1; k < levels.length; k++) {
    const above = levels[k - 1];
    const below = levels[k];
    const thickness = below.depthMm - above.depthMm;
    for (let loop = 0; loop < above.loops.length; loop++)
      volume -= bandVolume(above.loops[loop], below.loops[loop], thickness);
  }
  return volume;
}

/**
 * Volume between two outlines joined point by point with walls cut along the diagonal from the
 * outer level's point to the inner level's next one (see `reworkCap`): each triangle of the wall
 * together with its shadow on the inner level, by the mean height above it.
 */
function bandVolume(top: Float64Array, bottom: Float64Array, thickness: number): number {
  // Prism over the upper outline less what lies between the outlines: sum of signed
  // columns over the shadows of both wall triangles plus the whole floor of the upper outline.
  let twiceSix = 0;
  const n = top.length / 2;
  for (let i = 0; i < n; i++) {
    const j = (i + 1) % n;
    const [ax, ay, bx, by] = [top[2 * i], top[2 * i + 1], top[2 * j], top[2 * j + 1]];
    const [cx, cy, dx, dy] = [bottom[2 * i], bottom[2 * i + 1], bottom[2 * j], bottom[2 * j + 1]];
    // Tetrahedra from the origin of the lower level to the two wall triangles and the lid's edge.
    twiceSix += thickness * (ax * by - ay * bx); // lid fan
    twiceSix += wedge(ax, ay, cx, cy, dx, dy, thickness, 0, 0);
    twiceSix += wedge(ax, ay, dx, dy, bx, by, thickness, 0, thickness);
  }
  return twiceSix / 6;
}

/** Six times the signed volume of the tetrahedron from the origin to a triangle. */
function wedge(
  ax: number,
  ay: number,
  bx: number,
  by: number,
  cx: number,
  cy: number,
  az: number,
  bz: number,
  cz: number,
): number {
  return ax * (by * cz - bz * cy) + ay * (bz * cx - bx * cz) + az * (bx * cy - by * cx);
}
