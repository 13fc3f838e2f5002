import {
  type BufferAttribute,
  type InterleavedBufferAttribute,
  type Object3D,
  Vector3,
} from 'three';
import { GLTFLoader } from 'three/addons/loaders/GLTFLoader.js';
import { MeshoptDecoder } from 'three/addons/libs/meshopt_decoder.module.js';
import { disposeTree } from './disposal';
import { type LinePart, type SurfacePart, type ViewParts } from './view-parts';

/**
 * Reads a picture file (GLB, compressed with meshopt) into plain arrays in the file's own unit.
 * Quantised coordinates come back as floats with their node's transform applied.
 * @throws when the bytes are no GLB
 */
export async function loadView(bytes: ArrayBuffer): Promise<ViewParts> {
  const loader = new GLTFLoader().setMeshoptDecoder(MeshoptDecoder);
  const { scene } = await loader.parseAsync(bytes, '');
  scene.updateMatrixWorld(true);
  const surfaces: SurfacePart[] = [];
  const lines: LinePart[] = [];
  scene.traverse((object) => {
    if (isKind(object, 'isMesh')) {
      const walls = wallsOf(object);
      surfaces.push({
        ...partOf(object),
        indices: indicesOf(object),
        ...(walls && { walls }),
      });
    } else if (isKind(object, 'isLineSegments')) lines.push(segmentsOf(object));
  });
  disposeTree(scene);
  return { surfaces, lines };
}

interface Drawn extends Object3D {
  readonly geometry: {
    getAttribute(name: 'position'): BufferAttribute | InterleavedBufferAttribute;
    getAttribute(name: '_wall'): BufferAttribute | InterleavedBufferAttribute | undefined;
    readonly index: BufferAttribute | null;
  };
}

function isKind(object: Object3D, flag: 'isMesh' | 'isLineSegments'): object is Drawn {
  return (object as unknown as Record<string, unknown>)[flag] === true;
}

function partOf(object: Drawn): { name: string; positions: Float32Array } {
  const source = object.geometry.getAttribute('position');
  const positions = new Float32Array(source.count * 3);
  const vertex = new Vector3();
  for (let at = 0; at < source.count; at++)
    vertex
      .fromBufferAttribute(source, at)
      .applyMatrix4(object.matrixWorld)
      .toArray(positions, at * 3);
  return { name: nameOf(object), positions };
}

/** three gives attributes of a file's own in small letters. */
function wallsOf(object: Drawn): Float32Array | null {
  const source = object.geometry.getAttribute('_wall');
  if (!source) return null;
  return Float32Array.from({ length: source.count }, (_, at) => source.getX(at));
}

/** A mesh of several primitives is a group whose name its parts must take. */
function nameOf(object: Object3D): string {
  return object.name || object.parent?.name || '';
}

function indicesOf(object: Drawn): Uint32Array {
  const { index } = object.geometry;
  if (index) return Uint32Array.from(index.array);
  const { count } = object.geometry.getAttribute('position');
  return Uint32Array.from({ length: count }, (_, at) => at);
}

function segmentsOf(object: Drawn): LinePart {
  const part = partOf(object);
  const { index } = object.geometry;
  if (!index) return part;
  const positions = new Float32Array(index.count * 3);
  for (let at = 0; at < index.count; at++) {
    const i3 = index.getX(at) * 3;
    positions.set(part.positions.subarray(i3, i3 + 3), at * 3);
  }
  return { name: part.name, positions };
}
