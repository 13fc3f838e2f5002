export type Vector3 = readonly [number, number, number];

/**
 * Points p with normal·p = offset (mm). The normal has length 1. The side with
 * normal·p ≥ offset is called above, the other below.
 */
export interface Plane {
  readonly normal: Vector3;
  readonly offset: number;
}
