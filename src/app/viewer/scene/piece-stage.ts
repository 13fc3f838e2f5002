import { Box3, Group, Vector3, type Mesh } from 'three';
import { type BuildSpace } from '../../../../shared/geometry/fitting/build-space.js';
import { EdgeLines } from './edge-lines';
import { EnvelopeBox } from './envelope-box';
import { assignColours } from './palette';
import { PaperGround } from './paper-ground';
import { PieceBody } from './piece-body';
import { type Pose, identityPose, poseOfPlacement } from './placement';
import { gridStepFor } from './scale-steps';
import { bodyTint, pieceTint, type SceneTheme } from './scene-theme';
import { SeamLines } from './seam-lines';
import { spreadOffsets } from './spread';
import { type ScenePiece, type SceneSeam, type Triple } from './view-parts';

/** The whole object, assembled or spread, or the selected piece on the bed. */
export type SceneView = 'whole' | 'bed';

/** Share of the model's height between the model and the ground, so that faces do not fight. */
const GROUND_GAP_SHARE = 2e-3;
/** Drawn seams keep this near to the true ones, as a share of the model: half a pixel in full view. */
const SEAM_TOLERANCE_SHARE = 5e-4;
/** Edges stay darker than the pieces on a dark sheet too. */
const darkEdges = '#0b0e11';

/** What stands on the sheet and where: pieces, seams, envelope, ground. Knows no screen. */
export class PieceStage {
  readonly root = new Group();
  private readonly ground = new PaperGround();
  private readonly edges = new EdgeLines();
  private _bodies: PieceBody[] = [];
  private seams: SeamLines | null = null;
  private envelope: EnvelopeBox | null = null;
  private theme: SceneTheme | null = null;
  private modelBox = new Box3();
  private selected: string | null = null;
  private view: SceneView = 'whole';
  private wallsToMm: number | null = null;
  private spread = 0;
  private areBodiesDrawn = true;
  private readonly poses = new Map<PieceBody, Pose>();

  constructor() {
    this.root.add(this.ground.mesh);
  }

  get bodies(): readonly PieceBody[] {
    return this._bodies;
  }

  get gridMm(): number {
    return gridStepFor(longestSide(this.modelBox));
  }

  /** Whether there is one piece only: it is drawn plain and needs no number. */
  get isOneBody(): boolean {
    return this._bodies.length === 1;
  }

  selectedMesh(): Mesh | null {
    const body = this.selected === null ? undefined : this.bodyOf(this.selected);
    return body?.isShown ? body.mesh : null;
  }

  setPieces(pieces: readonly ScenePiece[], seams: readonly SceneSeam[]): void {
    this.clear();
    const names = pieces.map((piece) => piece.name);
    const meetings = seams.map((seam) => seam.between);
    const colours = assignColours(names, meetings);
    this._bodies = pieces.map((piece) => new PieceBody(piece, colours.get(piece.name)!));
    for (const body of this._bodies) {
      this.root.add(body.group);
      this.modelBox.union(body.mesh.geometry.boundingBox!);
    }
    this.edges.drawOn(this._bodies);
    const toleranceMm = longestSide(this.modelBox) * SEAM_TOLERANCE_SHARE;
    this.seams = new SeamLines(seams, toleranceMm, (name) => this.bodyOf(name)?.group);
    this.applyTheme();
    this.setWallShading(this.wallsToMm);
    this.aim();
    this.advance(1);
  }

  setSpread(fraction: number): void {
    this.spread = fraction;
  }

  /** Colours surfaces by wall thickness up to `toMm`; null draws them plain. */
  setWallShading(toMm: number | null): void {
    this.wallsToMm = toMm;
    for (const body of this._bodies) body.setWallShading(toMm);
  }

  setSelected(name: string | null): void {
    this.selected = name;
  }

  setView(view: SceneView): void {
    this.view = view;
  }

  setSpace(space: BuildSpace | null): void {
    this.envelope?.dispose();
    this.envelope = space ? new EnvelopeBox(space) : null;
    if (this.envelope) this.root.add(this.envelope.group);
    this.applyTheme();
  }

  setTheme(theme: SceneTheme): void {
    this.theme = theme;
    this.applyTheme();
  }

  /** Decides where everything belongs now and starts it on its way there. */
  aim(): void {
    const isOnBed = this.isOnBed();
    const bed = this.bedOrigin();
    const offsets = this.offsets();
    this._bodies.forEach((body, index) => {
      const pose = isOnBed ? bedPose(body, bed) : offsetPose(offsets[index]!);
      this.poses.set(body, pose);
      body.aim(pose);
    });
    this.setBodiesDrawn(this.areBodiesDrawn);
    this.drawSupport();
    if (this.envelope) {
      this.envelope.group.visible = isOnBed;
      this.envelope.group.position.copy(bed);
    }
    this.placeGround(isOnBed);
    this.ground.mesh.visible = this._bodies.length > 0;
  }

  /** Hides the bodies without taking them off the stage, while something else stands for them. */
  setBodiesDrawn(areDrawn: boolean): void {
    this.areBodiesDrawn = areDrawn;
    const isOnBed = this.isOnBed();
    for (const body of this._bodies)
      body.group.visible = areDrawn && (!isOnBed || body.piece.name === this.selected);
  }

