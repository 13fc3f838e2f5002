import { BoxGeometry, BufferAttribute, BufferGeometry, Matrix4, Quaternion, Vector3 } from 'three';
import { Brush, Evaluator, INTERSECTION, SUBTRACTION } from 'three-bvh-csg';
import { type CutPlane } from '../scene/cut-plane-layer';

/** A surface as plain arrays, so that it can go through a worker's door. */
export interface HalfSurface {
  readonly positions: Float32Array;
  readonly indices: Uint32Array;
}

/** Both sides of a plane; a side with nothing on it is null. */
export interface CutHalves {
  readonly above: HalfSurface | null;
  readonly below: HalfSurface | null;
}

/** The box that stands for a half-space is this many times as large as the model. */
const HALF_SPACE_SCALE = 4;

/** Cuts one model by many planes, one after the other. */
export class HalvesCutter {
  private readonly model: Brush;
  private readonly evaluator = new Evaluator();
  private readonly centre: Vector3;
  private readonly reach: number;

  /** @param surface closed, mm; an open one gives halves without a proper section */
  constructor(surface: HalfSurface) {
    const geometry = new BufferGeometry();
    geometry.setAttribute('position', new BufferAttribute(surface.positions, 3));
    geometry.setIndex(new BufferAttribute(surface.indices, 1));
    geometry.computeBoundingSphere();
    this.centre = geometry.boundingSphere!.center.clone();
    this.reach = Math.max(geometry.boundingSphere!.radius, 1e-3);
    this.model = new Brush(geometry);
    this.model.updateMatrixWorld(true);
    this.evaluator.attributes = ['position'];
    this.evaluator.useGroups = false;
    useDelaunayClipping(this.evaluator);
  }

  /** The two halves. For looking at only: their edges are not closed well enough to be printed. */
  cut(plane: CutPlane): CutHalves {
    const space = this.halfSpaceAbove(plane);
    const [above, below] = this.evaluator.evaluate(
      this.model,
      space,
      [INTERSECTION, SUBTRACTION],
      [new Brush(), new Brush()],
    );
    space.geometry.dispose();
    space.disposeCacheData();
    return { above: surfaceOf(above!.geometry), below: surfaceOf(below!.geometry) };
  }

  private halfSpaceAbove(plane: CutPlane): Brush {
    const side = HALF_SPACE_SCALE * this.reach;
    const normal = new Vector3(...plane.normal);
    const geometry = new BoxGeometry(side, side, side).translate(0, 0, side / 2);
    // An arbitrary turn about the normal keeps the box's own edges away from the model's symmetry.
    const turn = new Quaternion().setFromUnitVectors(new Vector3(0, 0, 1), normal);
    const foot = this.centre
      .clone()
      .addScaledVector(normal, plane.offsetMm - this.centre.dot(normal));
    const brush = new Brush(geometry);
    brush.applyMatrix4(new Matrix4().compose(foot, turn, new Vector3(1, 1, 1)));
    brush.updateMatrixWorld(true);
    return brush;
  }
}

function surfaceOf(geometry: BufferGeometry): HalfSurface | null {
  const position = geometry.getAttribute('position') as BufferAttribute | undefined;
  if (!position) return null;
  const { start, count } = geometry.drawRange;
  const available = geometry.index ? geometry.index.count : position.count;
  const total = Math.min(count, available - start);
  if (total < 3) return null;
  const indices = new Uint32Array(total);
  for (let at = 0; at < total; at++)
    indices[at] = geometry.index ? geometry.index.getX(start + at) : start + at;
  return { positions: Float32Array.from(position.array.subarray(0, position.count * 3)), indices };
}

/**
 * Clips by constrained Delaunay triangulation: a tenth fewer triangles than clipping plane by plane
 * in the same time (20 000 and 180 000 triangle knots). The types of 0.0.18 do not list the switch.
 */
function useDelaunayClipping(evaluator: Evaluator): void {
  (evaluator as Evaluator & { useCDTClipping: boolean }).useCDTClipping = true;
}
