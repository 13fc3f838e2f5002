import { largestCoordinate } from '../coordinate-limits.js';
import { growingFloats, growingIndices } from '../growing-list.js';
import { countOf, refuseFile } from '../refusal-words.js';
import { noTransform, parseTransform, type Transform } from './transform.js';
import { readXml } from './xml-events.js';

/** Where an object is used: in a build item or as a component of another one. */
export interface ObjectUse {
  readonly objectId: string;
  /** Another model part; null for the same one (production extension). */
  readonly path: string | null;
  readonly transform: Transform;
}

export interface ModelObject {
  readonly name: string;
  readonly type: string;
  readonly positions: Float64Array;
  readonly indices: Uint32Array;
  readonly components: readonly ObjectUse[];
}

/** One XML part of a 3MF file. */
export interface ModelPart {
  readonly unit: string;
  readonly objects: ReadonlyMap<string, ModelObject>;
  readonly items: readonly (ObjectUse & { readonly partNumber: string })[];
}

/** Extensions whose parts of the file do not change the shape: production paths, colours and materials. */
const knownExtensions = [
  /^http:\/\/schemas\.microsoft\.com\/3dmanufacturing\/production\//,
  /^http:\/\/schemas\.microsoft\.com\/3dmanufacturing\/material\//,
];

/** What is collected of one object while its element is open. */
class OpenObject {
  readonly positions = growingFloats();
  readonly indices = growingIndices();
  readonly components: ObjectUse[] = [];

  constructor(
    readonly id: string,
    readonly name: string,
    readonly type: string,
  ) {}
}

/**
 * Reads a model part (3MF Core 1.4.0): objects with their meshes or components, and build items.
 * Throws a JobRefusal on what the specification forbids and on required extensions that are not known.
 */
export function readModelPart(
  bytes: Uint8Array,
  fileName: string,
  onProgress: (fraction: number) => void,
): ModelPart {
  const reader = new ModelPartReader(fileName);
  readXml(bytes, fileName, reader, onProgress);
  if (!reader.isModel) throw refuseFile(fileName, 'holds a model part that is none.');
  return reader;
}

class ModelPartReader implements ModelPart {
  unit = 'millimeter';
  isModel = false;
  readonly objects = new Map<string, ModelObject>();
  readonly items: (ObjectUse & { partNumber: string })[] = [];
  private prefixes: ReadonlyMap<string, string> = new Map();
  private object: OpenObject | null = null;

  constructor(private readonly fileName: string) {}

  namespaces = (prefixes: ReadonlyMap<string, string>): void => {
    this.prefixes = prefixes;
  };

  open = (name: string, attributes: ReadonlyMap<string, string>): void => {
    const { object } = this;
    if (name === 'vertex' && object) this.vertex(object, attributes);
    else if (name === 'triangle' && object) this.triangle(object, attributes);
    else if (name === 'component' && object) object.components.push(this.use(attributes));
    else if (name === 'item')
      this.items.push({ ...this.use(attributes), partNumber: attributes.get('partnumber') ?? '' });
    else if (name === 'object') this.beginObject(attributes);
    else if (name === 'model') this.beginModel(attributes);
  };

  close = (name: string): void => {
    if (name !== 'object' || !this.object) return;
    const { id, name: called, type, positions, indices, components } = this.object;
    const vertices = positions.length / 3;
    const corners = indices.view();
    for (let i = 0; i < corners.length; i++)
      if (corners[i] >= vertices)
        throw this.refuse(`has an object (${id}) that names vertex ${corners[i]} of ${vertices}`);
    this.objects.set(id, {
      name: called,
      type,
      positions: positions.view().slice(),
      indices: corners.slice(),
      components,
    });
    this.object = null;
  };

  private beginModel(attributes: ReadonlyMap<string, string>): void {
    this.isModel = true;
    this.unit = attributes.get('unit') ?? 'millimeter';
    for (const prefix of (attributes.get('requiredextensions') ?? '').split(/\s+/)) {
      if (prefix === '') continue;
      const namespace = this.prefixes.get(prefix) ?? '';
      if (!knownExtensions.some((known) => known.test(namespace)))
        throw refuseFile(
          this.fileName,
          `needs the 3MF extension “${prefix.slice(0, 20)}”, which is not read here. Export it without that extension, or as STL.`,
        );
    }
  }

  private beginObject(attributes: ReadonlyMap<string, string>): void {
    const id = attributes.get('id');
    if (!id) throw this.refuse('has an object without a number');
    if (this.objects.has(id))
      throw this.refuse(`has two objects with the number ${id.slice(0, 20)}`);
    const name = (attributes.get('name') ?? '').trim().slice(0, 60);
    this.object = new OpenObject(id, name, attributes.get('type') ?? 'model');
  }

  private vertex({ positions }: OpenObject, attributes: ReadonlyMap<string, string>): void {
    for (const axis of ['x', 'y', 'z']) {
      const text = attributes.get(axis)?.trim();
      const value = text ? Number(text) : NaN;
      if (!Number.isFinite(value)) throw this.refuse(`has a vertex whose ${axis} is no number`);
      if (Math.abs(value) > largestCoordinate) throw this.refuse('has a vertex beyond ±10 000 000');
      positions.push(value);
    }
  }

  private triangle({ indices }: OpenObject, attributes: ReadonlyMap<string, string>): void {
    for (const corner of ['v1', 'v2', 'v3']) {
      const text = attributes.get(corner)?.trim() ?? '';
      if (!/^\d{1,9}$/.test(text))
        throw this.refuse(`has a triangle whose ${corner} is no vertex number`);
      indices.push(Number(text));
    }
  }

  private use(attributes: ReadonlyMap<string, string>): ObjectUse {
    const objectId = attributes.get('objectid');
    if (!objectId) throw this.refuse('has an item or component that names no object');
    const text = attributes.get('transform');
    const transform = text === undefined ? noTransform : parseTransform(text);
    if (!transform)
      throw this.refuse(`has a transform that is not ${countOf(12, 'finite number')}`);
    return { objectId, transform, path: attributes.get('path') ?? null };
  }

  private refuse(what: string) {
    return refuseFile(this.fileName, `${what}. It is damaged; export it again.`);
  }
}
