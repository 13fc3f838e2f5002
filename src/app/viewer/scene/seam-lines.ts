import { type Group } from 'three';
import { LineMaterial } from 'three/addons/lines/LineMaterial.js';
import { LineSegments2 } from 'three/addons/lines/LineSegments2.js';
import { LineSegmentsGeometry } from 'three/addons/lines/LineSegmentsGeometry.js';
import { simplifyLines } from './simplify-lines';
import { type SceneSeam } from './view-parts';

const WIDTH_PX = 2.2;

/** The outlines of all seams in copper; each one travels with both of its pieces. */
export class SeamLines {
  private readonly material = new LineMaterial({
    linewidth: WIDTH_PX,
    polygonOffset: true,
    polygonOffsetFactor: -1,
    polygonOffsetUnits: -1,
  });
  private readonly geometries: LineSegmentsGeometry[] = [];
  private readonly lines: LineSegments2[] = [];

  /** @param toleranceMm how far a drawn outline may be from the true one */
  constructor(
    seams: readonly SceneSeam[],
    toleranceMm: number,
    groupOf: (name: string) => Group | undefined,
  ) {
    for (const seam of seams) {
      if (seam.positions.length === 0) continue;
      const outline = simplifyLines(seam.positions, toleranceMm);
      const geometry = new LineSegmentsGeometry().setPositions(outline);
      this.geometries.push(geometry);
      for (const name of new Set(seam.between)) {
        const group = groupOf(name);
        if (!group) continue;
        const line = new LineSegments2(geometry, this.material);
        this.lines.push(line);
        group.add(line);
      }
    }
  }

  setColour(colour: string): void {
    this.material.color.set(colour);
  }

  resize(widthPx: number, heightPx: number): void {
    this.material.resolution.set(widthPx, heightPx);
  }

  dispose(): void {
    for (const line of this.lines) line.removeFromParent();
    for (const geometry of this.geometries) geometry.dispose();
    this.material.dispose();
  }
}
