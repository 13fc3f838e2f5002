import { type Box3, OrthographicCamera, Spherical, Vector3 } from 'three';
import { OrbitControls } from 'three/addons/controls/OrbitControls.js';

/** From the front, a little from the right and above: the usual pictorial view of a drawing. */
const firstDirection = new Vector3(0.55, -1, 0.55).normalize();
const ORBIT_STEP_RADIANS = Math.PI / 18;
const ZOOM_STEP = 1.2;
/** Distance of the eye from what it looks at, in reaches; without effect on the picture's size. */
const DISTANCE = 6;
/** Share of the picture that a fitted object may fill; the rest is for balloons or dimensions. */
const fills = {
  usual: { width: 0.72, height: 0.86 },
  wide: { width: 0.7, height: 0.76 },
} as const;
/** Share of the picture's shorter side that a place takes in a close look. */
const CLOSE_UP_FILL = 0.4;
export type PictureMargin = keyof typeof fills;

export type CameraMove = 'left' | 'right' | 'up' | 'down' | 'closer' | 'farther';

/** What the camera looks at and how close; interpolated by the scene. */
export interface Framing {
  readonly target: Vector3;
  readonly pixelsPerMm: number;
  /** From the target to the eye, of length 1; left out, the direction stays. */
  readonly direction?: Vector3;
}

/**
 * An orthographic camera in millimetres: its zoom is pixels per millimetre at every depth, so that
 * lengths can be read off the picture.
 */
export class CameraRig {
  readonly camera = new OrthographicCamera(-1, 1, 1, -1, 0.1, 10);
  readonly controls: OrbitControls;
  private widthPx = 1;
  private heightPx = 1;
  private reachMm = 1;
  private fill: { readonly width: number; readonly height: number } = fills.usual;

  constructor(canvas: HTMLCanvasElement, onChange: () => void, onRest: () => void) {
    // OrbitControls reads the up direction once, when it is made.
    this.camera.up.set(0, 0, 1);
    this.controls = new OrbitControls(this.camera, canvas);
    this.controls.zoomToCursor = true;
    this.controls.addEventListener('change', onChange);
    this.controls.addEventListener('end', onRest);
  }

  get pixelsPerMm(): number {
    return this.camera.zoom;
  }

  resize(widthPx: number, heightPx: number): void {
    this.widthPx = widthPx;
    this.heightPx = heightPx;
    this.camera.left = -widthPx / 2;
    this.camera.right = widthPx / 2;
    this.camera.top = heightPx / 2;
    this.camera.bottom = -heightPx / 2;
    this.camera.updateProjectionMatrix();
  }

  /** How much room the next framing leaves round the object. */
  setMargin(margin: PictureMargin): void {
    this.fill = fills[margin];
  }

  /** Tells the camera how far things reach, so that nothing is clipped and zoom has sane ends. */
  setReach(box: Box3): void {
    this.reachMm = Math.max(box.getSize(new Vector3()).length(), 1e-3);
    this.camera.near = 0;
    this.camera.far = 2 * DISTANCE * this.reachMm;
    this.controls.minZoom = Math.min(this.widthPx, this.heightPx) / (20 * this.reachMm);
    this.controls.maxZoom = (400 * Math.max(this.widthPx, this.heightPx)) / this.reachMm;
    this.place(this.controls.target, this.direction());
    this.camera.updateProjectionMatrix();
  }

  /** Changes the zoom alone. */
  zoomTo(pixelsPerMm: number): void {
    if (Number.isFinite(pixelsPerMm) && pixelsPerMm > 0)
      this.frame({ ...this.framing(), pixelsPerMm });
  }

  /** Frames a fraction of the way from one framing to another. */
  mix(from: Framing, to: Framing, fraction: number): void {
    this.frame({
      target: new Vector3().lerpVectors(from.target, to.target, fraction),
      // Even to the eye: zoom grows by ratio, not by difference.
      pixelsPerMm: from.pixelsPerMm * (to.pixelsPerMm / from.pixelsPerMm) ** fraction,
      ...(from.direction &&
        to.direction && {
          direction: new Vector3().lerpVectors(from.direction, to.direction, fraction).normalize(),
        }),
    });
  }

