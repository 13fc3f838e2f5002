import {
  BufferAttribute,
  BufferGeometry,
  FrontSide,
  Group,
  LineBasicMaterial,
  LineSegments,
  Mesh,
  MeshLambertMaterial,
  Vector3,
} from 'three';
import { MeshBVH, acceleratedRaycast } from 'three-mesh-bvh';
import { disposeTree } from './disposal';
import { type Pose, identityPose, mixPoses } from './placement';
import { shadeSurface } from './surface-shading';
import { type ScenePiece, type SurfacePart } from './view-parts';
import { wallColours } from './wall-colours';

/** Enough points of a piece to frame it by. */
const OUTLINE_POINTS = 64;

interface Prepared {
  readonly outlinePoints: readonly Vector3[];
  readonly surface: BufferGeometry;
  readonly featureEdges: Float32Array;
}

/** Surfaces come and go on the screen; what was computed for one is kept as long as the surface. */
const prepared = new WeakMap<SurfacePart, Prepared>();

function prepare(part: SurfacePart): Prepared {
  const known = prepared.get(part);
  if (known) return known;
  const shaded = shadeSurface(part.positions, part.indices);
  const surface = new BufferGeometry();
  surface.setAttribute('position', new BufferAttribute(shaded.positions, 3));
  surface.setAttribute('normal', new BufferAttribute(shaded.normals, 3));
  surface.computeBoundingBox();
  surface.computeBoundingSphere();
  surface.boundsTree = new MeshBVH(surface, { indirect: true });
  const { featureEdges } = shaded;
  const made = { surface, featureEdges, outlinePoints: extremePoints(part.positions) };
  prepared.set(part, made);
  return made;
}

/** The farthest vertices in directions spread evenly over the sphere (Fibonacci lattice). */
function extremePoints(positions: Float32Array): Vector3[] {
  const points: Vector3[] = [];
  const goldenAngle = Math.PI * (3 - Math.sqrt(5));
  for (let at = 0; at < OUTLINE_POINTS; at++) {
    const z = 1 - (2 * at + 1) / OUTLINE_POINTS;
    const radius = Math.sqrt(1 - z * z);
    const x = radius * Math.cos(at * goldenAngle);
    const y = radius * Math.sin(at * goldenAngle);
    let farthest = 0;
    let reach = -Infinity;
    for (let i3 = 0; i3 < positions.length; i3 += 3) {
      const along = positions[i3]! * x + positions[i3 + 1]! * y + positions[i3 + 2]! * z;
      if (along > reach) {
        reach = along;
        farthest = i3;
      }
    }
    points.push(new Vector3().fromArray(positions, farthest));
  }
  return points;
}

/** Hidden until the piece lies on its bed. */
function supportLines(
  positions: Float32Array | undefined,
): LineSegments<BufferGeometry, LineBasicMaterial> | null {
  if (!positions || positions.length === 0) return null;
  const geometry = new BufferGeometry();
  geometry.setAttribute('position', new BufferAttribute(positions, 3));
  const lines = new LineSegments(
    geometry,
    new LineBasicMaterial({ transparent: true, opacity: 0.55 }),
  );
  lines.visible = false;
  return lines;
}

/** A piece in the scene: its surface, its place and where it is going. */
export class PieceBody {
  readonly group = new Group();
  /** In the assembled model. */
  readonly outlinePoints: readonly Vector3[];
  /** Flat xyz, two points a segment, in the assembled model. */
  readonly featureEdges: Float32Array;
  readonly mesh: Mesh<BufferGeometry, MeshLambertMaterial>;
  private readonly support: LineSegments<BufferGeometry, LineBasicMaterial> | null;
  private readonly pose: Pose;
  private tint = '#ffffff';
  private from = identityPose();
  private to = identityPose();

  constructor(
    readonly piece: ScenePiece,
    readonly colour: number,
  ) {
    const { surface, featureEdges, outlinePoints } = prepare(piece.surface);
    this.outlinePoints = outlinePoints;
    this.featureEdges = featureEdges;
    this.mesh = new Mesh(
      surface,
      // Pushed back a little so that lines on the surface win.
      new MeshLambertMaterial({
        side: FrontSide,
        polygonOffset: true,
        polygonOffsetFactor: 1,
        polygonOffsetUnits: 1,
      }),
    );
    this.mesh.raycast = acceleratedRaycast;
    this.mesh.name = piece.name;
    this.group.add(this.mesh);
    this.support = supportLines(piece.support);
    if (this.support) this.group.add(this.support);
    this.pose = { position: this.group.position, rotation: this.group.quaternion };
  }

  get isShown(): boolean {
    return this.group.visible;
  }

  /** Draws the columns of support in a colour, or nothing of them. */
  setSupport(colour: string | null): void {
    if (!this.support) return;
    this.support.visible = colour !== null;
    if (colour !== null) this.support.material.color.set(colour);
  }

  setColour(tint: string): void {
    this.tint = tint;
    if (!this.mesh.material.vertexColors) this.mesh.material.color.set(tint);
  }

  /** Colours the surface by wall thickness up to `toMm`, or by its tint alone; whether it could. */
  setWallShading(toMm: number | null): boolean {
    const { indices, walls } = this.piece.surface;
    const { geometry, material } = this.mesh;
    const isShaded = toMm !== null && walls !== undefined;
    if (isShaded)
      geometry.setAttribute('color', new BufferAttribute(wallColours(indices, walls, toMm), 3));
    else geometry.deleteAttribute('color');
    material.vertexColors = isShaded;
    material.color.set(isShaded ? '#ffffff' : this.tint);
    material.needsUpdate = true;
    return isShaded;
  }

  /** Starts a move to a pose from wherever the piece is now. */
  aim(pose: Pose): void {
    this.from = { position: this.pose.position.clone(), rotation: this.pose.rotation.clone() };
    this.to = pose;
  }

  /** Takes the piece a fraction of its move. */
  advance(fraction: number): void {
    mixPoses(this.from, this.to, fraction, this.pose);
  }

  /** The point of the surface nearest to the middle of the piece, in the piece's own frame. */
  nearestToCentre(target: Vector3): Vector3 {
    const centre = this.mesh.geometry.boundingBox!.getCenter(new Vector3());
    const hit = this.bounds.closestPointToPoint(centre);
    return target.copy(hit ? hit.point : centre);
  }

  get bounds(): MeshBVH {
    return this.mesh.geometry.boundsTree as MeshBVH;
  }

  dispose(): void {
    disposeTree(this.group);
  }
}
