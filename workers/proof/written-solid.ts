import {
  BackSide,
  BufferAttribute,
  BufferGeometry,
  DoubleSide,
  FrontSide,
  Ray,
  Vector3,
} from 'three';
import { MeshBVH } from 'three-mesh-bvh';

type Point = readonly [number, number, number];

/**
 * A written file as a solid in the assembled model, asked by rays. Points and directions are given
 * in the model; `placement` (12 numbers, rows of a 3 × 4 matrix) and `enlargement` say how the
 * model lies in the file. Distances come back in the model's mm.
 */
export class WrittenSolid {
  private readonly bvh: MeshBVH;
  private readonly ray = new Ray();
  private readonly at = new Vector3();

  constructor(
    private readonly corners: Float32Array,
    private readonly placement: readonly number[],
    private readonly enlargement: number,
  ) {
    const geometry = new BufferGeometry();
    geometry.setAttribute('position', new BufferAttribute(corners, 3));
    this.bvh = new MeshBVH(geometry, { indirect: true, targetLeafSize: 12 } as never);
  }

  /** Distance from a point to the surface, mm. */
  distance(point: Point): number {
    this.toFile(point, this.at);
    const found = this.bvh.closestPointToPoint(this.at);
    return (found?.distance ?? Infinity) / this.enlargement;
  }

  /** Whether a point lies in the material: what a ray from it first meets is the back of a facet. */
  holds(point: Point, direction: Point): boolean {
    const hit = this.first(point, direction, DoubleSide);
    if (!hit?.face) return false;
    return hit.face.normal.dot(this.ray.direction) > 0;
  }

  /** Distance to the first surface, and from there on to where the material ends, mm. */
  wallAlong(point: Point, direction: Point): { gapMm: number; wallMm: number } {
    const gap = this.first(point, direction, FrontSide)?.distance ?? Infinity;
    if (gap === Infinity) return { gapMm: Infinity, wallMm: Infinity };
    const gapMm = gap / this.enlargement;
    const past = gapMm + 1e-4;
    const inside: Point = [
      point[0] + past * direction[0],
      point[1] + past * direction[1],
      point[2] + past * direction[2],
    ];
    const wall = this.first(inside, direction, BackSide)?.distance ?? Infinity;
    return { gapMm, wallMm: wall / this.enlargement + 1e-4 };
  }

  /** Distance to the first surface along a ray, mm; Infinity when it meets none. */
  firstHit(point: Point, direction: Point): number {
    return (this.first(point, direction, DoubleSide)?.distance ?? Infinity) / this.enlargement;
  }

  /** Corners of the file at even steps, in the model; at most so many. */
  samples(most: number): Point[] {
    const count = this.corners.length / 3;
    const stride = Math.max(1, Math.floor(count / most));
    const found: Point[] = [];
    for (let k = Math.floor(stride / 2); k < count && found.length < most; k += stride)
      found.push(this.toModel(3 * k));
    return found;
  }

  private first(point: Point, direction: Point, side: 0 | 1 | 2) {
    this.toFile(point, this.ray.origin);
    this.turn(direction, this.ray.direction);
    return this.bvh.raycastFirst(this.ray, side);
  }

  private toFile([x, y, z]: Point, to: Vector3): void {
    const m = this.placement;
    const f = this.enlargement;
    to.set(
      f * (m[0] * x + m[1] * y + m[2] * z) + m[3],
      f * (m[4] * x + m[5] * y + m[6] * z) + m[7],
      f * (m[8] * x + m[9] * y + m[10] * z) + m[11],
    );
  }

  private turn([x, y, z]: Point, to: Vector3): void {
    const m = this.placement;
    to.set(
      m[0] * x + m[1] * y + m[2] * z,
      m[4] * x + m[5] * y + m[6] * z,
      m[8] * x + m[9] * y + m[10] * z,
    );
  }

  /** The inverse of a rigid motion is its transpose. */
  private toModel(at: number): Point {
    const m = this.placement;
    const x = this.corners[at] - m[3];
    const y = this.corners[at + 1] - m[7];
    const z = this.corners[at + 2] - m[11];
    const f = 1 / this.enlargement;
    return [
      f * (m[0] * x + m[4] * y + m[8] * z),
      f * (m[1] * x + m[5] * y + m[9] * z),
      f * (m[2] * x + m[6] * y + m[10] * z),
    ];
  }
}