  /** The framing that shows all points in full from the present direction. */
  framingOf(points: readonly Vector3[]): Framing {
    const forward = this.direction();
    const right = new Vector3().crossVectors(this.camera.up, forward);
    if (right.lengthSq() < 1e-9) right.set(1, 0, 0);
    right.normalize();
    const up = new Vector3().crossVectors(forward, right);
    const target = new Vector3();
    const spans = [right, up, forward].map((axis) => {
      let low = Infinity;
      let high = -Infinity;
      for (const point of points) {
        const along = point.dot(axis);
        low = Math.min(low, along);
        high = Math.max(high, along);
      }
      target.addScaledVector(axis, (low + high) / 2);
      return high - low;
    });
    const pixelsPerMm = Math.min(
      (this.widthPx * this.fill.width) / Math.max(spans[0]!, 1e-6),
      (this.heightPx * this.fill.height) / Math.max(spans[1]!, 1e-6),
    );
    return { target, pixelsPerMm };
  }

  /** How much a line on the ground that runs away from the eye is shortened, 0 … 1. */
  get groundShortening(): number {
    return Math.abs(this.direction().z);
  }

  /** A close look at a place, turned so far that it does not lie behind what is around `centre`. */
  closeUp(at: Vector3, reachMm: number, centre: Vector3): Required<Framing> {
    const outward = at.clone().sub(centre);
    const direction = this.direction();
    if (outward.lengthSq() > 1e-9) {
      outward.normalize();
      // Seen from well outside it already, the picture keeps its direction.
      if (direction.dot(outward) < 0.5) direction.addScaledVector(outward, 1.5).normalize();
    }
    const side = Math.min(this.widthPx, this.heightPx);
    const pixelsPerMm = Math.min(
      (CLOSE_UP_FILL * side) / Math.max(2 * reachMm, 1e-6),
      this.controls.maxZoom,
    );
    return { target: at.clone(), pixelsPerMm, direction };
  }

  framing(): Framing {
    return { target: this.controls.target.clone(), pixelsPerMm: this.camera.zoom };
  }

  /** Moves the camera to a framing, keeping its direction. */
  frame(framing: Framing): void {
    const direction = framing.direction ?? this.direction();
    this.controls.target.copy(framing.target);
    this.place(framing.target, direction);
    this.camera.zoom = framing.pixelsPerMm;
    this.camera.updateProjectionMatrix();
    this.controls.update();
  }

  /** One step of the keyboard. */
  move(move: CameraMove): void {
    if (move === 'closer' || move === 'farther') {
      const zoom = this.camera.zoom * (move === 'closer' ? ZOOM_STEP : 1 / ZOOM_STEP);
      this.camera.zoom = Math.min(Math.max(zoom, this.controls.minZoom), this.controls.maxZoom);
      this.camera.updateProjectionMatrix();
    } else {
      this.orbit(move);
    }
    this.controls.update();
  }

  dispose(): void {
    this.controls.dispose();
  }

  private place(target: Vector3, direction: Vector3): void {
    this.camera.position.copy(target).addScaledVector(direction, DISTANCE * this.reachMm);
  }

  private orbit(move: 'left' | 'right' | 'up' | 'down'): void {
    const offset = this.camera.position.clone().sub(this.controls.target);
    // Spherical measures from +y; the sheet's up is +z.
    const angles = new Spherical().setFromCartesianCoords(offset.x, offset.z, -offset.y);
    if (move === 'left') angles.theta -= ORBIT_STEP_RADIANS;
    if (move === 'right') angles.theta += ORBIT_STEP_RADIANS;
    if (move === 'up') angles.phi -= ORBIT_STEP_RADIANS;
    if (move === 'down') angles.phi += ORBIT_STEP_RADIANS;
    angles.phi = Math.min(Math.max(angles.phi, 1e-3), Math.PI - 1e-3);
    const turned = new Vector3().setFromSpherical(angles);
    this.camera.position.set(turned.x, -turned.z, turned.y).add(this.controls.target);
    this.camera.lookAt(this.controls.target);
  }

  /** From the target to the camera, length 1. */
  direction(): Vector3 {
    const direction = this.camera.position.clone().sub(this.controls.target);
    return direction.lengthSq() > 1e-12 ? direction.normalize() : firstDirection.clone();
  }
}
