import { largestCoordinate } from '../coordinate-limits.js';
import { growingFloats, growingIndices } from '../growing-list.js';
import { refuseFile, spelledCount } from '../refusal-words.js';
import type { ModelObject, ObjectUse } from './model-part.js';
import { isMirror, thenTransform, type Transform } from './transform.js';

/** Components of components may multiply without end; no printed model has more. Own choice. */
const mostTriangles = 20_000_000;
const mostUses = 200_000;
const deepest = 32;

/** Finds an object by its number and the part that names it. */
export type FindObject = (use: ObjectUse, part: string) => { object: ModelObject; part: string };

/** Types whose shape is not printed as a part of the model. */
const passedOver = new Set(['support', 'other']);

/**
 * Lays the objects of build items out with their transforms, components within components. A
 * mirrored object has its triangles turned round, so that outside stays outside.
 */
export class ItemAssembler {
  readonly positions = growingFloats();
  readonly indices = growingIndices();
  /** Objects that were passed over because of their type. */
  skipped = 0;
  private uses = 0;

  constructor(
    private readonly find: FindObject,
    private readonly fileName: string,
  ) {}

  /** Adds one item. @returns how many triangles it has */
  add(item: ObjectUse, part: string): number {
    const before = this.indices.length;
    this.place(item, part, [1, 0, 0, 0, 1, 0, 0, 0, 1, 0, 0, 0], 0);
    return (this.indices.length - before) / 3;
  }

  private place(use: ObjectUse, usedIn: string, outer: Transform, depth: number): void {
    if (depth > deepest)
      throw refuseFile(
        this.fileName,
        'holds components that contain themselves. It is damaged; export it again.',
      );
    if (++this.uses > mostUses) throw this.tooMuch();
    const { object, part } = this.find(use, usedIn);
    if (passedOver.has(object.type)) {
      this.skipped++;
      return;
    }
    const transform = thenTransform(use.transform, outer);
    this.addMesh(object, transform);
    for (const component of object.components) this.place(component, part, transform, depth + 1);
  }

  private addMesh({ positions: from, indices: corners }: ModelObject, transform: Transform): void {
    if (this.indices.length + corners.length > 3 * mostTriangles) throw this.tooMuch();
    const first = this.positions.length / 3;
    const [a, b, c, d, e, f, g, h, i, x, y, z] = transform;
    for (let at = 0; at < from.length; at += 3) {
      const [px, py, pz] = [from[at], from[at + 1], from[at + 2]];
      this.push(px * a + py * d + pz * g + x);
      this.push(px * b + py * e + pz * h + y);
      this.push(px * c + py * f + pz * i + z);
    }
    const isTurned = isMirror(transform);
    for (let at = 0; at < corners.length; at += 3) {
      this.indices.push(first + corners[at]);
      this.indices.push(first + corners[at + (isTurned ? 2 : 1)]);
      this.indices.push(first + corners[at + (isTurned ? 1 : 2)]);
    }
  }

  private push(value: number): void {
    if (!(Math.abs(value) <= largestCoordinate))
      throw refuseFile(
        this.fileName,
        'places an object beyond ±10 000 000. It is damaged, or its unit is far too small.',
      );
    this.positions.push(value);
  }

  private tooMuch() {
    return refuseFile(
      this.fileName,
      `multiplies its components to more than ${spelledCount(mostTriangles)} triangles. It is damaged or made to do harm.`,
    );
  }
}
