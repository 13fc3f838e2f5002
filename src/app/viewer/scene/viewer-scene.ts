import {
  AmbientLight,
  Box3,
  DirectionalLight,
  Raycaster,
  Scene,
  Vector2,
  Vector3,
  type WebGLRenderer,
} from 'three';
import { type BuildSpace } from '../../../../shared/geometry/fitting/build-space.js';
import { Balloons, type Numbered } from './balloons';
import { CameraRig, type CameraMove, type Framing } from './camera-rig';
import { CutPlaneLayer, type CutPlane } from './cut-plane-layer';
import { DimensionOverlay, boxDimensions } from './dimension-overlay';
import { Glide } from './glide';
import { PieceStage, type SceneView } from './piece-stage';
import { PlaceMarker } from './place-marker';
import { PressDetector } from './press-detector';
import { createRenderer } from './renderer';
import { scaleBarFor, type ScaleBar } from './scale-steps';
import { type SceneTheme } from './scene-theme';
import { SelectionOutline } from './selection-outline';
import { type ScenePiece, type SceneSeam, type Triple } from './view-parts';

/** What the scene draws on and whom it tells. */
export interface SceneHost {
  readonly canvas: HTMLCanvasElement;
  readonly overlay: SVGSVGElement;
  readonly antialias: boolean;
  readonly prefersReducedMotion: () => boolean;
  readonly onDrawn: (frames: number) => void;
  readonly onMeasured: (measure: SceneMeasure) => void;
  /** A piece was clicked, or nothing. */
  readonly onPicked: (name: string | null) => void;
}

/** A place worth looking at, in the assembled model. */
export interface ScenePlace {
  readonly atMm: Triple;
  /** Radius to show around it. */
  readonly reachMm: number;
}

/** Lengths to be read off the picture. */
export interface SceneMeasure {
  readonly bar: ScaleBar;
  readonly gridMm: number;
  readonly numbered: Numbered;
}

const SCALE_BAR_PX = 120;
/** Lines nearer to each other than this have faded away. */
const LEAST_GRID_PX = 2.7;
/** Over the left shoulder, as on a drawing table; in the camera's frame. */
const lightDirection = new Vector3(-0.55, 0.85, 1.1);

/**
 * The picture of a plan: pieces, seams, envelope, ground. Plain three.js, in millimetres, z up.
 * Draws only when something has changed.
 */
export class ViewerScene {
  private readonly scene = new Scene();
  private readonly renderer: WebGLRenderer;
  private readonly rig: CameraRig;
  private readonly stage = new PieceStage();
  private readonly outline: SelectionOutline;
  private readonly cutLayer: CutPlaneLayer;
  private readonly balloons: Balloons;
  private readonly dimensions: DimensionOverlay;
  private readonly marker: PlaceMarker;
  private readonly press: PressDetector;
  private readonly glide: Glide;
  private readonly light = new DirectionalLight('#ffffff', 1.9);
  private readonly raycaster = new Raycaster();
  private readonly size = { widthPx: 0, heightPx: 0 };
  private framings: { from: Framing; to: Framing } | null = null;
  private framedBox = new Box3();
  private selected: string | null = null;
  private view: SceneView = 'whole';
  private frames = 0;
  private pendingFrame = 0;
  /** Whether pieces or camera have moved since balloons last looked for visible points. */
  private isUnsettled = true;
  private hasDimensions = false;
  private isDisposed = false;

  constructor(private readonly host: SceneHost) {
    this.renderer = createRenderer(host.canvas, host.antialias);
    this.outline = new SelectionOutline(host.antialias);
    this.glide = new Glide(host.prefersReducedMotion);
    this.rig = new CameraRig(host.canvas, this.requestRender, this.settle);
    this.balloons = new Balloons(host.overlay, host.onPicked);
    this.dimensions = new DimensionOverlay(host.overlay);
    this.marker = new PlaceMarker(host.overlay);
    this.cutLayer = new CutPlaneLayer(this.stage);
    this.press = new PressDetector(host.canvas, (x, y) => host.onPicked(this.pick(x, y)));
    this.raycaster.firstHitOnly = true;
    this.scene.add(new AmbientLight('#ffffff', 1.45), this.light, this.light.target);
    this.scene.add(this.stage.root, this.cutLayer.root);
    host.canvas.addEventListener('webglcontextrestored', this.requestRender);
  }

