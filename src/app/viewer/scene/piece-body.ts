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
import { type SceneTheme } from './scene-theme';
import { shadeSurface } from './surface-shading';
import { type ScenePiece, type SurfacePart } from './view-parts';

interface Prepared {
  readonly surface: BufferGeometry;
  readonly lines: BufferGeometry;
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
  const lines = new BufferGeometry();
  lines.setAttribute('position', new BufferAttribute(shaded.featureEdges, 3));
  prepared.set(part, { surface, lines });
  return { surface, lines };
}

/** A piece in the scene: its surface, its edges as thin lines, its place and where it is going. */
export class PieceBody {
  readonly group = new Group();
  readonly mesh: Mesh<BufferGeometry, MeshLambertMaterial>;
  private readonly edges: LineSegments<BufferGeometry, LineBasicMaterial>;
  private readonly pose: Pose;
  private from = identityPose();
  private to = identityPose();

  constructor(
    readonly piece: ScenePiece,
    readonly colour: number,
  ) {
    const { surface, lines } = prepare(piece.surface);
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
    this.edges = new LineSegments(lines, new LineBasicMaterial({ transparent: true }));
    this.group.add(this.mesh, this.edges);
    this.pose = { position: this.group.position, rotation: this.group.quaternion };
  }

  get isShown(): boolean {
    return this.group.visible;
  }

  setColours(tint: string, theme: SceneTheme): void {
    this.mesh.material.color.set(tint);
    this.edges.material.color.set(theme.isDark ? '#0b0e11' : theme.graphite);
    this.edges.material.opacity = theme.isDark ? 0.75 : 0.55;
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