  /** Takes every piece a fraction of its way. */
  advance(fraction: number): void {
    for (const body of this._bodies) body.advance(fraction);
    this.root.updateMatrixWorld(true);
  }

  /** The box of everything as it stands assembled. */
  assembledBox(): Box3 {
    return this.modelBox.clone();
  }

  /** The box of everything that is shown, where it belongs after the move. */
  shownBox(): Box3 {
    const box = new Box3();
    if (this.isOnBed() && this.envelope)
      return box.copy(this.envelope.box).translate(this.envelope.group.position);
    for (const body of this._bodies) {
      const { position } = this.poses.get(body) ?? identityPose();
      box.union(new Box3().copy(body.mesh.geometry.boundingBox!).translate(position));
    }
    return box;
  }

  /**
   * Points that stand for the outline of everything that is shown, where it belongs.
   * @param asBox whether the corners of its box are meant, as for dimensions along it
   */
  shownPoints(asBox: boolean): Vector3[] {
    if (asBox || this.isOnBed()) return cornersOf(this.shownBox());
    return this._bodies.flatMap((body) => {
      const { position } = this.poses.get(body) ?? identityPose();
      return body.outlinePoints.map((point) => point.clone().add(position));
    });
  }

  resize(widthPx: number, heightPx: number): void {
    this.edges.resize(widthPx, heightPx);
    this.envelope?.resize(widthPx, heightPx);
    this.seams?.resize(widthPx, heightPx);
  }

  clear(): void {
    this.edges.clear();
    this.seams?.dispose();
    this.seams = null;
    for (const body of this._bodies) body.dispose();
    this._bodies = [];
    this.poses.clear();
    this.modelBox = new Box3();
  }

  dispose(): void {
    this.clear();
    this.envelope?.dispose();
    this.edges.dispose();
    this.ground.dispose();
  }

  private bodyOf(name: string): PieceBody | undefined {
    return this._bodies.find((body) => body.piece.name === name);
  }

  private isOnBed(): boolean {
    const body = this.selected === null ? undefined : this.bodyOf(this.selected);
    return this.view === 'bed' && this.envelope !== null && Boolean(body?.piece.placement);
  }

  /** The bed stands under the middle of the model, so that a piece has a short way to it. */
  private bedOrigin(): Vector3 {
    if (!this.envelope || this._bodies.length === 0) return new Vector3();
    const centre = this.modelBox.getCenter(new Vector3());
    const { max } = this.envelope.box;
    return new Vector3(centre.x - max.x / 2, centre.y - max.y / 2, this.modelBox.min.z);
  }

  private offsets(): Triple[] {
    const centre = this.modelBox.getCenter(new Vector3()).toArray();
    const size = this.modelBox.getSize(new Vector3()).toArray();
    const centres = this._bodies.map((body) => body.piece.centreMm);
    return spreadOffsets(centres, centre, size, this.spread);
  }

  private placeGround(isOnBed: boolean): void {
    if (this._bodies.length === 0) return;
    const box = this.shownBox();
    const size = box.getSize(new Vector3());
    const centre = box.getCenter(new Vector3());
    const gapMm = isOnBed ? 0 : size.z * GROUND_GAP_SHARE;
    // On the bed the grid starts at the bed's corner, so that it can be counted.
    const origin = isOnBed ? this.bedOrigin() : new Vector3();
    this.ground.place({
      centre: [centre.x, centre.y],
      origin: [origin.x, origin.y],
      heightMm: box.min.z - gapMm,
      radiusMm: 0.9 * longestSide(box) + 0.6 * Math.hypot(size.x, size.y),
      stepMm: this.gridMm,
    });
  }

  /** Support belongs to a piece on its bed. */
  private drawSupport(): void {
    const colour = this.theme && this.isOnBed() ? this.theme.copper : null;
    for (const body of this._bodies) body.setSupport(colour);
  }

  private applyTheme(): void {
    const { theme } = this;
    if (!theme) return;
    this.drawSupport();
    for (const body of this._bodies) {
      const tint = this.isOneBody ? bodyTint(theme.isDark) : pieceTint(body.colour, theme.isDark);
      body.setColour(tint);
    }
    this.edges.setColour(theme.isDark ? darkEdges : theme.graphite);
    this.seams?.setColour(theme.copper);
    this.envelope?.setColour(theme.ink);
    this.ground.setColour(theme.grid);
  }
}

function cornersOf(box: Box3): Vector3[] {
  if (box.isEmpty()) return [];
  const { min, max } = box;
  return [min.x, max.x].flatMap((x) =>
    [min.y, max.y].flatMap((y) => [min.z, max.z].map((z) => new Vector3(x, y, z))),
  );
}

function longestSide(box: Box3): number {
  return box.isEmpty() ? 0 : Math.max(...box.getSize(new Vector3()).toArray());
}

function offsetPose(offset: Triple): Pose {
  return { ...identityPose(), position: new Vector3(...offset) };
}

function bedPose(body: PieceBody, bed: Vector3): Pose {
  if (!body.piece.placement) return identityPose();
  const pose = poseOfPlacement(body.piece.placement);
  pose.position.add(bed);
  return pose;
}
