import {
  BufferAttribute,
  BufferGeometry,
  type Group,
  LineBasicMaterial,
  LineSegments,
  type Object3D,
} from 'three';
import { LineMaterial } from 'three/addons/lines/LineMaterial.js';
import { LineSegments2 } from 'three/addons/lines/LineSegments2.js';
import { LineSegmentsGeometry } from 'three/addons/lines/LineSegmentsGeometry.js';

const WIDTH_PX = 1.2;
const OPACITY = 0.6;
/**
 * Above this many segments in a picture they are drawn as the hardware's own hairlines: smooth lines
 * are eight triangles each. Without a graphics card 48 000 of them made a frame of 162 pieces last
 * a second and a half longer.
 */
const MOST_SMOOTH = 20_000;

/** What bears edges: a body's group and its edges, flat xyz, two points a segment. */
export interface EdgeBearer {
  readonly group: Group;
  readonly featureEdges: Float32Array;
}

/** The edges of all bodies as thin graphite lines. */
export class EdgeLines {
  private readonly smooth = new LineMaterial({
    linewidth: WIDTH_PX,
    transparent: true,
    opacity: OPACITY,
  });
  private readonly hairline = new LineBasicMaterial({ transparent: true, opacity: OPACITY });
  private lines: { object: Object3D; geometry: BufferGeometry }[] = [];

  /** Draws the edges of these bodies and of no others. */
  drawOn(bearers: readonly EdgeBearer[]): void {
    this.clear();
    const total = bearers.reduce((sum, { featureEdges }) => sum + featureEdges.length / 6, 0);
    for (const { group, featureEdges } of bearers) {
      if (featureEdges.length === 0) continue;
      const line =
        total <= MOST_SMOOTH ? this.smoothLine(featureEdges) : this.hairLine(featureEdges);
      group.add(line.object);
      this.lines.push(line);
    }
  }

  setColour(colour: string): void {
    this.smooth.color.set(colour);
    this.hairline.color.set(colour);
  }

  resize(widthPx: number, heightPx: number): void {
    this.smooth.resolution.set(widthPx, heightPx);
  }

  clear(): void {
    for (const { object, geometry } of this.lines) {
      object.removeFromParent();
      geometry.dispose();
    }
    this.lines = [];
  }

  dispose(): void {
    this.clear();
    this.smooth.dispose();
    this.hairline.dispose();
  }

  private smoothLine(edges: Float32Array) {
    const geometry = new LineSegmentsGeometry().setPositions(edges);
    return { object: new LineSegments2(geometry, this.smooth), geometry };
  }

  private hairLine(edges: Float32Array) {
    const geometry = new BufferGeometry();
    geometry.setAttribute('position', new BufferAttribute(edges, 3));
    return { object: new LineSegments(geometry, this.hairline), geometry };
  }
}
