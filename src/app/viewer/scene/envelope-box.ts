import { Box3, Group, Vector3 } from 'three';
import { LineMaterial } from 'three/addons/lines/LineMaterial.js';
import { LineSegments2 } from 'three/addons/lines/LineSegments2.js';
import { LineSegmentsGeometry } from 'three/addons/lines/LineSegmentsGeometry.js';
import { type BuildSpace } from '../../../../shared/geometry/fitting/build-space.js';
import { disposeTree } from './disposal';

const WIDTH_PX = 1.4;
const ROUND_SIDES = 96;
/** Lines up the side of a cylinder, so that it reads as one. */
const ROUND_UPRIGHTS = 8;

/** The usable build volume drawn as lines. Its corner (or the corner of its square) is the origin. */
export class EnvelopeBox {
  readonly group = new Group();
  readonly box: Box3;
  private readonly material = new LineMaterial({ linewidth: WIDTH_PX });

  constructor(space: BuildSpace) {
    const [width, depth] =
      space.shape === 'round'
        ? [space.diameterMm, space.diameterMm]
        : [space.widthMm, space.depthMm];
    this.box = new Box3(new Vector3(), new Vector3(width, depth, space.heightMm));
    const corners =
      space.shape === 'round' ? cylinderLines(width / 2, space.heightMm) : boxLines(this.box.max);
    const geometry = new LineSegmentsGeometry().setPositions(corners);
    this.group.add(new LineSegments2(geometry, this.material));
  }

  setColour(colour: string): void {
    this.material.color.set(colour);
  }

  resize(widthPx: number, heightPx: number): void {
    this.material.resolution.set(widthPx, heightPx);
  }

  dispose(): void {
    disposeTree(this.group);
  }
}

/** The twelve edges of a box from the origin, flat xyz. */
function boxLines({ x, y, z }: Vector3): number[] {
  const lines: number[] = [];
  for (const a of [0, 1])
    for (const b of [0, 1]) {
      lines.push(0, a * y, b * z, x, a * y, b * z);
      lines.push(a * x, 0, b * z, a * x, y, b * z);
      lines.push(a * x, b * y, 0, a * x, b * y, z);
    }
  return lines;
}

function cylinderLines(radius: number, height: number): number[] {
  const lines: number[] = [];
  const at = (side: number) => {
    const angle = (side / ROUND_SIDES) * 2 * Math.PI;
    return [radius + radius * Math.cos(angle), radius + radius * Math.sin(angle)] as const;
  };
  for (let side = 0; side < ROUND_SIDES; side++)
    for (const z of [0, height]) lines.push(...at(side), z, ...at(side + 1), z);
  for (let side = 0; side < ROUND_SIDES; side += ROUND_SIDES / ROUND_UPRIGHTS)
    lines.push(...at(side), 0, ...at(side), height);
  return lines;
}
