import { Box3, type OrthographicCamera, Vector3 } from 'three';
import { findAnchor, samplePoints, type FoundAnchor } from './anchor-finder';
import { layOutBalloons, type BalloonAnchor } from './balloon-layout';
import { BALLOON_RADIUS_PX, BalloonOverlay, type DrawnBalloon } from './balloon-overlay';
import { type PieceBody } from './piece-body';

/** More balloons than this hide what they name. */
const MOST_BALLOONS = 40;
/** Among so many of the largest pieces those are looked for that nothing hides. */
const MOST_LOOKED_AT = 120;
/** The lower rim belongs to the scale bar. */
const SCALE_ROOM_PX = 32;

/** How many of the pieces in the picture bear a number. */
export interface Numbered {
  readonly shown: number;
  readonly total: number;
}

const point = new Vector3();

/** Keeps the balloons where their pieces are on the screen. */
export class Balloons {
  private readonly overlay: BalloonOverlay;
  private readonly samples = new Map<PieceBody, Vector3[]>();
  private readonly anchors = new Map<PieceBody, FoundAnchor>();
  private bySize: PieceBody[] = [];

  constructor(svg: SVGSVGElement, onPick: (name: string) => void) {
    this.overlay = new BalloonOverlay(svg, onPick);
  }

  setBodies(bodies: readonly PieceBody[]): void {
    this.samples.clear();
    this.anchors.clear();
    const size = (body: PieceBody) => body.mesh.geometry.boundingSphere!.radius;
    this.bySize = [...bodies].sort((a, b) => size(b) - size(a));
  }

  /** Looks anew for points that nothing hides; call when the camera or the pieces have come to rest. */
  settle(camera: OrthographicCamera, selected: string | null): void {
    for (const body of this.candidates(selected)) {
      let samples = this.samples.get(body);
      if (!samples) this.samples.set(body, (samples = samplePoints(body)));
      this.anchors.set(body, findAnchor(body, this.bySize, camera, samples));
    }
  }

  draw(
    camera: OrthographicCamera,
    size: { widthPx: number; heightPx: number },
    selected: string | null,
  ): Numbered {
    const toScreen = (world: Vector3) => {
      world.project(camera);
      return {
        x: ((world.x + 1) / 2) * size.widthPx,
        y: ((1 - world.y) / 2) * size.heightPx,
      };
    };
    const bodies = new Map<string, PieceBody>();
    const anchors: BalloonAnchor[] = [];
    let left = size.widthPx;
    let right = 0;
    for (const body of this.bySize) {
      if (!body.isShown) continue;
      const box = new Box3().copy(body.mesh.geometry.boundingBox!);
      for (let corner = 0; corner < 8; corner++) {
        point.set(
          corner & 1 ? box.max.x : box.min.x,
          corner & 2 ? box.max.y : box.min.y,
          corner & 4 ? box.max.z : box.min.z,
        );
        const { x } = toScreen(point.applyMatrix4(body.group.matrixWorld));
        left = Math.min(left, x);
        right = Math.max(right, x);
      }
    }
    for (const body of this.shown(selected)) {
      const anchor = this.anchors.get(body)?.point ?? body.nearestToCentre(new Vector3());
      const at = toScreen(point.copy(anchor).applyMatrix4(body.group.matrixWorld));
      // A piece outside the picture has no balloon in it.
      if (at.x < 0 || at.y < 0 || at.x > size.widthPx || at.y > size.heightPx) continue;
      anchors.push({ name: body.piece.name, ...at });
      bodies.set(body.piece.name, body);
    }
    const placed = layOutBalloons(anchors, {
      width: size.widthPx,
      height: size.heightPx - SCALE_ROOM_PX,
      left,
      right,
      radius: BALLOON_RADIUS_PX,
    });
    this.overlay.draw(
      placed.map((balloon): DrawnBalloon => {
        const body = bodies.get(balloon.name)!;
        return {
          ...balloon,
          item: body.piece.item,
          isSelected: balloon.name === selected,
          isHidden: this.anchors.get(body)?.isHidden ?? false,
        };
      }),
    );
    return {
      shown: placed.length,
      total: this.bySize.filter((body) => body.isShown).length,
    };
  }

  clear(): void {
    this.overlay.draw([]);
  }

  dispose(): void {
    this.overlay.dispose();
    this.setBodies([]);
  }

  /** Bodies that get a balloon: the selected one first, then what can be seen, then the largest. */
  private shown(selected: string | null): PieceBody[] {
    const candidates = this.candidates(selected);
    const isSeen = (body: PieceBody) =>
      body.piece.name === selected || !this.anchors.get(body)?.isHidden;
    const seen = candidates.filter(isSeen);
    const hidden = candidates.filter((body) => !isSeen(body));
    return [...seen, ...hidden].slice(0, MOST_BALLOONS);
  }

  private candidates(selected: string | null): PieceBody[] {
    const inPicture = this.bySize.filter((body) => body.isShown);
    const first = inPicture.filter((body) => body.piece.name === selected);
    const rest = inPicture.filter((body) => body.piece.name !== selected);
    return [...first, ...rest].slice(0, MOST_LOOKED_AT);
  }
}
