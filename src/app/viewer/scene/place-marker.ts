import type { OrthographicCamera, Vector3 } from 'three';

const SVG = 'http://www.w3.org/2000/svg';
const RADIUS_PX = 22;

/** A ring on the drawing round the place that was asked for. */
export class PlaceMarker {
  private readonly ring = document.createElementNS(SVG, 'circle');
  private place: Vector3 | null = null;

  constructor(overlay: SVGSVGElement) {
    this.ring.setAttribute('class', 'sw-viewer-place');
    this.ring.setAttribute('r', String(RADIUS_PX));
    this.ring.setAttribute('visibility', 'hidden');
    overlay.append(this.ring);
  }

  setPlace(place: Vector3 | null): void {
    this.place = place;
  }

  draw(camera: OrthographicCamera, size: { widthPx: number; heightPx: number }): void {
    this.ring.setAttribute('visibility', this.place ? 'visible' : 'hidden');
    if (!this.place) return;
    const at = this.place.clone().project(camera);
    this.ring.setAttribute('cx', String(((at.x + 1) / 2) * size.widthPx));
    this.ring.setAttribute('cy', String(((1 - at.y) / 2) * size.heightPx));
  }

  dispose(): void {
    this.ring.remove();
  }
}