  /**
   * Replaces everything shown. Frames it anew unless it stands where the last one stood, so that
   * looking at a model whole and in halves keeps the view. One piece alone is drawn plain.
   */
  setPieces(pieces: readonly ScenePiece[], seams: readonly SceneSeam[] = []): void {
    this.keepCloseness(() => {
      this.stage.setPieces(pieces, seams);
      this.stage.resize(this.size.widthPx, this.size.heightPx);
      this.balloons.setBodies(this.stage.bodies);
      this.cutLayer.refresh();
      this.place();
    });
    const box = this.stage.assembledBox();
    if (!isSameBox(box, this.framedBox)) this.fit(false);
    this.framedBox = box;
  }

  /**
   * Moves the pieces apart; the camera draws back as far as they reach.
   * @param fraction 0 assembled … 1 as far apart as it goes
   */
  setSpread(fraction: number): void {
    this.keepCloseness(() => {
      this.stage.setSpread(fraction);
      this.place();
    });
  }

  setSelected(name: string | null): void {
    if (name === this.selected) return;
    this.selected = name;
    this.stage.setSelected(name);
    if (this.view === 'bed') this.fit(true);
    this.settle();
  }

  setView(view: SceneView): void {
    if (view === this.view) return;
    this.view = view;
    this.stage.setView(view);
    this.fit(true);
  }

  /** The envelope in which a selected piece is shown on the bed. */
  setSpace(space: BuildSpace | null): void {
    this.stage.setSpace(space);
    this.place();
  }

  setTheme(theme: SceneTheme): void {
    this.stage.setTheme(theme);
    this.cutLayer.setTheme(theme);
    this.outline.setColour(theme.ink);
    this.requestRender();
  }

  /** Flies to a place of the assembled model and rings it; null takes the ring away. */
  setPlace(place: ScenePlace | null): void {
    this.marker.setPlace(place && new Vector3(...place.atMm));
    if (place && this.size.widthPx > 0) {
      const at = new Vector3(...place.atMm);
      const centre = this.stage.assembledBox().getCenter(new Vector3());
      this.framings = {
        from: { ...this.rig.framing(), direction: this.rig.direction() },
        to: this.rig.closeUp(at, place.reachMm, centre),
      };
      if (!this.glide.start(performance.now())) {
        this.glide.stop();
        this.advance(1);
      }
    }
    this.requestRender();
  }

  /** Colours surfaces by wall thickness up to `toMm`; null draws them plain. */
  setWallShading(toMm: number | null): void {
    this.stage.setWallShading(toMm);
    this.requestRender();
  }

  /** Whether the size of the whole is written along its sides. */
  setDimensions(hasDimensions: boolean): void {
    this.hasDimensions = hasDimensions;
    this.rig.setMargin(hasDimensions ? 'wide' : 'usual');
    this.requestRender();
  }

  /** Shows a plane through the whole model and both sides of it; null takes it away. */
  setCutPlane(plane: CutPlane | null): void {
    this.cutLayer.setPlane(plane);
    this.requestRender();
  }

  resize(widthPx: number, heightPx: number, pixelRatio: number): void {
    if (widthPx < 1 || heightPx < 1) return;
    const isFirst = this.size.widthPx === 0;
    this.keepCloseness(() => {
      this.size.widthPx = widthPx;
      this.size.heightPx = heightPx;
      this.renderer.setPixelRatio(pixelRatio);
      this.renderer.setSize(widthPx, heightPx, false);
      this.outline.resize(widthPx, heightPx, pixelRatio);
      this.stage.resize(widthPx, heightPx);
      this.rig.resize(widthPx, heightPx);
    });
    if (isFirst) this.fit(false);
    this.settle();
  }

  /** Shows everything that is there in full. */
  fit(smoothly = true): void {
    this.stage.aim();
    const box = this.stage.shownBox();
    if (box.isEmpty() || this.size.widthPx === 0) return;
    this.rig.setReach(box);
    const to = this.rig.framingOf(this.stage.shownPoints(this.hasDimensions));
    this.framings = { from: this.rig.framing(), to };
    if (!smoothly || !this.glide.start(performance.now())) {
      this.glide.stop();
      this.advance(1);
    }
    this.requestRender();
  }

  moveCamera(move: CameraMove): void {
    this.framings = null;
    this.rig.move(move);
    this.settle();
  }

  /** The piece under a point of the canvas, px from its upper left. */
  pick(xPx: number, yPx: number): string | null {
    const { widthPx, heightPx } = this.size;
    const at = new Vector2((xPx / widthPx) * 2 - 1, 1 - (yPx / heightPx) * 2);
    this.raycaster.setFromCamera(at, this.rig.camera);
    const shown = this.stage.bodies.filter((body) => body.isShown).map((body) => body.mesh);
    return this.raycaster.intersectObjects(shown, false)[0]?.object.name ?? null;
  }

