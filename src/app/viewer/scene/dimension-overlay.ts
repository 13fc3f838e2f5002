import { type Box3, type OrthographicCamera, Vector3 } from 'three';

const SVG = 'http://www.w3.org/2000/svg';
/** Room between the object and its dimension line, px. */
const STANDOFF_PX = 22;
const ARROW_LENGTH_PX = 8;
const ARROW_HALF_WIDTH_PX = 2.4;

interface ScreenPoint {
  readonly x: number;
  readonly y: number;
}

/** A dimension line on the screen: where it runs and what stands on it. */
export interface Dimension {
  readonly from: ScreenPoint;
  readonly to: ScreenPoint;
  readonly edgeFrom: ScreenPoint;
  readonly edgeTo: ScreenPoint;
  readonly text: string;
}

/**
 * The three dimension lines of a box as seen by a camera: along the two lower edges that face the
 * eye and up the upright edge at the left of the picture, each standing off the box.
 */
export function boxDimensions(
  box: Box3,
  camera: OrthographicCamera,
  size: { widthPx: number; heightPx: number },
): Dimension[] {
  const eye = camera.getWorldDirection(new Vector3()).negate();
  const { min, max } = box;
  const nearX = eye.x >= 0 ? max.x : min.x;
  const nearY = eye.y >= 0 ? max.y : min.y;
  const farX = eye.x >= 0 ? min.x : max.x;
  const farY = eye.y >= 0 ? min.y : max.y;
  const footZ = eye.z >= 0 ? min.z : max.z;
  const standoffMm = STANDOFF_PX / camera.zoom;
  const outX = Math.sign(nearX - farX) * standoffMm;
  const outY = Math.sign(nearY - farY) * standoffMm;
  const screen = (x: number, y: number, z: number): ScreenPoint => {
    const at = new Vector3(x, y, z).project(camera);
    return { x: ((at.x + 1) / 2) * size.widthPx, y: ((1 - at.y) / 2) * size.heightPx };
  };
  // Of the two upright edges at the sides of the silhouette, the left one.
  const sideA = screen(nearX, farY, min.z);
  const sideB = screen(farX, nearY, min.z);
  const [uprightX, uprightY, pushX, pushY] =
    sideA.x < sideB.x ? [nearX, farY, outX, 0] : [farX, nearY, 0, outY];
  const spans: readonly [Vector3, Vector3, Vector3, number][] = [
    [
      new Vector3(min.x, nearY, footZ),
      new Vector3(max.x, nearY, footZ),
      new Vector3(0, outY, 0),
      max.x - min.x,
    ],
    [
      new Vector3(nearX, min.y, footZ),
      new Vector3(nearX, max.y, footZ),
      new Vector3(outX, 0, 0),
      max.y - min.y,
    ],
    [
      new Vector3(uprightX, uprightY, min.z),
      new Vector3(uprightX, uprightY, max.z),
      new Vector3(pushX, pushY, 0),
      max.z - min.z,
    ],
  ];
  return spans.map(([from, to, push, lengthMm]) => ({
    edgeFrom: screen(from.x, from.y, from.z),
    edgeTo: screen(to.x, to.y, to.z),
    from: screen(from.x + push.x, from.y + push.y, from.z),
    to: screen(to.x + push.x, to.y + push.y, to.z),
    text: dimensionText(lengthMm),
  }));
}

/** Millimetres as on a drawing: no unit on the line, one decimal below a metre. */
function dimensionText(lengthMm: number): string {
  return lengthMm >= 1_000 ? lengthMm.toFixed(0) : String(Number(lengthMm.toFixed(1)));
}

/** Draws dimension lines over the picture (`sw-dimension…` classes). */
export class DimensionOverlay {
  private readonly group: SVGGElement;

  constructor(private readonly svg: SVGSVGElement) {
    this.group = this.make('g', '');
    svg.append(this.group);
  }

  draw(dimensions: readonly Dimension[]): void {
    this.group.replaceChildren(...dimensions.filter(isReadable).flatMap((one) => this.lines(one)));
  }

  dispose(): void {
    this.group.remove();
  }

  private lines({ from, to, edgeFrom, edgeTo, text }: Dimension): SVGElement[] {
    const path = this.make('path', 'sw-dimension');
    path.setAttribute('d', `${line(edgeFrom, from)}${line(edgeTo, to)}${line(from, to)}`);
    const arrows = this.make('path', 'sw-dimension-arrow');
    arrows.setAttribute('d', arrow(from, to) + arrow(to, from));
    const label = this.make('text', 'sw-dimension-text');
    label.setAttribute('x', ((from.x + to.x) / 2).toFixed(1));
    label.setAttribute('y', ((from.y + to.y) / 2).toFixed(1));
    label.textContent = text;
    return [path, arrows, label];
  }

  private make<K extends keyof SVGElementTagNameMap>(name: K, style: string) {
    const node = this.svg.ownerDocument.createElementNS(SVG, name);
    if (style) node.setAttribute('class', style);
    return node;
  }
}

/** A length seen end on has no room for its number. */
function isReadable({ from, to }: Dimension): boolean {
  return Math.hypot(to.x - from.x, to.y - from.y) > 3 * ARROW_LENGTH_PX;
}

function line(from: ScreenPoint, to: ScreenPoint): string {
  return `M${from.x.toFixed(1)} ${from.y.toFixed(1)}L${to.x.toFixed(1)} ${to.y.toFixed(1)}`;
}

/** A slender arrow head with its tip at `tip`. */
function arrow(tip: ScreenPoint, tail: ScreenPoint): string {
  const length = Math.hypot(tail.x - tip.x, tail.y - tip.y);
  const alongX = (tail.x - tip.x) / length;
  const alongY = (tail.y - tip.y) / length;
  const baseX = tip.x + alongX * ARROW_LENGTH_PX;
  const baseY = tip.y + alongY * ARROW_LENGTH_PX;
  const sideX = -alongY * ARROW_HALF_WIDTH_PX;
  const sideY = alongX * ARROW_HALF_WIDTH_PX;
  const corner = (x: number, y: number) => `${x.toFixed(1)} ${y.toFixed(1)}`;
  return `M${corner(tip.x, tip.y)}L${corner(baseX + sideX, baseY + sideY)}L${corner(baseX - sideX, baseY - sideY)}Z`;
}
