/** The plane of a flat rim: unit normal of the cap that closes it outward, and its distance from 0. */
export interface RimPlane {
  readonly normal: readonly [number, number, number];
  readonly offset: number;
}

/**
 * The plane of a rim by its Newell normal; null when a point lies farther off it than the tolerance or
 * the rim encloses no area. The cap runs against the rim, so its normal is the other way round.
 */
export function rimPlane(rim: Float64Array, tolerance: number): RimPlane | null {
  let [x, y, z] = [0, 0, 0];
  const [ox, oy, oz] = rim;
  for (let i = 0; i < rim.length; i += 3) {
    const j = (i + 3) % rim.length;
    const [ax, ay, az] = [rim[i] - ox, rim[i + 1] - oy, rim[i + 2] - oz];
    const [bx, by, bz] = [rim[j] - ox, rim[j + 1] - oy, rim[j + 2] - oz];
    x -= ay * bz - az * by;
    y -= az * bx - ax * bz;
    z -= ax * by - ay * bx;
  }
  const length = Math.hypot(x, y, z);
  if (!(length > 0)) return null;
  const normal = [x / length, y / length, z / length] as const;
  let offset = 0;
  for (let i = 0; i < rim.length; i += 3)
    offset += normal[0] * rim[i] + normal[1] * rim[i + 1] + normal[2] * rim[i + 2];
  offset /= rim.length / 3;
  for (let i = 0; i < rim.length; i += 3) {
    const off = normal[0] * rim[i] + normal[1] * rim[i + 1] + normal[2] * rim[i + 2] - offset;
    if (Math.abs(off) > tolerance) return null;
  }
  return { normal, offset };
}
