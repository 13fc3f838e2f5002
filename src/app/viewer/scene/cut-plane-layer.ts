import {
  BackSide,
  type Box3,
  BufferAttribute,
  BufferGeometry,
  Color,
  DoubleSide,
  Group,
  LineBasicMaterial,
  LineLoop,
  Mesh,
  MeshBasicMaterial,
  MeshLambertMaterial,
  Plane,
  PlaneGeometry,
  Quaternion,
  Vector3,
} from 'three';
import { disposeTree } from './disposal';
import { type PieceStage } from './piece-stage';
import { pieceTint, type SceneTheme } from './scene-theme';
import { type Triple } from './view-parts';

/** Points p with normal·p = offsetMm; the normal has length 1. */
export interface CutPlane {
  readonly normal: Triple;
  readonly offsetMm: number;
}

/** Room between the model and the rim of the drawn plane, as a share of the model's diagonal. */
const RIM_SHARE = 0.58;
/** Palette numbers; the same as those of the two halves when they are pieces. */
const ABOVE_COLOUR = 0;
const BELOW_COLOUR = 1;

/**
 * A plane through the model while it is being moved: the part below in full, the part above as
 * a veil, the section hatched in the colour of seams. Only clipped on the screen; nothing is cut yet.
 */
export class CutPlaneLayer {
  readonly root = new Group();
  private readonly sheet = new Mesh(
    new PlaneGeometry(1, 1),
    new MeshBasicMaterial({
      transparent: true,
      opacity: 0.14,
      side: DoubleSide,
      depthWrite: false,
    }),
  );
  private readonly rim = new LineLoop(squareRim(), new LineBasicMaterial());
  private readonly above = new Plane();
  private readonly below = new Plane();
  // What is above is a veil, so that the section below it can be seen.
  private readonly veil = new MeshLambertMaterial({
    clippingPlanes: [this.above],
    transparent: true,
    opacity: 0.3,
    depthWrite: false,
  });
  private readonly solid = new MeshLambertMaterial({ clippingPlanes: [this.below] });
  private readonly paper = { value: new Color() };
  private readonly section = hatched(
    new MeshBasicMaterial({ clippingPlanes: [this.below], side: BackSide }),
    this.paper,
  );
  private readonly copies = new Group();
  private plane: CutPlane | null = null;

  constructor(private readonly stage: PieceStage) {
    this.root.add(this.copies, this.sheet, this.rim);
    this.root.visible = false;
    this.rim.renderOrder = 1;
  }

  setPlane(plane: CutPlane | null): void {
    this.plane = plane;
    this.refresh();
  }

  /** Takes over the bodies on the stage; call when they have changed. */
  refresh(): void {
    this.copies.clear();
    const { plane } = this;
    this.root.visible = plane !== null && this.stage.bodies.length > 0;
    this.stage.setBodiesDrawn(!this.root.visible);
    if (!plane || !this.root.visible) return;
    const normal = new Vector3(...plane.normal);
    // A clipping plane keeps the side its normal points to.
    this.above.set(normal, -plane.offsetMm);
    this.below.set(normal.clone().negate(), plane.offsetMm);
    for (const body of this.stage.bodies)
      for (const material of [this.section, this.solid, this.veil])
        this.copies.add(new Mesh(body.mesh.geometry, material));
    this.placeSheet(this.stage.shownBox(), normal, plane.offsetMm);
  }

  setTheme(theme: SceneTheme): void {
    this.veil.color.set(pieceTint(ABOVE_COLOUR, theme.isDark));
    this.solid.color.set(pieceTint(BELOW_COLOUR, theme.isDark));
    this.section.color.set(theme.copper);
    this.paper.value.set(theme.paper);
    this.sheet.material.color.set(theme.copper);
    this.rim.material.color.set(theme.copper);
  }

  dispose(): void {
    // The copies' geometries belong to the bodies on the stage.
    this.copies.clear();
    for (const material of [this.section, this.solid, this.veil]) material.dispose();
    disposeTree(this.root);
  }

  private placeSheet(box: Box3, normal: Vector3, offsetMm: number): void {
    const size = box.getSize(new Vector3()).length() * 2 * RIM_SHARE;
    const centre = box.getCenter(new Vector3());
    centre.addScaledVector(normal, offsetMm - centre.dot(normal));
    const turn = new Quaternion().setFromUnitVectors(new Vector3(0, 0, 1), normal);
    for (const object of [this.sheet, this.rim]) {
      object.position.copy(centre);
      object.quaternion.copy(turn);
      object.scale.setScalar(size);
    }
  }
}

/** Hatches a material at 45° on the screen, as section faces are on drawings (ISO 128, from memory). */
function hatched(material: MeshBasicMaterial, paper: { value: Color }): MeshBasicMaterial {
  material.onBeforeCompile = (shader) => {
    shader.uniforms['hatchPaper'] = paper;
    shader.fragmentShader = shader.fragmentShader
      .replace('void main() {', 'uniform vec3 hatchPaper;\nvoid main() {')
      .replace(
        '#include <color_fragment>',
        `#include <color_fragment>
        float stripe = step(0.25, fract((gl_FragCoord.x - gl_FragCoord.y) / 9.0));
        diffuseColor.rgb = mix(diffuseColor.rgb, hatchPaper, 0.72 * stripe);`,
      );
  };
  return material;
}

function squareRim(): BufferGeometry {
  const corners = new Float32Array([-0.5, -0.5, 0, 0.5, -0.5, 0, 0.5, 0.5, 0, -0.5, 0.5, 0]);
  return new BufferGeometry().setAttribute('position', new BufferAttribute(corners, 3));
}