  readonly requestRender = (): void => {
    if (this.pendingFrame !== 0 || this.isDisposed) return;
    this.pendingFrame = requestAnimationFrame(this.render);
  };

  /** GPU objects that are alive; for the check that nothing is left behind. */
  memory(): { geometries: number; textures: number } {
    return { ...this.renderer.info.memory };
  }

  dispose(): void {
    this.isDisposed = true;
    cancelAnimationFrame(this.pendingFrame);
    this.host.canvas.removeEventListener('webglcontextrestored', this.requestRender);
    this.press.dispose();
    this.cutLayer.dispose();
    this.stage.dispose();
    this.outline.dispose();
    this.balloons.dispose();
    this.dimensions.dispose();
    this.marker.dispose();
    this.light.dispose();
    this.rig.dispose();
    this.renderer.dispose();
    // Browsers keep about sixteen contexts and take the oldest away; give this one back now.
    this.renderer.forceContextLoss();
  }

  /**
   * Makes a change and zooms so that the picture is as full as before; measured against what fits,
   * so that going there and back ends where it began.
   */
  private keepCloseness(change: () => void): void {
    const fitting = () =>
      this.rig.framingOf(this.stage.shownPoints(this.hasDimensions)).pixelsPerMm;
    const closeness = this.rig.pixelsPerMm / fitting();
    change();
    this.rig.zoomTo(closeness * fitting());
  }

  /** Puts everything where it belongs at once, without moving the camera. */
  private place(): void {
    this.glide.stop();
    this.framings = null;
    this.stage.aim();
    this.stage.advance(1);
    const box = this.stage.shownBox();
    if (!box.isEmpty()) this.rig.setReach(box);
    this.settle();
  }

  private readonly settle = (): void => {
    this.isUnsettled = true;
    this.requestRender();
  };

  private advance(fraction: number): void {
    this.stage.advance(fraction);
    if (this.framings) this.rig.mix(this.framings.from, this.framings.to, fraction);
    if (fraction === 1) this.framings = null;
    this.isUnsettled = true;
  }

  private readonly render = (nowMs: number): void => {
    this.pendingFrame = 0;
    if (this.glide.isRunning) {
      this.advance(this.glide.at(nowMs));
      this.requestRender();
    }
    const { camera } = this.rig;
    this.light.target.position.copy(this.rig.controls.target);
    this.light.position
      .copy(lightDirection)
      .applyQuaternion(camera.quaternion)
      .add(this.light.target.position);
    this.renderer.render(this.scene, camera);
    const selected = this.stage.isOneBody ? null : this.stage.selectedMesh();
    if (selected) this.outline.draw(this.renderer, camera, selected);
    const numbered = this.drawBalloons();
    this.drawDimensions();
    this.marker.draw(camera, this.size);
    const bar = scaleBarFor(this.rig.pixelsPerMm, SCALE_BAR_PX);
    this.host.onMeasured({ bar, gridMm: this.visibleGridMm(), numbered });
    this.host.onDrawn(++this.frames);
  };

  /** The finest lines of the grid that the picture shows. */
  private visibleGridMm(): number {
    const { gridMm } = this.stage;
    const spacingPx = gridMm * this.rig.pixelsPerMm * this.rig.groundShortening;
    return spacingPx < LEAST_GRID_PX ? 10 * gridMm : gridMm;
  }

  private drawBalloons(): Numbered {
    if (this.stage.isOneBody) {
      this.balloons.clear();
      return { shown: 0, total: 0 };
    }
    const { camera } = this.rig;
    if (this.isUnsettled && !this.glide.isRunning) {
      this.balloons.settle(camera, this.selected);
      this.isUnsettled = false;
    }
    return this.balloons.draw(camera, this.size, this.selected);
  }

  private drawDimensions(): void {
    const box = this.stage.shownBox();
    const isDrawn = this.hasDimensions && !box.isEmpty();
    this.dimensions.draw(isDrawn ? boxDimensions(box, this.rig.camera, this.size) : []);
  }
}

/** Whether two boxes differ by less than a hundredth of their size. */
function isSameBox(a: Box3, b: Box3): boolean {
  if (a.isEmpty() || b.isEmpty()) return false;
  const slackMm = 0.01 * a.getSize(new Vector3()).length();
  return a.min.distanceTo(b.min) < slackMm && a.max.distanceTo(b.max) < slackMm;
}
